import type { HintSide, Side } from '#shared/vocabulary';
import type { NotPermitted } from '../../snapshots/types.js';
import type { Evidence, Finding, Rule } from '../types.js';
import { basisOf } from './basis.js';

/** Reading a table of a standard leaves little doubt; what is left is that the file was misread. */
const SURE = 0.96;

/** Settings, or combinations, that the standards do not allow: they need one side only. */
export const notPermitted: Rule = (evidence) => {
  const found = evidence.comparison.notPermitted;
  const parameters = [...new Set([...found.a, ...found.b].map((item) => item.parameter))];
  return parameters.flatMap((parameter) => onParameter(evidence, parameter) ?? []);
};

function onParameter(evidence: Evidence, parameter: string): Finding | null {
  const row = evidence.comparison.rows.find((r) => r.parameter === parameter);
  const items = { a: evidence.comparison.notPermitted.a.find((i) => i.parameter === parameter), b: evidence.comparison.notPermitted.b.find((i) => i.parameter === parameter) };
  const first = items.a ?? items.b;
  if (!row || !first || (first.yieldsToDifference && row.verdict === 'differ')) return null;
  const side: HintSide = items.a && items.b ? 'both' : items.a ? 'a' : 'b';
  const basis = basisOf(row, evidence, { pattern: 'not-permitted', measurement: null });
  return { code: 'not-permitted', side, probability: SURE, basis: { ...basis, clause: first.clause, sideFacts: factsOf(items) }, consequences: [], restsOn: first.together ?? [] };
}

function factsOf(items: Record<Side, NotPermitted | undefined>): Partial<Record<Side, readonly string[]>> {
  return { ...(items.a && { a: [items.a.note] }), ...(items.b && { b: [items.b.note] }) };
}
