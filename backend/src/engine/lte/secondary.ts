import { primarySequence, ROOTS } from './primary.js';
import type { PrimaryCandidate } from './primary.js';
import { subcarriers } from './rows.js';
import type { Rows, View } from './rows.js';
import { symbolsPerSlot, syncSymbols } from './numerology.js';
import type { Duplex } from './numerology.js';

/** Cell, frame timing, duplex and sense, as the two synchronisation signals say. */
export interface CellSync extends View {
  readonly cellId: number;
  readonly duplex: Duplex;
  /** Symbol number at which a frame starts (modulo a frame). */
  readonly frameSymbol: number;
  readonly primaryScore: number;
  /** Its square is exponential with mean 1 for a wrong sequence. */
  readonly score: number;
  /** Score of the best other cell in the same place. */
  readonly runnerUp: number;
  /** Useful part's start after the transform's start, samples. */
  readonly delaySamples: number;
}

/** The m-sequences of TS 36.211 clause 6.11.2.1: x(i+5) is the sum of x(i + taps) modulo 2, x(4) = 1. As ±1. */
function mSequence(taps: readonly number[]): Int8Array {
  const x = [0, 0, 0, 0, 1];
  for (let i = 0; i < 26; i++) x.push(taps.reduce((sum, tap) => sum ^ x[i + tap], 0));
  return Int8Array.from(x, (bit) => 1 - 2 * bit);
}
const S = mSequence([2, 0]);
const C = mSequence([3, 0]);
const Z = mSequence([4, 2, 1, 0]);

/** Subcarriers −31 … −1, 1 … 31 in order (62 values ±1); `half` 0 is subframe 0, 1 is subframe 5. */
export function secondarySequence(cellId: number, half: 0 | 1): Int8Array {
  const group = Math.floor(cellId / 3);
  const inGroup = cellId % 3;
  const [m0, m1] = shifts(group);
  const [first, second] = half === 0 ? [m0, m1] : [m1, m0];
  const d = new Int8Array(62);
  for (let n = 0; n < 31; n++) {
    d[2 * n] = S[(n + first) % 31] * C[(n + inGroup) % 31];
    d[2 * n + 1] = S[(n + second) % 31] * C[(n + inGroup + 3) % 31] * Z[(n + (first % 8)) % 31];
  }
  return d;
}

/** m₀ and m₁ of TS 36.211 Table 6.11.2.1-1, by its formula. */
function shifts(group: number): [number, number] {
  const coarse = Math.floor(group / 30);
  const q = Math.floor((group + (coarse * (coarse + 1)) / 2) / 30);
  const m = group + (q * (q + 1)) / 2;
  return [m % 31, ((m % 31) + Math.floor(m / 31) + 1) % 31];
}

/** The best reading of one candidate over both duplex modes and, where the root allows it, both senses. */
export function resolveSecondary(rows: Rows, candidate: PrimaryCandidate): CellSync | null {
  let best: CellSync | null = null;
  for (const inverted of [false, true]) {
    const inGroup = ROOTS.indexOf(inverted ? 63 - candidate.root : candidate.root);
    if (inGroup < 0) continue;
    for (const duplex of ['fdd', 'tdd'] as const) {
      const found = resolve(rows, { candidate, inverted, inGroup, duplex });
      if (found && (!best || found.score > best.score)) best = found;
    }
  }
  return best;
}

interface Reading { readonly candidate: PrimaryCandidate; readonly inverted: boolean; readonly inGroup: number; readonly duplex: Duplex }

function resolve(rows: Rows, { candidate, inverted, inGroup, duplex }: Reading): CellSync | null {
  const prefix = rows.cut.prefix;
  const period = 10 * symbolsPerSlot(prefix);
  const { primary, secondary } = syncSymbols(prefix, duplex);
  const view = { shift: candidate.shift, inverted };
  const soft = softSecondary(rows, { view, root: ROOTS[inGroup], symbol: candidate.symbol, back: primary - secondary, period });
  if (!soft) return null;
  const pick = pickCell(soft, inGroup);
  // In halves counted from the first symbol number ≥ 0, `pick.odd` says whether those are the frame's second halves.
  const frameSymbol = candidate.symbol - primary + (pick.odd ? period : 0);
  return {
    ...view, duplex, frameSymbol,
    cellId: pick.cellId, score: pick.score, runnerUp: pick.runnerUp,
    primaryScore: candidate.score, delaySamples: soft.delaySamples,
  };
}

interface Soft {
  /** Equalised sums over even and over odd half frames, interleaved, 62 subcarriers. */
  readonly sums: readonly [Float64Array, Float64Array];
  readonly energy: number;
  readonly delaySamples: number;
}

interface Place { readonly view: View; readonly root: number; readonly symbol: number; readonly back: number; readonly period: number }

function softSecondary(rows: Rows, { view, root, symbol, back, period }: Place): Soft | null {
  const sequence = primarySequence(root);
  const pairs: { channel: Float64Array; row: Float64Array; parity: number }[] = [];
  const slope = [0, 0];
  const start = symbol + period * Math.floor((rows.first - symbol) / period);
  for (let s = start, h = Math.round((start - symbol) / period); s < rows.first + rows.spectra.length; s += period, h++) {
    const pss = subcarriers(rows, s, { ...view, half: 31 });
    const sss = subcarriers(rows, s - back, { ...view, half: 31 });
    if (!pss || !sss) continue;
    const channel = timesConjugate(pss, sequence);
    for (let i = 0; i < 62; i++) {
      if (i === 30 || i === 31) continue;
      slope[0] += channel[2 * i + 2] * channel[2 * i] + channel[2 * i + 3] * channel[2 * i + 1];
      slope[1] += channel[2 * i + 3] * channel[2 * i] - channel[2 * i + 2] * channel[2 * i + 1];
    }
    pairs.push({ channel, row: sss, parity: h & 1 });
  }
  if (pairs.length === 0) return null;
  const angle = Math.atan2(slope[1], slope[0]);
  const sums: [Float64Array, Float64Array] = [new Float64Array(124), new Float64Array(124)];
  let energy = 0;
  for (const { channel, row, parity } of pairs) energy += addEqualised(sums[parity & 1], { channel, row, angle });
  return { sums, energy, delaySamples: (-angle * rows.size) / (2 * Math.PI) };
}

function timesConjugate(a: Float64Array, b: Float64Array): Float64Array {
  const out = new Float64Array(a.length);
  for (let i = 0; i < a.length; i += 2) {
    out[i] = a[i] * b[i] + a[i + 1] * b[i + 1];
    out[i + 1] = a[i + 1] * b[i] - a[i] * b[i + 1];
  }
  return out;
}

/** How many neighbours on each side share one channel estimate: 7 × 15 kHz is within the coherence bandwidth of 5 µs of spread. */
const NEIGHBOURS = 3;

/** Adds row·H* (H smoothed along the common slope), scaled to unit energy a row, to `sum`; returns the energy added. */
function addEqualised(sum: Float64Array, { channel, row, angle }: { channel: Float64Array; row: Float64Array; angle: number }): number {
  const flat = new Float64Array(channel.length);
  for (let i = 0; i < 63; i++) {
    const c = Math.cos(angle * i), s = Math.sin(angle * i);
    flat[2 * i] = channel[2 * i] * c + channel[2 * i + 1] * s;
    flat[2 * i + 1] = channel[2 * i + 1] * c - channel[2 * i] * s;
  }
  const soft = new Float64Array(124);
  let energy = 0;
  for (let i = 0, to = 0; i < 63; i++) {
    if (i === 31) continue;
    let hr = 0, hi = 0;
    for (let j = Math.max(0, i - NEIGHBOURS); j <= Math.min(62, i + NEIGHBOURS); j++) {
      hr += flat[2 * j];
      hi += flat[2 * j + 1];
    }
    const c = Math.cos(angle * i), s = Math.sin(angle * i);
    const yr = row[2 * i] * c + row[2 * i + 1] * s;
    const yi = row[2 * i + 1] * c - row[2 * i] * s;
    soft[to] = yr * hr + yi * hi;
    soft[to + 1] = yi * hr - yr * hi;
    energy += soft[to] ** 2 + soft[to + 1] ** 2;
    to += 2;
  }
  const scale = energy > 0 ? 1 / Math.sqrt(energy) : 0;
  for (let i = 0; i < 124; i++) sum[i] += scale * soft[i];
  return energy > 0 ? 1 : 0;
}

function pickCell(soft: Soft, inGroup: number): { cellId: number; odd: boolean; score: number; runnerUp: number } {
  const best = { cellId: 0, odd: false, score: -1, runnerUp: 0 };
  for (let group = 0; group < 168; group++) {
    const cellId = 3 * group + inGroup;
    const halves = [secondarySequence(cellId, 0), secondarySequence(cellId, 1)];
    for (const odd of [false, true]) {
      let re = 0, im = 0;
      for (const parity of [0, 1] as const) {
        const d = halves[odd ? 1 - parity : parity];
        const sum = soft.sums[parity];
        for (let i = 0; i < 62; i++) {
          re += d[i] * sum[2 * i];
          im += d[i] * sum[2 * i + 1];
        }
      }
      const score = Math.hypot(re, im) / Math.sqrt(Math.max(soft.energy, 1e-30));
      if (score > best.score) Object.assign(best, { cellId, odd, score, runnerUp: Math.max(0, best.score) });
      else if (score > best.runnerUp) best.runnerUp = score;
    }
  }
  return best;
}
