import { matchReference, type ReferenceMatch } from './block-identity.js';
import type { BlockPattern } from './block-pattern.js';
import type { BlockReader } from './block-reader.js';
import type { FoundBlock } from './block-search.js';
import type { MaxBlocks } from './broadcast-payload.js';
import { numerologyOf, TS_HZ, usefulStartTs } from './numerology.js';

/** A block at a place where the pattern puts one, with its reference signal there. */
export interface ReceivedBlock {
  readonly usefulS: number;
  readonly grid: readonly Float64Array[];
  readonly reference: ReferenceMatch;
  /** Index in its half frame, as far as the hypothesis says. */
  readonly blockIndex: number;
  /** Half frames after that of the first block found. */
  readonly halfFrames: number;
}

/** Which block of which pattern the first one is. */
export interface BlockHypothesis {
  readonly pattern: BlockPattern;
  readonly maxBlocks: MaxBlocks;
  readonly blockIndex: number;
}

/** A place fits when its reference signal reaches this: of 64 places in 8 half frames, noise passes one in 400 captures. */
const ACCEPTED = 18;

export const HALF_FRAME_S = 0.005;

/** Start of the useful part of a block's first symbol after the start of its half frame, s. */
export function blockStartS(pattern: BlockPattern, blockIndex: number): number {
  return usefulStartTs(numerologyOf(pattern.spacingHz)!, pattern.starts[blockIndex]) / TS_HZ;
}

/** Start of the half frame that holds a block, s. */
export function halfFrameStartS(first: Pick<FoundBlock, 'usefulS'>, { pattern, blockIndex }: BlockHypothesis): number {
  return first.usefulS - blockStartS(pattern, blockIndex);
}

/** The index that the reference signal carries: for four blocks it holds the half frame as well. */
export function referenceIndex(maxBlocks: MaxBlocks, blockIndex: number, halfFrame: number): number {
  return maxBlocks === 4 ? (blockIndex % 4) + 4 * halfFrame : blockIndex % 8;
}

/**
 * Blocks of the cell at the places that a hypothesis gives, in order of time. `indices` and
 * `halfFrames` bound the search; `parity` is the half frame of the first block where it is known
 * to matter (four blocks).
 */
export function collectBlocks(
  reader: BlockReader,
  first: FoundBlock,
  { hypothesis, indices, halfFrames, parity }: { hypothesis: BlockHypothesis; indices: readonly number[]; halfFrames: readonly number[]; parity: number },
): ReceivedBlock[] {
  const startS = halfFrameStartS(first, hypothesis);
  const blocks: ReceivedBlock[] = [];
  for (const half of halfFrames) {
    const halfFrame = (((parity + half) % 2) + 2) % 2;
    for (const blockIndex of indices) {
      const usefulS = startS + half * HALF_FRAME_S + blockStartS(hypothesis.pattern, blockIndex);
      const grid = reader.grid(first.spacingHz, usefulS, first.referenceHz);
      if (!grid) continue;
      const reference = matchReference(grid, first.cellId, referenceIndex(hypothesis.maxBlocks, blockIndex, halfFrame));
      if (reference.statistic < ACCEPTED) continue;
      blocks.push({ usefulS, grid, reference, blockIndex, halfFrames: half });
    }
  }
  return blocks;
}
