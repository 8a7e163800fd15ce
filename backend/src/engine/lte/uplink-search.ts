import { symbolsPerSlot } from './numerology.js';
import type { Rows } from './rows.js';
import { subcarriers } from './rows.js';
import { isAllocation, uplinkBaseSequence } from './uplink-reference.js';

/** A terminal's single-carrier signal, found by its reference symbols. */
export interface UplinkFit {
  /** Symbol number modulo a slot that carries them. */
  readonly symbol: number;
  /** Lowest bin of the allocation (may be negative) and its blocks. */
  readonly firstBin: number;
  readonly blocks: number;
  readonly group: number;
  /** Σ of squared scores less their mean by chance, in units of its scatter. */
  readonly score: number;
  /** Rows that carry the reference symbols. */
  readonly symbols: readonly number[];
}

/** As many reference symbols of each place are looked at. */
const MOST_ROWS = 8;
/** Some 10⁴ hypotheses: chance (a sum of exponentials) stays below 10⁻⁹. */
const LEAST_SCORE = 12;

/**
 * Looks for Zadoff-Chu reference symbols in the stretch of the band that is in use, in every
 * symbol of the slot and every group. Products of neighbours, so that timing, cyclic shift and
 * the channel's slow turning do not matter. `visible` is how many bins on each side of zero the
 * capture holds.
 */
export function searchUplink(rows: Rows, visible: number): UplinkFit | null {
  const active = activeRows(rows);
  const stretch = occupiedStretch(rows, active, visible);
  if (!stretch) return null;
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  let best: UplinkFit | null = null;
  for (const { firstBin, blocks } of allocations(stretch)) {
    const products = new Map(Array.from({ length: perSlot }, (_, symbol) => {
      const chosen = active.filter((s) => (((s % perSlot) + perSlot) % perSlot) === symbol).slice(0, MOST_ROWS);
      return [symbol, chosen.flatMap((s) => neighbourProducts(rows, s, { firstBin, length: 12 * blocks }) ?? [])] as const;
    }));
    for (let group = 0; group < 30; group++) {
      const pattern = productsOf(uplinkBaseSequence(group, 12 * blocks));
      for (const [symbol, list] of products) {
        if (list.length < 2) continue;
        const score = (list.reduce((sum, p) => sum + squaredScore(p, pattern), 0) - list.length) / Math.sqrt(list.length);
        if (score > LEAST_SCORE && (!best || score > best.score)) {
          best = { symbol, firstBin, blocks, group, score, symbols: active.filter((s) => (((s % perSlot) + perSlot) % perSlot) === symbol) };
        }
      }
    }
  }
  return best;
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

/** The longest run of visible bins (centred count) a tenth of the way from the floor to the top, with faded gaps bridged. */
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
  const run = longestRun(smooth, floor + 0.12 * (top - floor));
  // The smoothing widens the run by half its width; the edge lies where the raw power falls to half.
  const level = (floor + (sums[run.high + 1] - sums[run.low]) / (run.high - run.low + 1)) / 2;
  const edge = (from: number, step: number) => {
    let at = from;
    while (at > 0 && at < power.length - 1 && power[at] < level && Math.abs(at - from) < 2 * SMOOTH) at += step;
    return at;
  };
  const low = edge(run.low, 1), high = edge(run.high, -1);
  return high - low >= 24 ? { low: low - half, high: high - half } : null;
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

/** Allocations whose edges lie within two subcarriers of the stretch's. */
function allocations({ low, high }: { low: number; high: number }): { firstBin: number; blocks: number }[] {
  const width = high - low + 1;
  const out: { firstBin: number; blocks: number }[] = [];
  for (let blocks = Math.max(3, Math.floor((width - 8) / 12)); blocks <= Math.min(110, Math.ceil((width + 8) / 12)); blocks++) {
    if (!isAllocation(blocks) || Math.abs(12 * blocks - width) > 8) continue;
    for (let firstBin = Math.min(low, high - 12 * blocks + 1) - 2; firstBin <= Math.max(low, high - 12 * blocks + 1) + 2; firstBin++) out.push({ firstBin, blocks });
  }
  return out;
}

/** Subcarriers of the allocation in symbol `s`, interleaved. */
export function allocated(rows: Rows, s: number, at: { firstBin: number; length: number }): Float64Array | null {
  const spectrum = rows.spectra[s - rows.first];
  if (!spectrum) return null;
  const out = new Float64Array(2 * at.length);
  for (let i = 0; i < at.length; i++) {
    const bin = 2 * ((((at.firstBin + i) % rows.size) + rows.size) % rows.size);
    out[2 * i] = spectrum[bin];
    out[2 * i + 1] = spectrum[bin + 1];
  }
  return out;
}

function neighbourProducts(rows: Rows, s: number, at: { firstBin: number; length: number }): Float64Array | null {
  const row = allocated(rows, s, at);
  return row && productsOf(row);
}

function productsOf(row: Float64Array): Float64Array {
  const out = new Float64Array(row.length - 2);
  for (let i = 0; i < out.length; i += 2) {
    out[i] = row[i + 2] * row[i] + row[i + 3] * row[i + 1];
    out[i + 1] = row[i + 3] * row[i] - row[i + 2] * row[i + 1];
  }
  return out;
}

function squaredScore(products: Float64Array, pattern: Float64Array): number {
  let re = 0, im = 0, energy = 1e-30;
  for (let i = 0; i < products.length; i += 2) {
    re += products[i] * pattern[i] + products[i + 1] * pattern[i + 1];
    im += products[i + 1] * pattern[i] - products[i] * pattern[i + 1];
    energy += products[i] ** 2 + products[i + 1] ** 2;
  }
  return (re * re + im * im) / energy;
}
