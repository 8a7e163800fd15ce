import { transformOf } from '../fourier/fft.js';
import { prefixSamples } from './numerology.js';
import type { Rows } from './rows.js';

/** Roots by N_ID(2), TS 36.211 Table 6.11.1.1-1. */
export const ROOTS: readonly number[] = [25, 29, 34];
/** What an inverted spectrum makes of root 25; those of 29 and 34 are each other's conjugates. */
const INVERTED_25 = 38;

/** A place that may hold a primary synchronisation signal. */
export interface PrimaryCandidate {
  /** Symbol number modulo the symbols of a half frame. */
  readonly symbol: number;
  /** Bin of the DC tone. */
  readonly shift: number;
  /** Zadoff-Chu root as received: 38 only occurs in an inverted spectrum. */
  readonly root: number;
  /** Its square is exponential with mean 1 where there is no such signal. */
  readonly score: number;
}

/** Subcarriers −31 … 31 (index k + 31), 0 at DC; interleaved. TS 36.211 clause 6.11.1.1. */
export function primarySequence(root: number): Float64Array {
  const out = new Float64Array(2 * 63);
  for (let n = 0; n < 62; n++) {
    const product = n < 31 ? n * (n + 1) : (n + 1) * (n + 2);
    const angle = (-Math.PI * ((root * product) % 126)) / 63;
    const at = 2 * (n < 31 ? n : n + 1);
    out[at] = Math.cos(angle);
    out[at + 1] = Math.sin(angle);
  }
  return out;
}

/**
 * Looks for the signal on every subcarrier and in every symbol of a half frame, best first:
 * products of neighbouring subcarriers (blind to timing and to the channel's slow turning)
 * are summed over half frames and correlated with those of the sequence.
 */
export function searchPrimary(rows: Rows, symbolsPerHalfFrame: number, keep: number): PrimaryCandidate[] {
  const delays = plausibleDelays(rows);
  const patterns = [...ROOTS, INVERTED_25].map((root) => ({ root, spectrum: patternSpectrum(root, rows.size) }));
  const found: PrimaryCandidate[] = [];
  for (let symbol = 0; symbol < symbolsPerHalfFrame; symbol++) {
    const products = summedProducts(rows, symbol, symbolsPerHalfFrame);
    if (products) correlate(products, { symbol, size: rows.size, patterns, keep, delays }, found);
  }
  return found.sort((a, b) => b.score - a.score).slice(0, keep);
}

interface Products { readonly sum: Float64Array; readonly squares: Float64Array }

/**
 * A symbol starts no earlier than the transform's start less half a prefix and no later than
 * its end and half a prefix. A Zadoff-Chu sequence shifted by a subcarrier is the same
 * sequence delayed, so this tells the true shift from its neighbours.
 */
function plausibleDelays({ cut, size }: Rows): { from: number; to: number } {
  const prefix = prefixSamples(cut.prefix, 1, size);
  const normal = prefixSamples('normal', 1, size);
  return { from: cut.early - prefix / 2 - normal, to: cut.early + prefix / 2 + normal };
}

/** Σ Y[k+1]·Y*[k] over half frames, and Σ of their squared magnitudes. */
function summedProducts(rows: Rows, symbol: number, period: number): Products | null {
  const n = rows.size;
  const sum = new Float64Array(2 * n);
  const squares = new Float64Array(n);
  const start = rows.first + ((((symbol - rows.first) % period) + period) % period);
  for (let s = start; s < rows.first + rows.spectra.length; s += period) {
    const y = rows.spectra[s - rows.first];
    for (let k = 0; k < n; k++) {
      const a = 2 * k;
      const b = k + 1 === n ? 0 : a + 2;
      const re = y[b] * y[a] + y[b + 1] * y[a + 1];
      const im = y[b + 1] * y[a] - y[b] * y[a + 1];
      sum[a] += re;
      sum[a + 1] += im;
      squares[k] += re * re + im * im;
    }
  }
  return start < rows.first + rows.spectra.length ? { sum, squares } : null;
}

/** The sequence's own products (those at DC left out), transformed and conjugated, for a circular correlation. */
function patternSpectrum(root: number, size: number): Float64Array {
  const d = primarySequence(root);
  const products = new Float64Array(2 * size);
  for (let i = 0; i < 62; i++) {
    if (i === 30 || i === 31) continue;
    const bin = 2 * ((i - 31 + size) % size);
    products[bin] = d[2 * i + 2] * d[2 * i] + d[2 * i + 3] * d[2 * i + 1];
    products[bin + 1] = d[2 * i + 3] * d[2 * i] - d[2 * i + 2] * d[2 * i + 1];
  }
  const spectrum = new Float64Array(2 * size);
  transformOf(size).forward(products, spectrum);
  for (let k = 1; k < 2 * size; k += 2) spectrum[k] = -spectrum[k];
  return spectrum;
}

interface Job {
  readonly symbol: number;
  readonly size: number;
  readonly patterns: readonly { root: number; spectrum: Float64Array }[];
  readonly keep: number;
  readonly delays: { readonly from: number; readonly to: number };
}

function correlate({ sum, squares }: Products, job: Job, found: PrimaryCandidate[]): void {
  const { size, keep, delays } = job;
  const transform = transformOf(size);
  const spectrum = new Float64Array(2 * size);
  transform.forward(sum, spectrum);
  const scatter = windowSums(squares);
  const product = new Float64Array(2 * size);
  const correlation = new Float64Array(2 * size);
  for (const { root, spectrum: pattern } of job.patterns) {
    for (let k = 0; k < 2 * size; k += 2) {
      product[k] = spectrum[k] * pattern[k] - spectrum[k + 1] * pattern[k + 1];
      product[k + 1] = spectrum[k] * pattern[k + 1] + spectrum[k + 1] * pattern[k];
    }
    transform.inverse(product, correlation);
    for (let shift = 0; shift < size; shift++) {
      const power = correlation[2 * shift] ** 2 + correlation[2 * shift + 1] ** 2;
      if (power < 8 * scatter[shift]) continue;
      const delay = (-Math.atan2(correlation[2 * shift + 1], correlation[2 * shift]) * size) / (2 * Math.PI);
      if (delay < delays.from || delay > delays.to) continue;
      found.push({ symbol: job.symbol, shift, root, score: Math.sqrt(power / scatter[shift]) });
    }
  }
  if (found.length > 16 * keep) found.sort((a, b) => b.score - a.score).splice(4 * keep);
}

/** Σ of `squares` over the 60 products around each bin, circular. */
function windowSums(squares: Float64Array): Float64Array {
  const n = squares.length;
  const at = (k: number) => squares[((k % n) + n) % n];
  const out = new Float64Array(n);
  // Where the band is empty the running sum is rounding alone, of either sign: nothing stands out there.
  const floor = 1e-6 * squares.reduce((a, b) => a + b, 0) * (60 / n) + 1e-30;
  let sum = 0;
  for (let k = -31; k < 31; k++) sum += at(k);
  for (let shift = 0; shift < n; shift++) {
    // The two products that touch DC carry nothing of the sequence.
    out[shift] = Math.max(floor, sum - at(shift - 1) - at(shift));
    sum += at(shift + 31) - at(shift - 31);
  }
  return out;
}
