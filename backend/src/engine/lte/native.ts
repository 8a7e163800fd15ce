import { nextPowerOfTwo } from '../fourier/fft.js';
import { mix } from '../vector/mix.js';
import { resample } from '../vector/resample.js';
import type { SampleSource } from '../types.js';
import { SPACING_HZ } from './numerology.js';

/** A piece of the capture at 15 kHz times a power of two. */
export interface NativeWindow {
  readonly iq: Float32Array;
  /** Transform size: samples in a useful symbol. */
  readonly size: number;
  readonly startSample: number;
  /** What was added to every frequency before resampling, Hz. */
  readonly shiftHz: number;
  /** |f| below this is passed without loss, Hz. */
  readonly passHz: number;
}

/** Beyond this rate the band is cut to what is on the air, so that a wide recording costs no more. */
const WIDEST_HZ = 62e6;

/** Reads `seconds` from `startSample`; null where the capture is narrower than the synchronisation signals. */
export function readNative(source: SampleSource, at: { startSample: number; seconds: number; occupied: { lowHz: number; highHz: number } | null }): NativeWindow | null {
  const rate = source.sampleRateHz;
  if (rate < 1.2e6) return null;
  const band = rate > WIDEST_HZ ? at.occupied : null;
  const middle = band ? (band.lowHz + band.highHz) / 2 : 0;
  const wanted = band ? Math.min(rate, Math.max(30e6, 1.25 * (band.highHz - band.lowHz))) : rate;
  const size = Math.max(128, nextPowerOfTwo(Math.round(wanted / SPACING_HZ - 1e-3)));
  const count = Math.min(source.samples - at.startSample, Math.ceil(at.seconds * rate));
  const iq = source.read(at.startSample, count);
  const to = size * SPACING_HZ;
  const moved = to === rate ? (middle === 0 ? iq : mix(iq, -middle, rate)) : resample(iq, rate, to, { shiftHz: -middle });
  return { iq: moved, size, startSample: at.startSample, shiftHz: -middle, passHz: 0.5 * Math.min(rate, to) };
}
