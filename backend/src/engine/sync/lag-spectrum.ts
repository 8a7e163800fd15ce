import { nextFast, transformOf } from '../fourier/fft.js';
import { smoothed } from '../spectrum/occupied.js';
import { sinc, type Working } from './lag-sums.js';

/** Strength of the correlation at every lag, free of the spectrum's own shape. */
export interface LagSpectrum {
  /** Power at each whole lag over its scatter without structure; index is the lag in samples. */
  readonly strength: Float64Array;
  readonly rateHz: number;
}

export interface LagPeak {
  /** Lag in samples, between samples too. */
  readonly lag: number;
  readonly strength: number;
}

/**
 * Correlation of a window with itself at every lag up to `maxLag` samples, through averaged
 * periodograms weighted by signal / (signal + noise)²: the weight that lets a prefix stand out
 * best of Gaussian scatter, and that takes a narrow line down to its neighbours.
 */
export function lagSpectrum({ iq, rateHz }: Working, maxLag: number): LagSpectrum {
  const samples = iq.length >> 1;
  const size = samples <= MOST_POINTS ? nextFast(samples) : MOST_POINTS;
  const power = withoutLines(periodogram(iq, size));
  const weighted = new Float64Array(2 * size);
  const reachBins = Math.max(4, Math.round(size / 110));
  const shape = smoothed(power, reachBins);
  const sorted = Float64Array.from(shape).sort();
  const floor = sorted[Math.floor(size / 20)];
  const top = sorted[Math.floor(size * 0.95)];
  const noise = top > 1.5 * floor ? 0.95 * floor : 0;
  for (let k = 0; k < size; k++) {
    const s = Math.max(0, shape[k] - noise);
    weighted[2 * k] = shape[k] > 0 ? ((power[k] - shape[k]) * s) / (shape[k] * shape[k]) : 0;
  }
  const lags = new Float64Array(2 * size);
  transformOf(size).inverse(weighted, lags);
  const reach = Math.min(maxLag, size >> 1);
  return { strength: overScatter(lags, { reach, width: (2 * reachBins + 1) / size }), rateHz };
}

/** The longest single transform; a longer window is averaged piece by piece. */
const MOST_POINTS = 1 << 18;
/** A line stands this far above its neighbourhood; noise exceeds it once in 400 bins. */
const LINE = 6;

function periodogram(iq: Float32Array, size: number): Float64Array {
  const input = new Float64Array(2 * size);
  const output = new Float64Array(2 * size);
  const power = new Float64Array(size);
  const samples = iq.length >> 1;
  for (let at = 0; at === 0 || at + size <= samples; at += size) {
    const part = iq.subarray(2 * at, 2 * Math.min(samples, at + size));
    input.set(part);
    input.fill(0, part.length);
    transformOf(size).forward(input, output);
    for (let k = 0; k < size; k++) power[k] += output[2 * k] ** 2 + output[2 * k + 1] ** 2;
  }
  return power;
}

/**
 * A pilot that repeats itself every symbol, or a spur, is a line: it correlates at every multiple
 * of the symbol and hides the prefix, whose mark is a ripple over all of the spectrum.
 */
function withoutLines(power: Float64Array): Float64Array {
  const n = power.length;
  const blocks = Math.max(4, Math.floor(n / 64));
  const medians = Float64Array.from({ length: blocks }, (_, b) => {
    const part = power.slice(Math.floor((b * n) / blocks), Math.floor(((b + 1) * n) / blocks)).sort();
    return part[part.length >> 1] / Math.LN2;
  });
  return power.map((p, k) => {
    const at = ((k + 0.5) * blocks) / n - 0.5;
    const low = Math.floor(at);
    const a = medians[(low + blocks) % blocks];
    const b = medians[(low + 1) % blocks];
    return Math.min(p, LINE * (a + (at - low) * (b - a)));
  });
}

/** Taking the smoothed shape away weakens the short lags; that is known and made good, and where too little is left nothing is said. */
function overScatter(lags: Float64Array, { reach, width }: { reach: number; width: number }): Float64Array {
  const kept = (lag: number) => 1 - sinc(lag * width);
  const first = Math.min(reach, Array.from({ length: reach }, (_, i) => i).find((i) => kept(i) > 0.2) ?? reach);
  const power = Float64Array.from({ length: reach }, (_, i) => (i < first ? 0 : (lags[2 * i] ** 2 + lags[2 * i + 1] ** 2) / kept(i) ** 2));
  const block = Math.max(64, Math.ceil(reach / 64));
  const out = new Float64Array(reach);
  for (let from = first; from < reach; from += block) {
    const part = power.slice(from, Math.min(reach, from + block));
    const scatter = Float64Array.from(part).sort()[part.length >> 1] / Math.LN2;
    for (let i = 0; i < part.length; i++) out[from + i] = scatter > 0 ? part[i] / scatter : 0;
  }
  return out;
}

/** The strongest separate lags above `least`, strongest first, at most `count`. */
export function lagPeaks({ strength }: LagSpectrum, { from, least, count }: { from: number; least: number; count: number }): LagPeak[] {
  const peaks: LagPeak[] = [];
  for (let i = Math.max(1, Math.ceil(from)); i < strength.length - 1; i++) {
    if (strength[i] < least || strength[i] < strength[i - 1] || strength[i] < strength[i + 1]) continue;
    peaks.push({ lag: i + vertex(strength, i), strength: strength[i] });
  }
  peaks.sort((a, b) => b.strength - a.strength);
  return apart(peaks).slice(0, count);
}

function vertex(s: Float64Array, i: number): number {
  const [a, b, c] = [Math.sqrt(s[i - 1]), Math.sqrt(s[i]), Math.sqrt(s[i + 1])];
  const bend = a - 2 * b + c;
  return bend < 0 ? Math.max(-0.5, Math.min(0.5, (0.5 * (a - c)) / bend)) : 0;
}

/** The side lobes of a strong peak are no peaks of their own. */
function apart(sorted: LagPeak[]): LagPeak[] {
  const out: LagPeak[] = [];
  for (const peak of sorted) {
    if (out.some((o) => Math.abs(o.lag - peak.lag) < Math.max(4, 0.004 * o.lag))) continue;
    out.push(peak);
    if (out.length >= 64) break;
  }
  return out;
}
