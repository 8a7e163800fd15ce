/** Case letters of TS 38.213 clause 4.1. */
export type BlockCase = 'A' | 'B' | 'C' | 'D' | 'E' | 'F' | 'G';

interface Pattern {
  readonly spacingHz: number;
  readonly starts: readonly number[];
  readonly step: number;
  readonly repeats: readonly number[];
}

const upTo = (n: number) => Array.from({ length: n }, (_, i) => i);

/** First symbols of the candidate blocks in a half frame: `starts` + `step`·n. */
const PATTERNS: Record<BlockCase, Pattern> = {
  A: { spacingHz: 15000, starts: [2, 8], step: 14, repeats: upTo(5) },
  B: { spacingHz: 30000, starts: [4, 8, 16, 20], step: 28, repeats: upTo(2) },
  C: { spacingHz: 30000, starts: [2, 8], step: 14, repeats: upTo(10) },
  D: { spacingHz: 120000, starts: [4, 8, 16, 20], step: 28, repeats: [0, 1, 2, 3, 5, 6, 7, 8, 10, 11, 12, 13, 15, 16, 17, 18] },
  E: { spacingHz: 240000, starts: [8, 12, 16, 20, 32, 36, 40, 44], step: 56, repeats: [0, 1, 2, 3, 5, 6, 7, 8] },
  F: { spacingHz: 480000, starts: [2, 9], step: 14, repeats: upTo(32) },
  G: { spacingHz: 960000, starts: [2, 9], step: 14, repeats: upTo(32) },
};

export function blockSpacingHz(blockCase: BlockCase): number {
  return PATTERNS[blockCase].spacingHz;
}

/** First symbol of a candidate block, counted in the block's numerology from the start of the half frame. */
export function blockStartSymbol(blockCase: BlockCase, blockIndex: number): number {
  const { starts, step, repeats } = PATTERNS[blockCase];
  const round = repeats[Math.floor(blockIndex / starts.length)];
  if (round === undefined) throw new RangeError(`case ${blockCase} has no block ${blockIndex}`);
  return starts[blockIndex % starts.length] + step * round;
}
