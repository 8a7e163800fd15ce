import { goldBits } from '../coding/gold.js';
import { subcarriers } from './rows.js';
import type { Rows, View } from './rows.js';
import { symbolsPerSlot } from './numerology.js';
import type { Prefix } from './numerology.js';

/** N_RB,max of the downlink, TS 36.211 clause 6.2.1: the sequence is cut from the middle of one for 110 blocks. */
const MOST_BLOCKS = 110;

/** Cell-specific reference symbols of one port in one symbol, TS 36.211 clause 6.10.1. */
export interface ReferenceComb {
  /** Subcarriers around the DC tone (never 0), rising, `step` 6 apart but for the one at DC. */
  readonly subcarriers: Int16Array;
  /** Their values, interleaved, magnitude 1. */
  readonly values: Float64Array;
}

/** Offset of port `port`'s comb, 0 to 5, or null where symbol `l` of the slot holds none. */
export function combOffset(at: { port: number; slot: number; l: number; prefix: Prefix; cellId: number }): number | null {
  const second = symbolsPerSlot(at.prefix) - 3;
  let v: number;
  if (at.port < 2) {
    if (at.l !== 0 && at.l !== second) return null;
    v = (at.port === 0) === (at.l === 0) ? 0 : 3;
  } else {
    if (at.l !== 1) return null;
    v = 3 * (at.slot % 2) + (at.port === 2 ? 0 : 3);
  }
  return (v + (at.cellId % 6)) % 6;
}

/** Reference symbols of one cell, computed once a symbol. */
export class ReferenceSymbols {
  private readonly sequences = new Map<number, Uint8Array>();

  constructor(readonly cellId: number, readonly prefix: Prefix) {}

  /** Port `port`'s comb in symbol `l` of `slot` (0 to 19), subcarriers within ±half; null where there is none. */
  comb(at: { port: number; slot: number; l: number; half: number }): ReferenceComb | null {
    const offset = combOffset({ ...at, prefix: this.prefix, cellId: this.cellId });
    if (offset === null) return null;
    const bits = this.sequence(at.slot, at.l);
    const places: number[] = [];
    const values: number[] = [];
    for (let m = 0; m < 2 * MOST_BLOCKS; m++) {
      const i = 6 * m + offset - 6 * MOST_BLOCKS;
      const k = i < 0 ? i : i + 1;
      if (Math.abs(k) > at.half) continue;
      places.push(k);
      values.push((1 - 2 * bits[2 * m]) * Math.SQRT1_2, (1 - 2 * bits[2 * m + 1]) * Math.SQRT1_2);
    }
    return { subcarriers: Int16Array.from(places), values: Float64Array.from(values) };
  }

  private sequence(slot: number, l: number): Uint8Array {
    const key = 8 * slot + l;
    let bits = this.sequences.get(key);
    if (!bits) {
      const init = 1024 * (7 * (slot + 1) + l + 1) * (2 * this.cellId + 1) + 2 * this.cellId + (this.prefix === 'normal' ? 1 : 0);
      this.sequences.set(key, bits = goldBits(init, 4 * MOST_BLOCKS));
    }
    return bits;
  }
}

/** The channel of one port as one symbol's comb shows it: received times the known value's conjugate. */
export interface CombChannel {
  readonly symbol: number;
  readonly slot: number;
  readonly l: number;
  readonly subcarriers: Int16Array;
  readonly h: Float64Array;
}

/** What places the frame in the rows: symbol number of a frame's start, and the view of the carrier. */
export interface FramePlace extends View {
  readonly frameSymbol: number;
}

/** Slot (0 to 19), symbol in it and frame count of symbol number `s`. */
export function placeInFrame(prefix: Prefix, frameSymbol: number, s: number): { frame: number; slot: number; l: number } {
  const perSlot = symbolsPerSlot(prefix);
  const perFrame = 20 * perSlot;
  const from = s - frameSymbol;
  const frame = Math.floor(from / perFrame);
  const inFrame = from - frame * perFrame;
  return { frame, slot: Math.floor(inFrame / perSlot), l: inFrame % perSlot };
}

/** Every comb of a port in the rows, in order of time; `keep` selects slots. */
export function combChannels(rows: Rows, references: ReferenceSymbols, at: FramePlace & { port: number; half: number; keep?: (slot: number) => boolean }): CombChannel[] {
  const out: CombChannel[] = [];
  for (let s = rows.first; s < rows.first + rows.spectra.length; s++) {
    const { slot, l } = placeInFrame(rows.cut.prefix, at.frameSymbol, s);
    if (at.keep && !at.keep(slot)) continue;
    const comb = references.comb({ port: at.port, slot, l, half: at.half });
    if (!comb) continue;
    const row = subcarriers(rows, s, at);
    if (row) out.push({ symbol: s, slot, l, subcarriers: comb.subcarriers, h: despread(row, comb, at.half) });
  }
  return out;
}

function despread(row: Float64Array, comb: ReferenceComb, half: number): Float64Array {
  const h = new Float64Array(comb.values.length);
  comb.subcarriers.forEach((k, i) => {
    const yr = row[2 * (k + half)];
    const yi = row[2 * (k + half) + 1];
    h[2 * i] = yr * comb.values[2 * i] + yi * comb.values[2 * i + 1];
    h[2 * i + 1] = yi * comb.values[2 * i] - yr * comb.values[2 * i + 1];
  });
  return h;
}

/** How like one channel the values on combs are. */
export interface Coherence {
  /** |Σ of products| over its scatter for wrong values: its square is exponential with mean 1 then. */
  readonly score: number;
  /** |Σ| over Σ of magnitudes, 0 to 1. */
  readonly share: number;
  /** Phase of the sum, radians: per three subcarriers for neighbours. */
  readonly angle: number;
}

class ProductSum {
  private re = 0;
  private im = 0;
  private squares = 0;
  private magnitudes = 0;

  /** Adds b·a*. */
  add(a: Float64Array, i: number, b: Float64Array, j: number): void {
    const re = b[2 * j] * a[2 * i] + b[2 * j + 1] * a[2 * i + 1];
    const im = b[2 * j + 1] * a[2 * i] - b[2 * j] * a[2 * i + 1];
    this.re += re;
    this.im += im;
    this.squares += re * re + im * im;
    this.magnitudes += Math.hypot(re, im);
  }

  /** The whole sum, or its part along `angle`. */
  coherence(angle?: number): Coherence {
    if (this.squares === 0) return { score: 0, share: 0, angle: 0 };
    const value = angle === undefined ? Math.hypot(this.re, this.im) : Math.max(0, this.re * Math.cos(angle) + this.im * Math.sin(angle));
    return { score: value / Math.sqrt(this.squares), share: value / this.magnitudes, angle: Math.atan2(this.im, this.re) };
  }
}

/**
 * Products of neighbours three subcarriers apart, one from each of two successive combs (which
 * interleave), both within inner < |k| ≤ outer. A turn between the two symbols cancels, as
 * each comb is the lower neighbour as often as the upper.
 */
export function neighbourCoherence(channels: readonly CombChannel[], ring: { inner: number; outer: number; angle?: number }): Coherence {
  const sum = new ProductSum();
  const inside = (k: number) => Math.abs(k) > ring.inner && Math.abs(k) <= ring.outer;
  for (let c = 0; c + 1 < channels.length; c++) {
    const a = channels[c], b = channels[c + 1];
    if (b.symbol - a.symbol > 7 || a.subcarriers[0] === b.subcarriers[0]) continue;
    for (const [low, high] of [[a, b], [b, a]]) {
      for (let i = 0, j = 0; i < low.subcarriers.length; i++) {
        const k = low.subcarriers[i];
        while (j < high.subcarriers.length && high.subcarriers[j] < k + 3) j++;
        if (high.subcarriers[j] === k + 3 && inside(k) && inside(k + 3)) sum.add(low.h, i, high.h, j);
      }
    }
  }
  return sum.coherence(ring.angle);
}

/** Products of the same subcarriers one slot apart, whatever the channel's spread of delays. */
export function slotCoherence(channels: readonly CombChannel[], symbolsApart: number): Coherence {
  const bySymbol = new Map(channels.map((comb) => [comb.symbol, comb]));
  const sum = new ProductSum();
  for (const a of channels) {
    const b = bySymbol.get(a.symbol + symbolsApart);
    if (b?.h.length === a.h.length) for (let i = 0; 2 * i < a.h.length; i++) sum.add(a.h, i, b.h, i);
  }
  return sum.coherence();
}
