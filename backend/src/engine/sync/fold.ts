import { transformOf } from '../fourier/fft.js';
import type { LagSums } from './lag-sums.js';
import { scatterAt, type ProductSpectrum, type Span } from './product-spectrum.js';

/** One period of the lag products, summed over the window, as spectral lines, and the scatter of each. */
export interface Folded {
  /** Products summed in each bin of the period, overall mean removed, interleaved complex. */
  readonly profile: Float64Array;
  /** Its transform, interleaved. */
  readonly lines: Float64Array;
  /** Expected power of each line without structure. */
  readonly scatter: Float64Array;
  readonly bins: number;
  /** |x|² summed in each bin: what a full correlation would give. */
  readonly power: Float64Array;
  /** Block at which the first bin of the profile begins. */
  readonly origin: number;
}

export interface FoldPlan {
  /** In blocks of the lag sums, fractional. */
  readonly period: number;
  readonly spans: readonly Span[];
  readonly spectrum: ProductSpectrum;
}

/** Null where the spans hold less than one period. */
export function fold(sums: LagSums, plan: FoldPlan): Folded | null {
  const { period, spans, spectrum } = plan;
  if (spans.reduce((n, s) => n + s.to - s.from, 0) < period) return null;
  const bins = fastAtMost(Math.floor(period));
  const origin = spans[0].from;
  const { profile, power } = summed(sums, plan, { bins, origin });
  const lines = new Float64Array(2 * bins);
  transformOf(bins).forward(profile, lines);
  const scatter = Float64Array.from({ length: bins }, (_, k) => scatterAt(spectrum, (k <= bins / 2 ? k : k - bins + period) / period));
  return { profile, lines, scatter, bins, power, origin };
}

function summed(sums: LagSums, { period, spans, spectrum }: FoldPlan, { bins, origin }: { bins: number; origin: number }): { profile: Float64Array; power: Float64Array } {
  const profile = new Float64Array(2 * bins);
  const power = new Float64Array(bins);
  for (const { from, to } of spans) {
    for (let b = from; b < to; b++) {
      const turns = (b - origin + 0.5) / period;
      const bin = Math.floor((turns - Math.floor(turns)) * bins);
      profile[2 * bin] += sums.re[b] - spectrum.re;
      profile[2 * bin + 1] += sums.im[b] - spectrum.im;
      power[bin] += sums.power[b];
    }
  }
  return { profile, power };
}

/** The largest even length of at most `n` made of 2, 3 and 5. */
export function fastAtMost(n: number): number {
  for (let size = Math.max(4, n - (n % 2)); ; size -= 2) {
    let rest = size;
    for (const p of [2, 3, 5]) while (rest % p === 0) rest /= p;
    if (rest === 1 || size <= 4) return size;
  }
}
