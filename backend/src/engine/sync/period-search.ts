import { sinc, type LagSums } from './lag-sums.js';
import { scatterAt, type ProductSpectrum } from './product-spectrum.js';

export interface PeriodPeak {
  /** Symbol period in blocks of the lag sums. */
  readonly period: number;
  readonly strength: number;
}

/** Prefixes between these parts of the useful symbol are looked for: 1/64 to a half. */
const SHORTEST = 1 + 1 / 72;
const LONGEST = 1.52;
const HARMONICS = 10;

/**
 * Symbol periods at which the lag products repeat, strongest first. A prefix that recurs every
 * symbol puts lines at the multiples of the symbol rate into the products' spectrum, as high as
 * its length lets them; their power is summed for every period between 1.014 and 1.52 useful
 * symbols. Spans (bursts that start at any time) are added by power, so that their phases do not matter.
 */
export function periodPeaks(sums: LagSums, all: readonly ProductSpectrum[], count: number): PeriodPeak[] {
  const useful = sums.lag / sums.hop;
  const spectra = all.filter((s) => s.length > 4 * useful);
  if (spectra.length === 0) return [];
  const longest = Math.max(...spectra.map((s) => s.length));
  const step = (0.2 * useful * useful) / (longest * Math.min(HARMONICS, useful / 4));
  const steps = Math.min(40_000, Math.ceil((useful * (LONGEST - SHORTEST)) / step));
  const strength = new Float64Array(steps);
  for (let i = 0; i < steps; i++) {
    const period = useful * SHORTEST + (i * useful * (LONGEST - SHORTEST)) / steps;
    strength[i] = spectra.reduce((sum, s) => sum + harmonicSum(s, period, useful), 0);
  }
  return strongest(strength, count).map(({ index, value }) => ({
    period: useful * SHORTEST + (index * useful * (LONGEST - SHORTEST)) / steps, strength: value,
  }));
}

function harmonicSum(spectrum: ProductSpectrum, period: number, useful: number): number {
  const { power, size } = spectrum;
  const part = 1 - useful / period;
  let sum = 0;
  let weights = 0;
  for (let k = 1; k <= HARMONICS; k++) {
    const weight = sinc(k * part) ** 2;
    if (k * part > 0.9) break;
    const at = Math.round((k * size) / period);
    if (2 * at >= size) break;
    sum += weight * (power[at] / scatterAt(spectrum, at / size) + power[size - at] / scatterAt(spectrum, 1 - at / size) - 2);
    weights += 2 * weight * weight;
  }
  return weights > 0 ? sum / Math.sqrt(weights) : 0;
}

function strongest(strength: Float64Array, count: number): { index: number; value: number }[] {
  const peaks: { index: number; value: number }[] = [];
  for (let i = 1; i < strength.length - 1; i++) {
    if (strength[i] > strength[i - 1] && strength[i] >= strength[i + 1]) peaks.push({ index: i, value: strength[i] });
  }
  peaks.sort((a, b) => b.value - a.value);
  const apart: typeof peaks = [];
  for (const peak of peaks) {
    if (apart.every((o) => Math.abs(o.index - peak.index) > 3)) apart.push(peak);
    if (apart.length >= count) break;
  }
  return apart;
}
