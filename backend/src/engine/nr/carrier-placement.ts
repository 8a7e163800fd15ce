import { transformOf } from '../fourier/fft.js';
import { mixed } from './primary-fix.js';
import { numerologyOf, TS_HZ, usefulStartTs, prefixTs } from './numerology.js';
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
}

/** N_RB by spacing, TS 38.104 Tables 5.3.2-1 and 5.3.2-2 (3 and 7 MHz, FR2-2: from memory). */
const TRANSMISSION_BANDWIDTHS: ReadonlyMap<number, readonly number[]> = new Map([
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
  const { powers, firstHz } = subcarrierPowers(work, grid);
  const floor = noiseFloor(powers);
  const best = { score: Number.NEGATIVE_INFINITY, placement: null as CarrierPlacement | null };
  for (let shift = 0; shift < Math.round((BLOCK * grid.spacingHz) / grid.stepHz); shift++) {
    const edge = grid.blockEdgeHz + shift * grid.stepHz;
    const first = ((Math.round((edge - firstHz) / grid.spacingHz) % BLOCK) + BLOCK) % BLOCK;
    const span = occupiedBlocks(powers, first, floor);
    if (!span || span.score <= best.score) continue;
    best.score = span.score;
    best.placement = { ...placement(firstHz + span.from * grid.spacingHz, span.blocks, grid.spacingHz), edgeShare: span.edgeShare };
  }
  return best.placement;
}

function placement(lowHz: number, resourceBlocks: number, spacingHz: number): Omit<CarrierPlacement, 'edgeShare'> {
  return {
    resourceBlocks,
    referenceHz: lowHz + 6 * resourceBlocks * spacingHz,
    inTable: TRANSMISSION_BANDWIDTHS.get(spacingHz)?.includes(resourceBlocks) ?? false,
    lowHz,
    highHz: lowHz + BLOCK * resourceBlocks * spacingHz,
  };
}

/** Mean power of each subcarrier, lowest first, and the frequency of the first. */
function subcarrierPowers(work: WorkSignal, grid: Grid): { powers: Float64Array; firstHz: number } {
  const size = Math.round(work.rateHz / grid.spacingHz);
  const anchorHz = grid.blockEdgeHz - work.centreHz;
  const spectrum = new Float64Array(2 * size);
  const powers = new Float64Array(size);
  const starts = symbolStarts(work, grid);
  const step = Math.max(1, Math.floor(starts.length / SYMBOLS));
  for (let i = 0; i < starts.length; i += step) {
    transformOf(size).forward(mixed(work, { start: starts[i], count: size, referenceHz: anchorHz }), spectrum);
    for (let k = 0; k < size; k++) {
      const at = 2 * ((k + size / 2) % size);
      powers[k] += spectrum[at] ** 2 + spectrum[at + 1] ** 2;
    }
  }
  // The mixer turned the band: only bins that the work signal's filter passed are kept.
  const lowest = Math.ceil((work.lowHz - anchorHz) / grid.spacingHz + size / 2);
  const highest = Math.floor((work.highHz - anchorHz) / grid.spacingHz + size / 2);
  const kept = Array.from({ length: highest - lowest + 1 }, (_, i) => powers[(((lowest + i) % size) + size) % size]);
  return { powers: Float64Array.from(kept), firstHz: grid.blockEdgeHz + (lowest - size / 2) * grid.spacingHz };
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
function occupiedBlocks(powers: Float64Array, first: number, floor: number): { from: number; blocks: number; score: number; edgeShare: number } | null {
  const pieces = medians(powers, { first, run: BLOCK });
  const blocks = pieces.map(({ power }) => power);
  const typical = [...blocks].sort((a, b) => a - b)[Math.floor(blocks.length * 0.9)];
  if (!typical || typical < 1.15 * floor) return null;
  const threshold = floor + Math.max(0.12 * floor, 0.04 * (typical - floor));
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
