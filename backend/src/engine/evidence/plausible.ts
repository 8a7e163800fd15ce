import { clippedFraction } from '../level/clipping.js';
import type { SampleSource } from '../types.js';

const SAMPLES = 32_768;
const OVERDRIVEN = 0.02;

/**
 * Do the values look like a received signal? I and Q of any modulation that fills its band are
 * close to normal (fourth moment over the squared second: 3; more where the signal pauses) and
 * equally strong. Bytes read in the wrong order or width are not: uniform (1.8), two rails (1),
 * floats of every size, or I and Q unlike each other.
 */
export function plausible(source: SampleSource): boolean {
  const iq = middleOf(source);
  const i = shape(iq, 0);
  const q = shape(iq, 1);
  if (!(i.power > 0) || !(q.power > 0)) return false;
  const alike = Math.abs(Math.log(i.power / q.power)) < Math.log(2);
  // An overdriven receiver flattens the peaks: the rails show it.
  const least = clippedFraction(iq) > OVERDRIVEN ? 0 : 1.9;
  return alike && isOneScale(iq) && [i, q].every(({ kurtosis }) => kurtosis > least && kurtosis < 300);
}

/** Widest range of magnitudes, from the lowest tenth to the highest: 160 dB is beyond any receiver, pauses included. */
const WIDEST = 1e8;

/** False for floats in the wrong byte order: they have exponents at random, from the least to the greatest. */
export function oneScale(source: SampleSource): boolean {
  return isOneScale(middleOf(source));
}

function middleOf(source: SampleSource): Float32Array {
  const count = Math.min(SAMPLES, source.samples);
  return source.read(Math.floor((source.samples - count) / 2), count);
}

function isOneScale(iq: Float32Array): boolean {
  const magnitudes = iq.map(Math.abs).filter((x) => x > 0).sort();
  const at = (share: number): number => magnitudes[Math.floor(share * (magnitudes.length - 1))] ?? 0;
  return at(0.9) < WIDEST * at(0.1);
}

/** Power and the fourth moment over its square, of I (0) or Q (1), without their mean. */
function shape(iq: Float32Array, first: 0 | 1): { power: number; kurtosis: number } {
  const n = iq.length / 2;
  let mean = 0;
  for (let k = first; k < iq.length; k += 2) mean += iq[k]! / n;
  let second = 0, fourth = 0;
  for (let k = first; k < iq.length; k += 2) {
    const square = (iq[k]! - mean) * (iq[k]! - mean);
    second += square / n;
    fourth += (square * square) / n;
  }
  return { power: second, kurtosis: fourth / (second * second) };
}
