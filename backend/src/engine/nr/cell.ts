import { fitBlock, type BlockFit } from './block-fit.js';
import type { BlockReader } from './block-reader.js';
import type { FoundBlock } from './block-search.js';
import { collectBlocks, halfFrameStartS, HALF_FRAME_S, type BlockHypothesis } from './burst.js';
import type { DecodedBroadcast } from './burst-decode.js';
import { offsetWithinSymbols, type FrequencyEstimate } from './frequency-fit.js';
import { knownBlock } from './known-block.js';

/** A block whose every element is known. */
export interface KnownBlock {
  readonly usefulS: number;
  readonly blockIndex: number;
  readonly halfFrame: 0 | 1;
  readonly systemFrameNumber: number;
  readonly statistic: number;
  readonly grid: readonly Float64Array[];
  readonly known: readonly Float64Array[];
  readonly fit: BlockFit;
}

/** A cell with its decoded blocks, in order of time, and its frame timing. */
export interface Cell {
  readonly spacingHz: number;
  readonly cellId: number;
  readonly hypothesis: BlockHypothesis;
  readonly blocks: readonly KnownBlock[];
  /** Start of a frame in the capture, s, and its number. */
  readonly frameStartS: number;
  readonly frameNumber: number;
  /** SS_REF against the capture's zero, upright. */
  readonly reference: FrequencyEstimate;
  /** Where SS_REF was taken to be when the blocks' grids were made. */
  readonly gridHz: number;
}

/** Every candidate is looked at this many half frames around the first block (25 ms). */
const WINDOW_HALF_FRAMES = 5;
/** Later ones only where the default period of 20 ms puts those seen before, for the clock's drift. */
const PERIOD_HALF_FRAMES = 4;
const LATER_PERIODS = 8;
const LATER_INDICES = 4;
const FREQUENCY_ROUNDS = 3;
/** Gains fitted from 830 elements on 240 subcarriers swallow this share of an offset's trace. */
const SWALLOWED = 240 / 830;

/** All blocks of the cell, each with what it must carry, and the frequency from inside their symbols. */
export function followCell(reader: BlockReader, first: FoundBlock, decoded: DecodedBroadcast, hypothesis: BlockHypothesis): Cell {
  const { information, payload } = decoded;
  const startS = halfFrameStartS(first, hypothesis);
  const frameStartS = startS - information.halfFrame * HALF_FRAME_S;
  const places = placesOf(reader, first, { hypothesis, halfFrame: information.halfFrame });
  let referenceHz = first.referenceHz;
  let gridHz = referenceHz;
  let blocks: KnownBlock[] = [];
  let estimate: FrequencyEstimate = { hz: referenceHz, sigmaHz: first.spacingHz / 30 };
  for (let round = 0; round < FREQUENCY_ROUNDS; round++) {
    gridHz = referenceHz;
    blocks = places.flatMap((place) => {
      const grid = reader.grid(first.spacingHz, place.usefulS, referenceHz);
      if (!grid) return [];
      const halfFrames = place.halfFrames + information.halfFrame;
      const halfFrame = (((halfFrames % 2) + 2) % 2) as 0 | 1;
      const systemFrameNumber = (((information.systemFrameNumber + Math.floor(halfFrames / 2)) % 1024) + 1024) % 1024;
      const known = knownBlock(payload, { cellId: first.cellId, maxBlocks: hypothesis.maxBlocks, blockIndex: place.blockIndex, halfFrame, systemFrameNumber });
      return [{ usefulS: place.usefulS, blockIndex: place.blockIndex, halfFrame, systemFrameNumber, statistic: place.statistic, grid, known, fit: fitBlock(grid, known) }];
    });
    blocks = withoutGhosts(blocks);
    estimate = combined(blocks.map((block) => offsetWithinSymbols(block.grid, block.known, { fit: block.fit, spacingHz: first.spacingHz })));
    referenceHz += estimate.hz / (1 - SWALLOWED);
  }
  return {
    spacingHz: first.spacingHz,
    cellId: first.cellId,
    hypothesis,
    blocks,
    frameStartS,
    frameNumber: information.systemFrameNumber,
    reference: { hz: referenceHz, sigmaHz: estimate.sigmaHz / Math.sqrt(1 - SWALLOWED) },
    gridHz,
  };
}

interface Place { usefulS: number; blockIndex: number; halfFrames: number; statistic: number }

/** Places of the window at hand, then those of the blocks seen there in later periods of 20 ms. */
function placesOf(reader: BlockReader, first: FoundBlock, { hypothesis, halfFrame }: { hypothesis: BlockHypothesis; halfFrame: number }): Place[] {
  const all = Array.from({ length: Math.min(hypothesis.maxBlocks, hypothesis.pattern.starts.length) }, (_, i) => i);
  const near = collectBlocks(reader, first, { hypothesis, indices: all, halfFrames: range(-WINDOW_HALF_FRAMES, WINDOW_HALF_FRAMES), parity: halfFrame });
  const seen = [...new Set(near.map((block) => block.blockIndex))].slice(0, LATER_INDICES);
  const last = Math.max(0, ...near.map((block) => block.halfFrames));
  const steps = range(1, LATER_PERIODS).map((n) => last + PERIOD_HALF_FRAMES * n).filter((half) => half > WINDOW_HALF_FRAMES);
  const later = collectBlocks(reader, first, { hypothesis, indices: seen, halfFrames: steps, parity: halfFrame });
  return [...near, ...later].map(({ usefulS, blockIndex, halfFrames, reference }) => ({ usefulS, blockIndex, halfFrames, statistic: reference.statistic }));
}

function range(from: number, to: number): number[] {
  return Array.from({ length: to - from + 1 }, (_, i) => from + i);
}

/** Noise passes a single reference signal now and then: a block so far below the best, or below this, is none. */
const GHOST_DB = -8;
const BELOW_BEST_DB = 15;

function withoutGhosts(blocks: readonly KnownBlock[]): KnownBlock[] {
  const snrDb = (block: KnownBlock) => 10 * Math.log10(block.fit.signalPower / block.fit.noisePower);
  const best = Math.max(...blocks.map(snrDb));
  return blocks.filter((block) => snrDb(block) > Math.min(GHOST_DB, best - 3) && snrDb(block) > best - BELOW_BEST_DB);
}

/** Mean weighted with the inverse variances. */
function combined(estimates: readonly FrequencyEstimate[]): FrequencyEstimate {
  const weight = estimates.reduce((sum, each) => sum + 1 / each.sigmaHz ** 2, 0);
  if (weight === 0) return { hz: 0, sigmaHz: Number.POSITIVE_INFINITY };
  return { hz: estimates.reduce((sum, each) => sum + each.hz / each.sigmaHz ** 2, 0) / weight, sigmaHz: 1 / Math.sqrt(weight) };
}
