import type { Cells } from './cells.js';
import { ORDERS, openness, type Order } from './constellation.js';
import { equalised, isActive, type Equaliser } from './equalise.js';
import type { Symbols } from './symbols.js';

/** Equalised points, block by block: users and channels of different orders share a carrier. */
export interface Block {
  /** Interleaved. */
  readonly points: Float64Array;
  readonly firstSubcarrier: number;
  readonly subcarriers: readonly number[];
}

const BLOCK_SYMBOLS = 7;
const BLOCK_GROUPS = 2;
/** A subcarrier whose points lie on one line through zero carries pilots, unless most do. */
const PILOT = 0.8;

/** Points at unit mean power in each block, pilots left out. */
export function blocksOf(symbols: Symbols, cells: Cells, equaliser: Equaliser): Block[] {
  const pilots = pilotSubcarriers(symbols, cells, equaliser);
  const blocks: Block[] = [];
  const span = BLOCK_GROUPS * cells.group;
  for (let s = 0; s < symbols.count; s += BLOCK_SYMBOLS) {
    for (let k = 0; k < symbols.width; k += span) {
      const block = oneBlock(symbols, { cells, equaliser, pilots, s, k, span });
      if (block) blocks.push(block);
    }
  }
  return normalised(blocks);
}

interface Corner { cells: Cells; equaliser: Equaliser; pilots: Uint8Array; s: number; k: number; span: number }

function oneBlock(symbols: Symbols, { cells, equaliser, pilots, s, k, span }: Corner): Block | null {
  const points: number[] = [];
  const subcarriers: number[] = [];
  for (let l = s; l < Math.min(symbols.count, s + BLOCK_SYMBOLS); l++) {
    for (let j = k; j < Math.min(symbols.width, k + span); j++) {
      if (pilots[j] || !isActive(cells, l, j)) continue;
      points.push(...equalised(symbols, equaliser, { s: l, k: j }));
      subcarriers.push(j);
    }
  }
  return points.length > 0 ? { points: Float64Array.from(points), firstSubcarrier: k, subcarriers } : null;
}

function pilotSubcarriers(symbols: Symbols, cells: Cells, equaliser: Equaliser): Uint8Array {
  const line = new Float64Array(symbols.width);
  for (let k = 0; k < symbols.width; k++) {
    let re = 0;
    let im = 0;
    let power = 0;
    let count = 0;
    for (let s = 0; s < symbols.count; s++) {
      if (!isActive(cells, s, k)) continue;
      const [x, y] = equalised(symbols, equaliser, { s, k });
      re += x * x - y * y;
      im += 2 * x * y;
      power += x * x + y * y;
      count++;
    }
    line[k] = count >= 8 ? Math.hypot(re, im) / power : 0;
  }
  const middle = Float64Array.from(line).sort()[line.length >> 1];
  return Uint8Array.from(line, (l) => (middle < 0.5 && l > PILOT ? 1 : 0));
}

function normalised(blocks: Block[]): Block[] {
  let power = 0;
  let count = 0;
  for (const { points } of blocks) {
    power += points.reduce((sum, v) => sum + v * v, 0);
    count += points.length / 2;
  }
  const overall = power / Math.max(1, count);
  return blocks.map((b) => {
    const own = b.points.reduce((sum, v) => sum + v * v, 0) / (b.points.length / 2);
    // A block's own power counts only where it plainly differs: its estimate from few points scatters.
    const level = Math.abs(own / overall - 1) > 0.25 ? own : overall;
    return level > 0 ? { ...b, points: b.points.map((v) => v / Math.sqrt(level)) } : b;
  });
}

const CANDIDATES: readonly Order[] = ORDERS.filter((o) => o !== 'bpsk');
const FEWEST_POINTS = 40;
/** Openness below which an order counts as seen: a fine grid comes near to any points, so it has to be clearer. */
const CLEAR: Readonly<Record<Order, number>> = { bpsk: 0.85, qpsk: 0.85, '16qam': 0.83, '64qam': 0.8, '256qam': 0.74 };

/** The order on which most points close; QPSK where none does. */
export function decideOrder(blocks: readonly Block[]): Order {
  const gain = new Map<Order, number>();
  for (const { points } of blocks) {
    const order = orderOf(points);
    if (order) gain.set(order, (gain.get(order) ?? 0) + points.length * (1 - openness(points, order)));
  }
  const whole = orderOf(joined(blocks));
  return [...gain].sort((a, b) => b[1] - a[1])[0]?.[0] ?? whole ?? 'qpsk';
}

function orderOf(points: Float64Array): Order | null {
  if (points.length < 2 * FEWEST_POINTS) return null;
  let best: Order | null = null;
  let least = 1;
  for (const order of CANDIDATES) {
    const open = openness(points, order);
    if (open < CLEAR[order] && open < (best ? 0.93 * least : 1)) {
      best = order;
      least = open;
    }
  }
  return best;
}

/** The points of those blocks that no other order suits better: the same choice under every hypothesis. */
export function pointsAt(blocks: readonly Block[], order: Order): { points: Float64Array; subcarriers: number[] } {
  const fitting = blocks.filter((b) => {
    const own = orderOf(b.points);
    return own === null || own === order;
  });
  const used = fitting.length > 0 ? fitting : blocks;
  return { points: joined(used), subcarriers: used.flatMap((b) => b.subcarriers) };
}

function joined(blocks: readonly Block[]): Float64Array {
  const out = new Float64Array(blocks.reduce((n, b) => n + b.points.length, 0));
  let at = 0;
  for (const { points } of blocks) {
    out.set(points, at);
    at += points.length;
  }
  return out;
}
