/** Where the candidate blocks of a half frame start: TS 38.213 clause 4.1, cases A to G. */
export interface BlockPattern {
  readonly name: 'A' | 'B' | 'C' | 'D' | 'E' | 'F' | 'G';
  readonly spacingHz: number;
  /** First symbol of each candidate, counted from the start of the half frame. */
  readonly starts: readonly number[];
}

function pattern(name: BlockPattern['name'], spacingHz: number, { first, step, rounds }: { first: number[]; step: number; rounds: number[] }): BlockPattern {
  return { name, spacingHz, starts: rounds.flatMap((n) => first.map((symbol) => symbol + step * n)) };
}

const upTo = (count: number) => Array.from({ length: count }, (_, n) => n);
const inGroups = (of: number) => upTo(4).flatMap((group) => upTo(of).map((n) => group * (of + 1) + n));

export const BLOCK_PATTERNS: readonly BlockPattern[] = [
  pattern('A', 15_000, { first: [2, 8], step: 14, rounds: upTo(4) }),
  pattern('B', 30_000, { first: [4, 8, 16, 20], step: 28, rounds: upTo(2) }),
  pattern('C', 30_000, { first: [2, 8], step: 14, rounds: upTo(4) }),
  pattern('D', 120_000, { first: [4, 8, 16, 20], step: 28, rounds: inGroups(4) }),
  pattern('E', 240_000, { first: [8, 12, 16, 20, 32, 36, 40, 44], step: 56, rounds: [0, 1, 2, 3, 5, 6, 7, 8] }),
  pattern('F', 480_000, { first: [2, 9], step: 14, rounds: upTo(32) }),
  pattern('G', 960_000, { first: [2, 9], step: 14, rounds: upTo(32) }),
];

/** Spacings a block may have: TS 38.211 clause 7.4.3.1. */
export const BLOCK_SPACINGS_HZ: readonly number[] = [15_000, 30_000, 120_000, 240_000, 480_000, 960_000];

export function patternsOf(spacingHz: number): readonly BlockPattern[] {
  return BLOCK_PATTERNS.filter((each) => each.spacingHz === spacingHz);
}
