import { BLOCK_SUBCARRIERS, broadcastLayout, SYNC_FIRST } from './block-layout.js';
import { broadcastReference, primarySequence, secondarySequence, SYNC_LENGTH } from './sequences.js';

const CELLS_PER_PRIMARY = 336;
/** Subcarriers on each side over which the channel seen by the primary signal is averaged. */
const SMOOTHING = 3;

let secondaries: Float64Array[] | null = null;

function secondaryOf(cellId: number): Float64Array {
  secondaries ??= Array.from({ length: 3 * CELLS_PER_PRIMARY }, (_, id) => secondarySequence(id));
  return secondaries[cellId];
}

export interface CellMatch {
  readonly cellId: number;
  /** 127 for a clean signal, about Exp(1) for a wrong cell. */
  readonly statistic: number;
}

/**
 * Statistics of the 336 cells that share a primary signal: the secondary signal against the
 * channel that the primary one saw. A common phase between the two does not matter.
 */
export function matchCells(grid: readonly Float64Array[], nId2: number): CellMatch[] {
  const { products, power } = secondaryProducts(grid, nId2);
  return Array.from({ length: CELLS_PER_PRIMARY }, (_, nId1) => {
    const cellId = 3 * nId1 + nId2;
    const sequence = secondaryOf(cellId);
    let re = 0;
    let im = 0;
    for (let n = 0; n < SYNC_LENGTH; n++) {
      re += sequence[n] * products[2 * n];
      im += sequence[n] * products[2 * n + 1];
    }
    return { cellId, statistic: power > 0 ? (re * re + im * im) / power : 0 };
  });
}

/** Y(k)·ĥ*(k) of the secondary signal's symbol, and the sum of their powers. */
function secondaryProducts(grid: readonly Float64Array[], nId2: number): { products: Float64Array; power: number } {
  const chips = primarySequence(nId2);
  const products = new Float64Array(2 * SYNC_LENGTH);
  let power = 0;
  for (let n = 0; n < SYNC_LENGTH; n++) {
    let re = 0;
    let im = 0;
    for (let m = Math.max(0, n - SMOOTHING); m <= Math.min(SYNC_LENGTH - 1, n + SMOOTHING); m++) {
      re += chips[m] * grid[0][2 * (SYNC_FIRST + m)];
      im += chips[m] * grid[0][2 * (SYNC_FIRST + m) + 1];
    }
    const a = grid[2][2 * (SYNC_FIRST + n)];
    const b = grid[2][2 * (SYNC_FIRST + n) + 1];
    products[2 * n] = a * re + b * im;
    products[2 * n + 1] = b * re - a * im;
    power += products[2 * n] ** 2 + products[2 * n + 1] ** 2;
  }
  return { products, power };
}

export interface ReferenceMatch {
  /** ī of TS 38.211 clause 7.4.1.4.1. */
  readonly index: number;
  /** Delay of the strongest path after the place assumed, in useful parts. */
  readonly delay: number;
  /** 144 for a clean signal with one path, about Gamma(3) at one delay without the signal. */
  readonly statistic: number;
}

/** Delays tried: from −4 % to +8 % of the useful part, in steps of 1/256 (the block's resolution is 1/240). */
const DELAYS = Array.from({ length: 31 }, (_, i) => (i - 10) / 256);

/** A delay between two of the steps costs up to 3.4 dB: the neighbourhood of the best is looked at again, in halves. */
const HALF_STEP = 1 / 512;

/** How well the broadcast channel's reference signal of one index fits: the three symbols without their phases. */
export function matchReference(grid: readonly Float64Array[], cellId: number, index: number): ReferenceMatch {
  const products = referenceProducts(grid, cellId, index);
  const best = DELAYS.reduce((top, delay) => better(top, { index, delay, statistic: statisticAt(products, delay) }), { index, delay: 0, statistic: 0 });
  return [best.delay - HALF_STEP, best.delay + HALF_STEP].reduce((top, delay) => better(top, { index, delay, statistic: statisticAt(products, delay) }), best);
}

function better(a: ReferenceMatch, b: ReferenceMatch): ReferenceMatch {
  return b.statistic > a.statistic ? b : a;
}

/** Received times sent elements by symbol (interleaved), their subcarriers, and the power of each symbol. */
interface Products { readonly values: Float64Array; readonly places: readonly { readonly symbol: number; readonly subcarrier: number }[]; readonly power: Float64Array }

function referenceProducts(grid: readonly Float64Array[], cellId: number, index: number): Products {
  const places = broadcastLayout(cellId).reference;
  const sent = broadcastReference(cellId, index);
  const values = new Float64Array(2 * places.length);
  const power = new Float64Array(4);
  places.forEach(({ symbol, subcarrier }, i) => {
    const a = grid[symbol][2 * subcarrier];
    const b = grid[symbol][2 * subcarrier + 1];
    values[2 * i] = a * sent[2 * i] + b * sent[2 * i + 1];
    values[2 * i + 1] = b * sent[2 * i] - a * sent[2 * i + 1];
    power[symbol] += values[2 * i] ** 2 + values[2 * i + 1] ** 2;
  });
  return { values, places, power };
}

function statisticAt({ values, places, power }: Products, delay: number): number {
  const turns = phasorsOf(delay);
  const sums = new Float64Array(8);
  for (let i = 0; i < places.length; i++) {
    const { symbol, subcarrier } = places[i];
    const cos = turns[2 * subcarrier];
    const sin = turns[2 * subcarrier + 1];
    sums[2 * symbol] += values[2 * i] * cos - values[2 * i + 1] * sin;
    sums[2 * symbol + 1] += values[2 * i] * sin + values[2 * i + 1] * cos;
  }
  let statistic = 0;
  for (let symbol = 1; symbol < 4; symbol++) {
    if (power[symbol] > 0) statistic += (sums[2 * symbol] ** 2 + sums[2 * symbol + 1] ** 2) / power[symbol];
  }
  return statistic;
}

/** The index of the eight that fits best. */
export function bestReference(grid: readonly Float64Array[], cellId: number): ReferenceMatch {
  let best: ReferenceMatch = { index: 0, delay: 0, statistic: 0 };
  for (let index = 0; index < 8; index++) {
    const match = matchReference(grid, cellId, index);
    if (match.statistic > best.statistic) best = match;
  }
  return best;
}

const phasors = new Map<number, Float64Array>();

function phasorsOf(delay: number): Float64Array {
  let row = phasors.get(delay);
  if (!row) {
    row = Float64Array.from({ length: 2 * BLOCK_SUBCARRIERS }, (_, i) => (i % 2 === 0 ? Math.cos : Math.sin)(2 * Math.PI * delay * (i >> 1)));
    phasors.set(delay, row);
  }
  return row;
}
