import { nextFast, transformOf } from '../fourier/fft.js';
import type { LagSums } from './lag-sums.js';

/** Blocks of lag products that count, [from, to) in blocks; outside the signal is off. */
export interface Span {
  readonly from: number;
  readonly to: number;
}

/** The spectrum of a sequence of lag products, and what it would be without periodic structure. */
export interface ProductSpectrum {
  /** Power of each line of the summed products, mean removed; line k is the frequency k / size per block. */
  readonly power: Float64Array;
  readonly size: number;
  /** Expected power of a structureless line, in equal stretches of frequency. */
  readonly scatter: Float64Array;
  /** Mean product, removed before the transform: what correlates all the time is no prefix. */
  readonly re: number;
  readonly im: number;
  readonly length: number;
}

/** Stretches over which the scatter is taken as constant: wide enough to hold several harmonics of any symbol rate. */
const STRETCHES = 24;

export function productSpectrum(sums: LagSums, spans: readonly Span[]): ProductSpectrum {
  const first = spans[0].from;
  const length = spans[spans.length - 1].to - first;
  const { re, im } = meanOver(sums, spans);
  const size = nextFast(1.02 * length);
  const input = new Float64Array(2 * size);
  for (const { from, to } of spans) {
    for (let b = from; b < to; b++) {
      input[2 * (b - first)] = sums.re[b] - re;
      input[2 * (b - first) + 1] = sums.im[b] - im;
    }
  }
  const output = new Float64Array(2 * size);
  transformOf(size).forward(input, output);
  const power = new Float64Array(size);
  for (let k = 0; k < size; k++) power[k] = output[2 * k] ** 2 + output[2 * k + 1] ** 2;
  return { power, size, scatter: stretchMedians(power), re, im, length };
}

function meanOver(sums: LagSums, spans: readonly Span[]): { re: number; im: number } {
  let re = 0;
  let im = 0;
  let count = 0;
  for (const { from, to } of spans) {
    for (let b = from; b < to; b++) {
      re += sums.re[b];
      im += sums.im[b];
    }
    count += to - from;
  }
  return { re: re / Math.max(1, count), im: im / Math.max(1, count) };
}

/** A structureless line is exponential, so its mean is median / ln 2; lines of a prefix are too few to move the median. */
function stretchMedians(power: Float64Array): Float64Array {
  const n = power.length;
  const stretches = Math.max(1, Math.min(STRETCHES, Math.floor(n / 24)));
  return Float64Array.from({ length: stretches }, (_, s) => {
    const from = Math.floor((s * n) / stretches);
    const to = Math.floor(((s + 1) * n) / stretches);
    const step = Math.max(1, Math.floor((to - from) / 4096));
    const part = new Float64Array(Math.floor((to - from) / step));
    for (let i = 0; i < part.length; i++) part[i] = power[from + i * step];
    part.sort();
    return Math.max(1e-300, part[part.length >> 1] / Math.LN2);
  });
}

/** Expected power without structure at a frequency in cycles per block (0 to 1). */
export function scatterAt({ scatter }: ProductSpectrum, cycles: number): number {
  const n = scatter.length;
  const at = cycles * n - 0.5;
  const low = Math.floor(at);
  const a = scatter[(low + n) % n];
  const b = scatter[(low + 1 + n) % n];
  return a + (at - low) * (b - a);
}
