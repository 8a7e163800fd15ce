import { nextFast, transformOf } from '../fourier/fft.js';
import { lagSums, sinc, type LagSums, type Working } from './lag-sums.js';

/** A window's part that is scanned: thousands of lags are tried, each over all of it. */
const SCANNED = 1 << 16;
const MOST_LAGS = 3000;

export interface ScanPeak {
  readonly lag: number;
  readonly strength: number;
}

/**
 * Lags whose products repeat at a symbol rate that fits the lag (a prefix of 1/72 to a half of
 * the useful symbol), strongest first. Slower than the plain correlation and blind to weak
 * signals, but it sees a prefix where pilots that repeat every symbol, or a comb of strong
 * ones, outshine it at other lags: those do not repeat at a rate that fits their own lag.
 */
export function scanLags(working: Working, { from, to, count }: { from: number; to: number; count: number }): ScanPeak[] {
  const samples = Math.min(SCANNED, working.iq.length >> 1);
  const part = { ...working, iq: working.iq.subarray(0, 2 * samples) };
  const step = Math.max(1, Math.floor((0.6 * working.rateHz) / working.bandHz));
  const last = Math.min(to, samples / 16, from + step * MOST_LAGS);
  const found: ScanPeak[] = [];
  for (let lag = Math.ceil(from); lag < last; lag += step) {
    const strength = symbolRateStrength(part, lag);
    if (strength > 12) found.push({ lag, strength });
  }
  return separate(found, 3 * step).slice(0, count);
}

/** Products that the scan may take, and what finding the periods of one lag counts for among them. */
const MOST_PRODUCTS = 3e7;
const PER_LAG = 40_000;
/** Symbols that a scan of one lag needs: a prefix of three independent samples then stands at some hundred times chance. */
const SYMBOLS = 240;
/** Symbol-period strength that chance reaches at about one of 10⁵ pairs of lag and period: what passes is scored in full, where chance is excluded. */
const WORTH = 6;

/**
 * Lags from the shortest on, as far as the budget reaches, each with the strongest symbol period
 * by all its harmonics: the plain correlation is blind at short lags, where the spectrum's shape
 * stands in it, and in a narrow band, where its scatter is large.
 */
export function everyLag(working: Working, { from, to, count }: { from: number; to: number; count: number }): ScanPeak[] {
  const samples = working.iq.length >> 1;
  const step = Math.max(1, (0.7 * working.rateHz) / working.bandHz);
  const found: ScanPeak[] = [];
  let left = MOST_PRODUCTS;
  for (let at = Math.ceil(from); at < to && left > 0; at += step) {
    const lag = Math.round(at);
    const used = Math.min(samples, Math.round(1.2 * SYMBOLS * lag));
    left -= used + PER_LAG;
    const sums = lagSums({ ...working, iq: working.iq.subarray(0, 2 * used) }, lag, Math.max(1, Math.floor(lag / 20)));
    if (sums.re.length < 64) break;
    const strength = harmonicStrength(sums, lag);
    if (strength > WORTH) found.push({ lag, strength });
  }
  return separate(found, 3 * step).slice(0, count);
}

const HARMONICS = 4;
/** Stretches of the spectrum whose mean is the scatter: a prefix's few lines hardly raise it. */
const STRETCHES = 12;

/** The greatest weighted sum of four harmonics over scatter, among the symbol periods that fit the lag, in deviations of chance. */
function harmonicStrength(sums: LagSums, lag: number): number {
  const { power, size } = plainSpectrum(sums);
  const useful = lag / sums.hop;
  const steps = Math.ceil((2.5 * HARMONICS * sums.re.length) / useful);
  let best = 0;
  for (let i = 0; i < steps; i++) {
    const period = useful * (SHORTEST + ((LONGEST - SHORTEST) * i) / steps);
    const weights = WEIGHTS[Math.min(WEIGHTS.length - 1, Math.floor(WEIGHTS.length * (1 - useful / period)))]!;
    let sum = 0;
    for (let k = 1; k <= HARMONICS; k++) {
      const at = Math.round((k * size) / period);
      sum += weights[k]! * (power[at]! + power[size - at]! - 2);
    }
    if (sum > best * weights[0]!) best = sum / weights[0]!;
  }
  return best;
}

/** Symbol periods between these parts of the lag: prefixes of 1/72 to a half. */
const SHORTEST = 1 + 1 / 72;
const LONGEST = 1.52;

/** By the prefix's part of the period, in 64ths: sinc² of each harmonic; the first entry is the sum's deviation by chance. */
const WEIGHTS = Array.from({ length: 64 }, (_, p) => {
  const each = Array.from({ length: HARMONICS }, (__, k) => sinc(((k + 1) * (p + 0.5)) / 64) ** 2);
  return [Math.sqrt(2 * each.reduce((sum, w) => sum + w * w, 0)), ...each];
});

/** Power of the sums' spectrum over its mean nearby. */
function plainSpectrum(sums: LagSums): { power: Float64Array; size: number } {
  const size = nextFast(sums.re.length);
  const input = new Float64Array(2 * size);
  for (let b = 0; b < sums.re.length; b++) {
    input[2 * b] = sums.re[b]!;
    input[2 * b + 1] = sums.im[b]!;
  }
  const output = new Float64Array(2 * size);
  transformOf(size).forward(input, output);
  const power = Float64Array.from({ length: size }, (_, k) => (k === 0 ? 0 : output[2 * k]! ** 2 + output[2 * k + 1]! ** 2));
  for (let s = 0; s < STRETCHES; s++) {
    const part = power.subarray(Math.floor((s * size) / STRETCHES), Math.floor(((s + 1) * size) / STRETCHES));
    const mean = Math.max(1e-300, part.reduce((sum, v) => sum + v, 0) / part.length);
    for (let i = 0; i < part.length; i++) part[i] = part[i]! / mean;
  }
  return { power, size };
}

function separate(found: ScanPeak[], distance: number): ScanPeak[] {
  found.sort((a, b) => b.strength - a.strength);
  const apart: ScanPeak[] = [];
  for (const peak of found) if (apart.every((o) => Math.abs(o.lag - peak.lag) > distance)) apart.push(peak);
  return apart;
}

/** Those of the given lags (few) at which the products repeat most at a fitting symbol rate. */
export function screened(working: Working, lags: readonly number[], count: number): number[] {
  const samples = Math.min(4 * SCANNED, working.iq.length >> 1);
  const part = { ...working, iq: working.iq.subarray(0, 2 * samples) };
  return lags.filter((lag) => lag < samples / 6)
    .map((lag) => ({ lag, strength: symbolRateStrength(part, lag) }))
    .sort((a, b) => b.strength - a.strength).slice(0, count).map((p) => p.lag);
}

/** The strongest pair of first and second harmonic over scatter, among the symbol rates that fit the lag. */
function symbolRateStrength(part: Working, lag: number): number {
  const hop = Math.max(1, Math.floor(lag / 16));
  const sums = lagSums(part, lag, hop);
  const size = nextFast(sums.re.length);
  const input = new Float64Array(2 * size);
  for (let b = 0; b < sums.re.length; b++) {
    input[2 * b] = sums.re[b];
    input[2 * b + 1] = sums.im[b];
  }
  const output = new Float64Array(2 * size);
  transformOf(size).forward(input, output);
  const power = (k: number) => output[2 * k] ** 2 + output[2 * k + 1] ** 2;
  const low = Math.floor((size * hop) / (1.52 * lag));
  const high = Math.min(size / 4 - 1, Math.ceil((size * hop) / (1.0139 * lag)));
  let best = 0;
  let sum = 0;
  for (let k = low; k <= high; k++) {
    const here = power(k) + power(size - k);
    sum += here;
    if (here > best) best = here;
  }
  const mean = (sum - best) / Math.max(1, 2 * (high - low));
  return mean > 0 ? best / mean : 0;
}
