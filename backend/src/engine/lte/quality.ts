import { combChannels, neighbourCoherence, slotCoherence } from './reference.js';
import type { CombChannel, FramePlace, ReferenceSymbols } from './reference.js';
import { CARRIER_BLOCKS, SLOT_S } from './numerology.js';
import type { Duplex } from './numerology.js';
import { subcarriers } from './rows.js';
import type { Rows } from './rows.js';

/** Slots that are downlink in every configuration: subframes 0 and 5 (TS 36.211 Table 4.2-2). */
export function alwaysDownlink(slot: number): boolean {
  return slot % 10 < 2;
}

/** Slots to look for reference symbols in. */
export function downlinkSlots(duplex: Duplex): (slot: number) => boolean {
  return duplex === 'fdd' ? () => true : alwaysDownlink;
}

/** Carrier offset that is left, Hz, from the same comb one slot later; unambiguous within ±1 kHz. */
export function residualOffset(combs: readonly CombChannel[], perSlot: number): number {
  return slotCoherence(combs, perSlot).angle / (2 * Math.PI * SLOT_S);
}

export interface ReferenceError {
  /** Variance of one reference symbol's error and mean power of the reference symbols. */
  readonly noise: number;
  readonly power: number;
}

/**
 * How well reference symbols agree with the mean of the four that surround them in time and
 * frequency (half a slot and three subcarriers away): the difference carries 5/4 of the
 * error's variance, and the channel's bending only in second order.
 */
export function referenceError(combs: readonly CombChannel[], angleOfThree: number, perSlot: number): ReferenceError {
  let squares = 0, count = 0, power = 0, symbols = 0;
  const bySymbol = new Map(combs.map((comb) => [comb.symbol, comb]));
  const c = Math.cos(angleOfThree), s = Math.sin(angleOfThree);
  for (const middle of combs) {
    const before = bySymbol.get(middle.symbol - (perSlot - 3));
    const after = bySymbol.get(middle.symbol + 3);
    for (let i = 0; i < middle.h.length; i += 2) power += middle.h[i] ** 2 + middle.h[i + 1] ** 2;
    symbols += middle.h.length / 2;
    if (!before || !after || middle.l === 0) continue;
    const around = [before, after].map(asMap);
    middle.subcarriers.forEach((k, i) => {
      // Four subcarriers lie across DC instead of three: leave that place out.
      const low = around.map((m) => m.get(k - 3)), high = around.map((m) => m.get(k + 3));
      if (Math.abs(k) <= 3 || !low[0] || !low[1] || !high[0] || !high[1]) return;
      const lr = low[0][0] + low[1][0], li = low[0][1] + low[1][1];
      const hr = high[0][0] + high[1][0], hi = high[0][1] + high[1][1];
      const re = middle.h[2 * i] - (lr * c - li * s + hr * c + hi * s) / 4;
      const im = middle.h[2 * i + 1] - (li * c + lr * s + hi * c - hr * s) / 4;
      squares += re * re + im * im;
      count++;
    });
  }
  return { noise: count > 0 ? squares / count / 1.25 : Number.NaN, power: symbols > 0 ? power / symbols : 0 };
}

function asMap({ subcarriers: ks, h }: CombChannel): Map<number, [number, number]> {
  const map = new Map<number, [number, number]>();
  ks.forEach((k, i) => map.set(k, [h[2 * i], h[2 * i + 1]]));
  return map;
}

/** Blocks of the widest carrier whose outer ring still shows this cell's reference symbols; `seen` is how far the capture reaches. */
export function measureBlocks(combs: readonly CombChannel[], angleOfThree: number, halfSeen: number): { blocks: number; complete: boolean } {
  let blocks = CARRIER_BLOCKS[0];
  const inner = neighbourCoherence(combs, { inner: 0, outer: 36, angle: angleOfThree });
  for (let i = 1; i < CARRIER_BLOCKS.length; i++) {
    const outer = 6 * CARRIER_BLOCKS[i];
    if (outer > halfSeen) return { blocks, complete: false };
    const ring = neighbourCoherence(combs, { inner: 6 * CARRIER_BLOCKS[i - 1], outer, angle: angleOfThree });
    if (ring.score < 4 || ring.share < 0.25 * inner.share) break;
    blocks = CARRIER_BLOCKS[i];
  }
  return { blocks, complete: true };
}

/** Mean power of a subcarrier over the carrier, over the symbols that are on (more than the noise and half the reference symbols' share above it). */
export function powerWhileOn(rows: Rows, at: FramePlace & { half: number; noise: number; power: number }): number {
  const threshold = at.noise + 0.15 * Math.max(0, at.power - at.noise);
  let sum = 0, count = 0;
  for (let s = rows.first; s < rows.first + rows.spectra.length; s++) {
    const row = subcarriers(rows, s, at);
    if (!row) continue;
    let power = 0;
    for (let i = 0; i < row.length; i++) power += row[i] * row[i];
    power /= 2 * at.half;
    if (power < threshold) continue;
    sum += power;
    count++;
  }
  return count > 0 ? sum / count : 0;
}

/** Combs of port 0 over all slots where they can be. */
export function portCombs(rows: Rows, references: ReferenceSymbols, at: FramePlace & { duplex: Duplex; half: number; port?: number }): CombChannel[] {
  return combChannels(rows, references, { ...at, port: at.port ?? 0, keep: downlinkSlots(at.duplex) });
}
