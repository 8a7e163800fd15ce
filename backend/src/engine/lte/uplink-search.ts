import { nextPowerOfTwo, transformOf } from '../fourier/fft.js';
import { symbolsPerSlot } from './numerology.js';
import type { Rows } from './rows.js';
import { subcarriers } from './rows.js';

/** A terminal's single-carrier signal, found by its reference symbols. */
export interface UplinkFit {
  /** Symbol number modulo a slot that carries them. */
  readonly symbol: number;
  /** Bins of the allocation as they stand out (centred count). */
  readonly low: number;
  readonly high: number;
  /** Rate of the chirp, turns a subcarrier squared: near (group + 1)/31. */
  readonly chirp: number;
  readonly group: number;
  /** Σ of squared scores less their mean by chance, in units of its scatter. */
  readonly score: number;
  /** Rows that carry the reference symbols. */
  readonly symbols: readonly number[];
}

/** As many reference symbols of each place are looked at. */
const MOST_ROWS = 16;
const FEWEST_ROWS = 4;
/** Of four exponentials the sum reaches this by chance once in 10¹⁰, of more less often; some 10⁴ places and rates are tried. */
const LEAST_SCORE = 14;

/**
 * Looks for the uplink's reference symbols in the stretch of the band that is in use. A
 * Zadoff-Chu sequence (TS 36.211 clause 5.5.1.1) is a chirp: the product of one subcarrier's
 * value and the conjugate of its neighbour's turns by q/N ≈ (group + 1)/31 from one to the
 * next, whatever timing, cyclic shift, length and first subcarrier. `visible` is how many bins
 * on each side of zero the capture holds.
 */
export function searchUplink(rows: Rows, visible: number): UplinkFit | null {
  const active = activeRows(rows);
  const stretch = occupiedStretch(rows, active, visible);
  if (!stretch) return null;
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  let best: UplinkFit | null = null;
  for (let symbol = 0; symbol < perSlot; symbol++) {
    const symbols = active.filter((s) => (((s % perSlot) + perSlot) % perSlot) === symbol);
    if (symbols.length < FEWEST_ROWS) continue;
    const found = strongestChirp(rows, symbols.slice(0, MOST_ROWS), stretch);
    if (found && found.score > LEAST_SCORE && (!best || found.score > best.score)) best = { symbol, symbols, ...stretch, ...found };
  }
  return best;
}

/** The rate at which the summed spectra of the neighbours' products peak, where it is that of a group. */
function strongestChirp(rows: Rows, symbols: readonly number[], { low, high }: { low: number; high: number }) {
  const length = high - low;
  const size = nextPowerOfTwo(2 * length);
  const input = new Float64Array(2 * size), output = new Float64Array(2 * size), sum = new Float64Array(size);
  for (const s of symbols) {
    const row = allocated(rows, s, { low, high });
    if (!row) continue;
    const energy = neighbourProducts(row, input);
    transformOf(size).forward(input, output);
    for (let k = 0; k < size; k++) sum[k] += (output[2 * k] ** 2 + output[2 * k + 1] ** 2) / energy;
  }
  const peak = sum.reduce((top, value, k) => (value > sum[top] ? k : top), 0);
  // The sequence turns backwards: a rate q/N is a negative frequency.
  const chirp = ((size - peak) % size) / size;
  const group = Math.round(31 * chirp) - 1;
  // q is rounded by up to a half of 1/N, the peak by some of 1/length.
  if (group < 0 || group > 29 || Math.abs(chirp - (group + 1) / 31) > 1.2 / length) return null;
  return { chirp, group, score: (sum[peak] - symbols.length) / Math.sqrt(symbols.length) };
}

/** Y[k+1]·Y*[k] into `out` (the rest zero); returns Σ of squared magnitudes. */
function neighbourProducts(row: Float64Array, out: Float64Array): number {
  out.fill(0);
  let energy = 1e-30;
  for (let i = 0; i + 2 < row.length; i += 2) {
    out[i] = row[i + 2] * row[i] + row[i + 3] * row[i + 1];
    out[i + 1] = row[i + 3] * row[i] - row[i + 2] * row[i + 1];
    energy += out[i] ** 2 + out[i + 1] ** 2;
  }
  return energy;
}

/** Bins low … high of symbol `s`, interleaved. */
export function allocated(rows: Rows, s: number, at: { low: number; high: number }): Float64Array | null {
  const spectrum = rows.spectra[s - rows.first];
  if (!spectrum) return null;
  const out = new Float64Array(2 * (at.high - at.low + 1));
  for (let i = 0; i < out.length; i += 2) {
    const bin = 2 * ((((at.low + i / 2) % rows.size) + rows.size) % rows.size);
    out[i] = spectrum[bin];
    out[i + 1] = spectrum[bin + 1];
  }
  return out;
}

/** Symbols with at least a third of the strongest one's power: the others are not sent. */
function activeRows(rows: Rows): number[] {
  const powers = rows.spectra.map((row) => row.reduce((sum, v) => sum + v * v, 0));
  const least = Math.max(...powers) / 3;
  return powers.flatMap((power, i) => (power >= least ? [rows.first + i] : []));
}

/** A faded part of an allocation may be this wide, bins. */
const MOST_GAP = 24;
/** Bins over which the power is smoothed on each side. */
const SMOOTH = 5;

/** How far from the floor to the top, in decibels, a bin counts as in use: low enough for fades, above the floor's scatter at 0 dB. */
const LEVEL = 0.3;

/** The longest run of visible bins (centred count) above the floor, with faded gaps bridged. */
function occupiedStretch(rows: Rows, active: readonly number[], visible: number): { low: number; high: number } | null {
  const half = Math.min(visible, rows.size / 2 - 1);
  const sums = new Float64Array(2 * half + 2);
  for (const s of active) {
    const row = subcarriers(rows, s, { shift: 0, inverted: false, half });
    if (row) for (let i = 0; i <= 2 * half; i++) sums[i + 1] += row[2 * i] ** 2 + row[2 * i + 1] ** 2;
  }
  const power = sums.slice(1);
  for (let i = 1; i < sums.length; i++) sums[i] += sums[i - 1];
  const smooth = power.map((_, i) => {
    const from = Math.max(0, i - SMOOTH), to = Math.min(power.length, i + SMOOTH + 1);
    return (sums[to] - sums[from]) / (to - from);
  });
  const floor = Float64Array.from(smooth).sort()[Math.floor(0.05 * smooth.length)];
  const top = Math.max(...smooth);
  if (!(top > 1.3 * floor)) return null;
  const run = longestRun(smooth, Math.max(floor, 1e-9 * top) ** (1 - LEVEL) * top ** LEVEL);
  const low = sharpestStep(power, run.low, 1), high = sharpestStep(power, run.high, -1);
  return high - low >= 24 ? { low: low - half, high: high - half } : null;
}

/** The smoothing widens the run: its edge lies where three bins inside rise most above three outside. `inwards` is 1 at the lower edge. */
function sharpestStep(power: Float64Array, near: number, inwards: 1 | -1): number {
  let best = near, most = Number.NEGATIVE_INFINITY;
  for (let at = near - 2; at <= near + 2 * SMOOTH; at++) {
    const edge = inwards === 1 ? at : 2 * near - at;
    let step = 0;
    for (let k = 0; k < 3; k++) step += decibelsAt(power, edge + inwards * k) - decibelsAt(power, edge - inwards * (k + 1));
    if (step > most) [best, most] = [edge, step];
  }
  return best;
}

function decibelsAt(power: Float64Array, at: number): number {
  return Math.log(power[Math.max(0, Math.min(power.length - 1, at))] + 1e-30);
}

function longestRun(values: Float64Array, least: number): { low: number; high: number } {
  let best = { low: 0, high: -1 }, low = -1, last = -1;
  for (let i = 0; i < values.length; i++) {
    if (values[i] <= least) continue;
    if (low < 0 || i - last > MOST_GAP) low = i;
    last = i;
    if (last - low > best.high - best.low) best = { low, high: last };
  }
  return best;
}
