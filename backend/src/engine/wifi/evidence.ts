import type { Frame } from './frame.js';

/** Candidates tried in a capture, places and senses in the band of each. */
const TRIES = 40 * 150;

/**
 * Against chance, in nats: the squares of the two training scores are exponential with mean 1
 * for other signals, so that their sum x has the chance (1 + x)·exp(−x), times the tries. A
 * valid L-SIG passes by chance once in eight (parity, reserved bit, rates), HT-SIG and
 * VHT-SIG-A once in 256, HE-SIG-A once in 16.
 */
export function frameEvidence({ preamble, legacy, signal }: Frame): number {
  const x = preamble.score ** 2 + preamble.shortScore ** 2;
  const fields = (legacy ? Math.log(8) : 0) + (signal ? Math.log(signal.format === 'he' ? 16 : 256) : 0);
  return x - Math.log1p(x) - Math.log(TRIES) + fields;
}

/** One frame with this much needs no second: chance leaves one capture in 10⁵. */
const SURE = 11.5;
/** Two frames with less must agree in frequency, Hz. */
const AGREE_HZ = 60_000;

/** Frames that chance does not explain: a sure one, or two at the same frequency; and those that agree with them. */
export function credibleFrames(frames: readonly Frame[]): Frame[] {
  const near = (a: Frame, b: Frame) => a.preamble.piece.inverted === b.preamble.piece.inverted
    && Math.abs(rasterOffset(a) - rasterOffset(b)) < AGREE_HZ;
  const sure = frames.filter((a) => frameEvidence(a) >= SURE
    || frames.some((b) => b !== a && near(a, b) && Math.max(0, frameEvidence(a)) + Math.max(0, frameEvidence(b)) >= SURE));
  return frames.filter((frame) => sure.includes(frame) || sure.some((other) => near(frame, other)));
}

/** Offset within the 20 MHz raster: subchannels of one wide channel count as one place. */
function rasterOffset(frame: Frame): number {
  const { offsetHz, clock } = frame.preamble.piece;
  const raster = 20e6 / clock;
  return offsetHz - raster * Math.round(offsetHz / raster);
}
