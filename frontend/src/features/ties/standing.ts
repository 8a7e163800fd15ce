import type { ComparisonRow, Hint } from '#shared/decode';
import { sameSetting } from '../../lib/settings.js';

/** How a tie is drawn: at which rail it stops short, and in what way. */
export type End = 'whole' | 'broken' | 'silent' | 'off-standard';
export interface Standing { a: End; b: End; kind: 'broken' | 'hangs' | 'off-standard' | 'holds'; words: string }

const NAMES = { a: 'side A', b: 'side B' } as const;
const WHOLE = { a: 'whole', b: 'whole' } as const;

type AtOdds = 'a' | 'b' | 'both' | 'unknown';

/** The side that the evidence speaks against: as a hint says; else whose value the air contradicts. */
function atOdds(row: ComparisonRow, hints: readonly Hint[]): AtOdds | null {
  const hint = hints.find((h) => h.parameters?.includes(row.parameter));
  if (hint) return hint.side === 'capture' ? null : hint.side;
  if (row.verdict === 'agree' || row.verdict === 'one-sided') return null;
  const air = row.air ?? row.announced;
  if (air === null || !row.a || !row.b) return 'unknown';
  const a = sameSetting(row.a.value, air);
  const b = sameSetting(row.b.value, air);
  if (a === b) return 'unknown';
  return a ? 'b' : 'a';
}

function broken(side: AtOdds): Standing {
  if (side === 'unknown') return { a: 'broken', b: 'broken', kind: 'broken', words: 'the two differ; nothing tells which is right' };
  if (side === 'both') return { a: 'broken', b: 'broken', kind: 'broken', words: 'both at odds with the air' };
  return { ...WHOLE, [side]: 'broken', kind: 'broken', words: `${NAMES[side]} at odds` };
}

function offStandard(row: ComparisonRow, side: AtOdds | null): Standing {
  const one = side === 'a' || side === 'b' ? side : null;
  const ends = one ? { ...WHOLE, [one]: 'off-standard' } : { a: row.a ? 'off-standard' : 'silent', b: row.b ? 'off-standard' : 'silent' };
  return { ...(ends as { a: End; b: End }), kind: 'off-standard', words: one ? `${NAMES[one]} off standard` : 'off standard' };
}

/** How one row of the comparison stands. */
export function standingOf(row: ComparisonRow, hints: readonly Hint[]): Standing {
  const side = atOdds(row, hints);
  if (row.verdict === 'not-permitted') return offStandard(row, side);
  if (row.verdict === 'differ') return broken(side ?? 'unknown');
  if (side) return broken(side);
  if (row.verdict === 'one-sided') {
    const silent = row.a ? 'b' : 'a';
    return { ...WHOLE, [silent]: 'silent', kind: 'hangs', words: `${NAMES[silent]} does not say` };
  }
  return { ...WHOLE, kind: 'holds', words: 'holds' };
}

const ORDER = { broken: 0, 'off-standard': 1, hangs: 2, holds: 3 } as const;
export interface Tied { row: ComparisonRow; standing: Standing }

/** Broken first, then off standard, then hanging; within each the comparison's own order. */
export const inOrder = (rows: readonly ComparisonRow[], hints: readonly Hint[]): Tied[] =>
  rows.map((row) => ({ row, standing: standingOf(row, hints) })).sort((x, y) => ORDER[x.standing.kind] - ORDER[y.standing.kind]);

export const countOf = (ties: readonly Tied[], kind: Standing['kind']): number => ties.filter((t) => t.standing.kind === kind).length;
