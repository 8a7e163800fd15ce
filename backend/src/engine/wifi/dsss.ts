import type { SampleSource, Tried } from '../types.js';
import { resample } from '../vector/resample.js';

/** The chips that spread every bit, IEEE 802.11-2016 clause 15.4.4.4: 11 in a microsecond. */
const BARKER = [1, -1, 1, 1, -1, 1, 1, 1, -1, -1, -1];
const CHIP_HZ = 11e6;
const SAMPLES_PER_BIT = 22;
/** Bits of preamble that are looked at: the short one has 72, the long one 144. */
const BITS = 60;
/** White noise folded over 60 bits peaks at 1.6 times its mean, a spread signal above 5. */
const LEAST_PEAK = 3;

/**
 * Bursts that are 802.11 frames but not OFDM (DSSS and CCK, whose preambles are spread by
 * Barker's sequence), named as such. Looks at the first few bursts of the capture's start.
 */
export function nameOtherFrames(source: SampleSource): Tried[] {
  if (source.sampleRateHz < 18e6) return [];
  const count = Math.min(source.samples, Math.round(0.02 * source.sampleRateHz));
  const iq = source.read(0, count);
  const out: Tried[] = [];
  for (const start of burstStarts(iq, source.sampleRateHz).slice(0, 6)) {
    const length = Math.round((BITS + 20) * 1e-6 * source.sampleRateHz);
    const piece = resample(iq.subarray(2 * start, 2 * (start + length)), source.sampleRateHz, 2 * CHIP_HZ);
    const peak = spreadingPeak(piece);
    if (peak < LEAST_PEAK) continue;
    out.push({
      what: `802.11 frame at ${((1000 * start) / source.sampleRateHz).toFixed(3)} ms`,
      result: `not OFDM: spread by an 11-chip Barker sequence at 11 Mchip/s (peak ${peak.toFixed(1)} times the mean)`,
    });
  }
  return out;
}

/** Rises of the level by 6 dB over 8 µs blocks. */
function burstStarts(iq: Float32Array, rateHz: number): number[] {
  const block = Math.max(1, Math.round(8e-6 * rateHz));
  const powers: number[] = [];
  for (let n = 0; n + block <= iq.length >> 1; n += block) {
    let sum = 0;
    for (let i = 2 * n; i < 2 * (n + block); i++) sum += iq[i] * iq[i];
    powers.push(sum);
  }
  const starts = powers[0] > 4 * Math.min(...powers) || powers.every((p) => p < 4 * powers[0]) ? [0] : [];
  for (let b = 1; b < powers.length; b++) if (powers[b] > 4 * powers[b - 1]) starts.push(b * block);
  return starts;
}

/** Despreads at every sample, folds the power over bits: highest place over the mean. */
function spreadingPeak(iq: Float32Array): number {
  const fold = new Float64Array(SAMPLES_PER_BIT);
  const places = Math.min(BITS * SAMPLES_PER_BIT, (iq.length >> 1) - SAMPLES_PER_BIT);
  for (let n = 0; n < places; n++) {
    let re = 0, im = 0;
    for (let chip = 0; chip < BARKER.length; chip++) {
      re += BARKER[chip] * iq[2 * (n + 2 * chip)];
      im += BARKER[chip] * iq[2 * (n + 2 * chip) + 1];
    }
    fold[n % SAMPLES_PER_BIT] += re * re + im * im;
  }
  const sum = fold.reduce((a, b) => a + b, 0);
  return sum > 0 ? (Math.max(...fold) * SAMPLES_PER_BIT) / sum : 0;
}
