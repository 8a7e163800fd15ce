import type { BlindOfdm } from '../types.js';
import type { BlockReader } from './block-reader.js';
import type { FoundBlock } from './block-search.js';
import { collectBlocks, halfFrameStartS, type BlockHypothesis } from './burst.js';
import type { DecodedBroadcast } from './burst-decode.js';
import { patternsOf } from './block-pattern.js';
import { numerologyOf } from './numerology.js';

export interface PatternChoice {
  readonly hypothesis: BlockHypothesis;
  readonly method: string;
}

/** Bands below 3 GHz whose 30 kHz blocks follow case C, MHz (TS 38.104 Table 5.4.3.3-1, downlink of n34, n38 to n41, n53). */
const CASE_C_MHZ = [[1880, 1920], [2010, 2025], [2300, 2400], [2483.5, 2690]];

/**
 * Case B or C for a block of 30 kHz: indices 0 and 3 (and 4, 7) start two symbols apart in the
 * two. Decided by the other blocks, else by the data's slots, else by the band (TS 38.213 clause
 * 4.1 with the band tables).
 */
export function choosePattern(
  reader: BlockReader,
  first: FoundBlock,
  { decoded, blind, centreHz, sampleRateHz }: { decoded: DecodedBroadcast; blind: BlindOfdm | null; centreHz: number | null; sampleRateHz: number },
): PatternChoice {
  const { hypothesis, information } = decoded;
  const all = patternsOf(first.spacingHz).map((pattern) => ({ ...hypothesis, pattern }));
  if (all.length === 1) return { hypothesis: all[0], method: `case ${all[0].pattern.name}, the only one at this spacing` };
  const [, ...rest] = all;
  if (rest.every((each) => each.pattern.starts[hypothesis.blockIndex] === all[0].pattern.starts[hypothesis.blockIndex])) {
    return mostBlocks(all, { reader, first, parity: information.halfFrame }) ?? byBand(all, first, centreHz);
  }
  return mostBlocks(all, { reader, first, parity: information.halfFrame })
    ?? bySlots(all, first, { blind, sampleRateHz })
    ?? byBand(all, first, centreHz);
}

function mostBlocks(all: readonly BlockHypothesis[], { reader, first, parity }: { reader: BlockReader; first: FoundBlock; parity: number }): PatternChoice | null {
  const counts = all.map((hypothesis) => {
    const indices = Array.from({ length: hypothesis.maxBlocks }, (_, i) => i);
    return collectBlocks(reader, first, { hypothesis, indices, halfFrames: [0], parity }).length;
  });
  const [a, b] = [...counts].sort((x, y) => y - x);
  if (a === b) return null;
  const hypothesis = all[counts.indexOf(a)];
  return { hypothesis, method: `case ${hypothesis.pattern.name}, by the distances of ${a} blocks` };
}

/** The pattern under which the half frame starts where a half-subframe of the data does. */
function bySlots(all: readonly BlockHypothesis[], first: FoundBlock, { blind, sampleRateHz }: { blind: BlindOfdm | null; sampleRateHz: number }): PatternChoice | null {
  const mu = blind && numerologyOf(blind.subcarrierSpacingHz);
  if (!blind || mu === null || blind.confidence < 0.9 || blind.grid.prefixSamples.length !== 7 * 2 ** mu) return null;
  const originS = blind.grid.startSample / sampleRateHz;
  const misses = all.map((hypothesis) => {
    const halves = (halfFrameStartS(first, hypothesis) - originS) / 0.0005;
    return Math.abs(halves - Math.round(halves)) * 0.0005;
  });
  const symbolS = 1 / first.spacingHz;
  const best = misses.indexOf(Math.min(...misses));
  if (misses[best] > symbolS / 4 || Math.min(...misses.filter((_, i) => i !== best)) < symbolS / 2) return null;
  return { hypothesis: all[best], method: `case ${all[best].pattern.name}, by the longer symbols of the data` };
}

function byBand(all: readonly BlockHypothesis[], first: FoundBlock, centreHz: number | null): PatternChoice {
  const mhz = centreHz === null ? null : (centreHz + first.referenceHz) / 1e6;
  const caseC = mhz === null || mhz > 3000 || CASE_C_MHZ.some(([low, high]) => mhz >= low && mhz <= high);
  const hypothesis = all.find((each) => (each.pattern.name === 'C') === caseC) ?? all[0];
  return { hypothesis, method: `case ${hypothesis.pattern.name}, by the band: nothing in the capture tells it from the other` };
}
