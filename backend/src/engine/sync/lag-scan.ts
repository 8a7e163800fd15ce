import { nextFast, transformOf } from '../fourier/fft.js';
import { lagSums, type Working } from './lag-sums.js';

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
  found.sort((a, b) => b.strength - a.strength);
  const apart: ScanPeak[] = [];
  for (const peak of found) {
    if (apart.every((o) => Math.abs(o.lag - peak.lag) > 3 * step)) apart.push(peak);
    if (apart.length >= count) break;
  }
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
