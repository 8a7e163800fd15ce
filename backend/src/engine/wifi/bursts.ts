import type { ClockDivisor } from './piece.js';

/** A place where a short training field may start. */
export interface TrainingCandidate {
  /** Sample in the window at which the field starts, within about half a microsecond. */
  readonly at: number;
  /** Repetition at 0.8 µs less that at 0.4 µs, 0 to 1. */
  readonly repetition: number;
  /** The same in units of its scatter in white noise. */
  readonly score: number;
}

/** Chance reaches this about once in 10⁶ independent windows. */
const LEAST_SCORE = 3.7;
/** A plateau lasts 0.8 µs; two frames are at least this far apart. */
const APART_US = 16;

/**
 * Places in the window (interleaved, at any rate) where 6.4 µs repeat after 0.8 µs and do not
 * after 0.4 µs, as the short training field does with its tones 1.25 MHz apart (IEEE
 * 802.11-2016 clause 17.3.3); a narrow signal or a tone repeats at both. Best first.
 */
export function findTraining(iq: Float32Array, rateHz: number, clock: ClockDivisor, keep: number): TrainingCandidate[] {
  const us = (rateHz * 1e-6) * clock;
  const lag = Math.round(0.8 * us);
  const half = Math.round(0.4 * us);
  const width = Math.round(6.4 * us);
  const samples = iq.length >> 1;
  if (half < 1 || samples < width + lag) return [];
  const full = slidingRepetition(iq, lag, width);
  const near = slidingRepetition(iq, half, width);
  const scatter = Math.sqrt(width);
  const found: TrainingCandidate[] = [];
  const metric = (n: number) => full[n] - near[n];
  const apart = Math.round(APART_US * us);
  for (let n = 0; n < full.length; n++) {
    if (metric(n) * scatter < LEAST_SCORE) continue;
    let top = n;
    let end = n;
    for (; end < full.length && end - n < apart && end - top < lag * 2; end++) if (metric(end) > metric(top)) top = end;
    found.push({ at: plateauStart(metric, top, lag), repetition: metric(top), score: metric(top) * scatter });
    n = Math.max(end, top + lag);
  }
  return found.sort((a, b) => b.score - a.score).slice(0, keep);
}

/** The plateau is one lag wide: its start is where the metric first comes within a tenth of the top. */
function plateauStart(metric: (n: number) => number, top: number, lag: number): number {
  let start = top;
  while (start > 0 && top - start < lag && metric(start - 1) > 0.9 * metric(top)) start--;
  return start;
}

/** |Σ x[n]·x*[n+lag]| over Σ of the mean energy of both ends, over `width` samples from every place. */
function slidingRepetition(iq: Float32Array, lag: number, width: number): Float32Array {
  const places = (iq.length >> 1) - lag - width + 1;
  const out = new Float32Array(Math.max(0, places));
  let re = 0, im = 0, energy = 0;
  for (let n = 0; n < places + width - 1; n++) {
    const a = 2 * n, b = a + 2 * lag;
    re += iq[a] * iq[b] + iq[a + 1] * iq[b + 1];
    im += iq[a + 1] * iq[b] - iq[a] * iq[b + 1];
    energy += iq[a] * iq[a] + iq[a + 1] * iq[a + 1] + iq[b] * iq[b] + iq[b + 1] * iq[b + 1];
    const first = n - width + 1;
    if (first < 0) continue;
    out[first] = energy > 0 ? (2 * Math.sqrt(re * re + im * im)) / energy : 0;
    const c = 2 * first, d = c + 2 * lag;
    re -= iq[c] * iq[d] + iq[c + 1] * iq[d + 1];
    im -= iq[c + 1] * iq[d] - iq[c] * iq[d + 1];
    energy -= iq[c] * iq[c] + iq[c + 1] * iq[c + 1] + iq[d] * iq[d] + iq[d + 1] * iq[d + 1];
  }
  return out;
}
