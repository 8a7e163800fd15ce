import { transformOf } from '../fourier/fft.js';
import { mixed } from './primary-fix.js';
import { numerologyOf, TS_HZ, usefulStartTs, prefixTs } from './numerology.js';
import { TILE, usedSnrDb, type Tiles } from './carrier-level.js';
import type { WorkSignal } from './work-signal.js';

/** Blocks of the data's spacing between which the signal's power stands out of the noise. */
export interface CarrierPlacement {
  readonly resourceBlocks: number;
  /** Subcarrier 6·N_RB, Hz against the capture's zero. */
  readonly referenceHz: number;
  /** Power of the weaker outermost block against the usual one: near 1 where the edges are the carrier's own. */
  readonly edgeShare: number;
  /** True where N_RB is one of TS 38.104 Table 5.3.2-1 or -2 for the spacing. */
  readonly inTable: boolean;
  readonly lowHz: number;
  readonly highHz: number;
  /** Of the resource elements in use, against the floor beside the carrier; null where it cannot be told. */
  readonly snrDb: number | null;
}

/** N_RB by spacing, TS 38.104 Tables 5.3.2-1 and 5.3.2-2 (3 and 7 MHz, FR2-2: from memory). */
export const TRANSMISSION_BANDWIDTHS: ReadonlyMap<number, readonly number[]> = new Map([
  [15_000, [15, 25, 35, 52, 79, 106, 133, 160, 188, 216, 242, 270]],
  [30_000, [11, 24, 38, 51, 65, 78, 92, 106, 119, 133, 162, 189, 217, 245, 273]],
  [60_000, [11, 18, 24, 31, 38, 44, 51, 58, 65, 79, 93, 107, 121, 135, 66, 132, 264]],
  [120_000, [32, 66, 132, 264]],
  [480_000, [66, 124, 248]],
  [960_000, [33, 62, 124, 148]],
]);

/** Symbols averaged at most: enough for 1 % of the power of a block. */
const SYMBOLS = 420;
const BLOCK = 12;

export interface Grid {
  readonly spacingHz: number;
  readonly extended: boolean;
  /** Start of a subframe, s. */
  readonly subframeS: number;
  /** Frequency of subcarrier 0 of some common resource block, Hz against the capture's zero. */
  readonly blockEdgeHz: number;
  /** Step in which the data's block edges may lie beside it, Hz. */
  readonly stepHz: number;
}

/**
 * The carrier's extent on the grid of common resource blocks: the power of each subcarrier,
 * averaged over many symbols, block by block. Null where an edge lies outside what was recorded
 * or no block stands out.
 */
export function placeCarrier(work: WorkSignal, grid: Grid): CarrierPlacement | null {
  const { powers, firstHz, tiles } = subcarrierPowers(work, grid);
  const rough = sharpestSpan(powers, { grid, firstHz, floor: noiseFloor(powers), least: LEAST_RISE });
  if (!rough) return null;
  // Beside what was seen lies the floor itself, no longer its lowest part: weaker edges stand out of it.
  const floor = floorBeside(powers, rough);
  const span = sharpestSpan(powers, { grid, firstHz, floor, least: LEAST_RISE_ABOVE_FLOOR }) ?? rough;
  const place = placement(firstHz + span.from * grid.spacingHz, span.blocks, grid.spacingHz);
  const to = span.from + BLOCK * span.blocks;
  return { ...place, edgeShare: span.edgeShare, snrDb: usedSnrDb(tiles, { from: span.from, to, floor }) };
}

/** Rise of a block's mean power over the floor that counts: over the lowest part of it, and over its median. */
const LEAST_RISE = 0.12;
const LEAST_RISE_ABOVE_FLOOR = 0.075;

interface Span { readonly from: number; readonly blocks: number; readonly score: number; readonly edgeShare: number }

function sharpestSpan(powers: Float64Array, { grid, firstHz, floor, least }: { grid: Grid; firstHz: number; floor: number; least: number }): Span | null {
  let best: Span | null = null;
  for (let shift = 0; shift < Math.round((BLOCK * grid.spacingHz) / grid.stepHz); shift++) {
    const edge = grid.blockEdgeHz + shift * grid.stepHz;
    const first = ((Math.round((edge - firstHz) / grid.spacingHz) % BLOCK) + BLOCK) % BLOCK;
    const span = occupiedBlocks(powers, { first, floor, least });
    if (span && (!best || span.score > best.score)) best = span;
  }
  return best;
}

/** Median of the subcarriers outside a span, two away from its edges. */
function floorBeside(powers: Float64Array, { from, blocks }: Span): number {
  const outside = [...powers.slice(0, Math.max(0, from - 2)), ...powers.slice(from + BLOCK * blocks + 2)].sort((a, b) => a - b);
  return outside[outside.length >> 1] ?? noiseFloor(powers);
}

function placement(lowHz: number, resourceBlocks: number, spacingHz: number): Omit<CarrierPlacement, 'edgeShare' | 'snrDb'> {
  return {
    resourceBlocks,
    referenceHz: lowHz + 6 * resourceBlocks * spacingHz,
    inTable: TRANSMISSION_BANDWIDTHS.get(spacingHz)?.includes(resourceBlocks) ?? false,
    lowHz,
    highHz: lowHz + BLOCK * resourceBlocks * spacingHz,
  };
}

/** A carrier that holds the blocks seen and some silent ones. */
export function carrierOf(seen: CarrierPlacement, { referenceHz, resourceBlocks }: { referenceHz: number; resourceBlocks: number }, spacingHz: number): CarrierPlacement {
  if (resourceBlocks === seen.resourceBlocks) return seen;
  return { ...placement(referenceHz - 6 * resourceBlocks * spacingHz, resourceBlocks, spacingHz), edgeShare: 0, snrDb: seen.snrDb };
}

/** Mean power of each subcarrier, lowest first, and the frequency of the first; the power of each symbol by tiles. */
function subcarrierPowers(work: WorkSignal, grid: Grid): { powers: Float64Array; firstHz: number; tiles: Tiles } {
  const size = Math.round(work.rateHz / grid.spacingHz);
  const anchorHz = grid.blockEdgeHz - work.centreHz;
  const spectrum = new Float64Array(2 * size);
  // The mixer turned the band: only bins that the work signal's filter passed are kept.
  const lowest = Math.ceil((work.lowHz - anchorHz) / grid.spacingHz + size / 2);
  const highest = Math.floor((work.highHz - anchorHz) / grid.spacingHz + size / 2);
  const powers = new Float64Array(highest - lowest + 1);
  const tiles: Float64Array[] = [];
  const starts = symbolStarts(work, grid);
  const step = Math.max(1, Math.floor(starts.length / SYMBOLS));
  const count = Math.ceil(starts.length / step);
  for (let i = 0; i < starts.length; i += step) {
    transformOf(size).forward(mixed(work, { start: starts[i], count: size, referenceHz: anchorHz }), spectrum);
    const row = new Float64Array(Math.ceil(powers.length / TILE));
    for (let k = 0; k < powers.length; k++) {
      const at = 2 * ((((lowest + k + size / 2) % size) + size) % size);
      const power = spectrum[at] ** 2 + spectrum[at + 1] ** 2;
      powers[k] += power / count;
      row[Math.floor(k / TILE)] += power / TILE;
    }
    tiles.push(row);
  }
  return { powers, firstHz: grid.blockEdgeHz + (lowest - size / 2) * grid.spacingHz, tiles };
}

/** First samples of the windows, in the middle of each prefix. */
function symbolStarts(work: WorkSignal, { spacingHz, extended, subframeS }: Grid): number[] {
  const mu = numerologyOf(spacingHz)!;
  const size = work.rateHz / spacingHz;
  const samples = work.iq.length / 2;
  const back = prefixTs(mu, 1, extended) / 2;
  const starts: number[] = [];
  const origin = subframeS - work.startS;
  for (let l = Math.floor((-origin / 0.001) * 14 * 2 ** mu) - 1; ; l++) {
    const start = Math.round((origin + (usefulStartTs(mu, l, extended) - back) / TS_HZ) * work.rateHz);
    if (start + size > samples) return starts;
    if (start >= 0) starts.push(start);
  }
}

/** Runs in which the level of what is empty is sought: a third of a block is often all that a recording holds beside the carrier. */
const RUN = 4;
const EMPTIEST = 1 / 24;

/** The level of what is empty: the lowest runs of the band, whatever fills the rest. */
function noiseFloor(powers: Float64Array): number {
  const runs = medians(powers, { first: 0, run: RUN }).map(({ power }) => power).sort((a, b) => a - b);
  return runs[Math.floor(runs.length * EMPTIEST)] ?? 0;
}

interface Piece { readonly at: number; readonly power: number }

/** Median of each run's subcarriers: a spur or the tuner's DC does not fill a block. Parts of a run at the ends count from three subcarriers on. */
function medians(powers: Float64Array, { first, run }: { first: number; run: number }): Piece[] {
  const pieces: Piece[] = [];
  for (let at = first - run; at < powers.length; at += run) {
    const sorted = powers.slice(Math.max(0, at), at + run).sort();
    if (sorted.length < 3) continue;
    pieces.push({ at, power: (sorted[(sorted.length - 1) >> 1] + sorted[sorted.length >> 1]) / 2 });
  }
  return pieces;
}

/** The run of blocks from the first to the last that stand out; the score is how sharply the two edges stand. */
function occupiedBlocks(powers: Float64Array, { first, floor, least }: { first: number; floor: number; least: number }): Span | null {
  const pieces = medians(powers, { first, run: BLOCK });
  const blocks = pieces.map(({ power }) => power);
  const typical = [...blocks].sort((a, b) => a - b)[Math.floor(blocks.length * 0.9)];
  if (!typical || typical < 1.15 * floor) return null;
  const threshold = floor + Math.max(least * floor, 0.04 * (typical - floor));
  const from = blocks.findIndex((power) => power > threshold);
  const to = blocks.findLastIndex((power) => power > threshold) + 1;
  // An edge with nothing empty beside it may lie outside the recording.
  if (from < 1 || to > blocks.length - 1 || to <= from) return null;
  const edgeShare = (Math.min(blocks[from], blocks[to - 1]) - floor) / (typical - floor);
  const low = pieces[from].at;
  const high = pieces[to - 1].at + BLOCK;
  return { from: low, blocks: to - from, edgeShare, score: sharpness(powers, low, floor) + sharpness([...powers].reverse(), powers.length - high, floor) };
}

/** Power of the first three subcarriers inside against that of the three outside. */
function sharpness(powers: ArrayLike<number>, edge: number, floor: number): number {
  let inside = 0;
  let outside = 0;
  for (let i = 0; i < 3; i++) {
    inside += powers[edge + i] - floor;
    outside += powers[edge - 1 - i] - floor;
  }
  return (inside - outside) / (Math.abs(inside) + Math.abs(outside) + floor);
}
