import type { Finding, Rule } from '../types.js';
import { basisOf } from './basis.js';

const SURE = 0.8;

/** Two statements of one snapshot that cannot both hold. */
export const selfContradictions: Rule = (evidence) => evidence.comparison.contradictions.flatMap((item): Finding[] => {
  const row = evidence.comparison.rows.find((r) => item.parameters.includes(r.parameter as never) && r[item.side]);
  if (!row) return [];
  const basis = { ...basisOf(row, evidence, { pattern: 'contradiction', measurement: null }), sideFacts: { [item.side]: [item.note] } };
  return [{ code: item.code, side: item.side, probability: SURE, basis, consequences: [] }];
});
