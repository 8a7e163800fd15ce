import type { Evidence, Finding, Rule } from '../types.js';
import { basisOf } from './basis.js';
import { judgeContradiction, judgeDifference, type Measurement } from '../model.js';

/** The declared downlink-uplink patterns against the level in each symbol of the capture. */
export const tddPattern: Rule = (evidence) => {
  const cause = evidence.comparison.causes.find((c) => c.code === 'tdd-pattern');
  if (!cause) return contradictedPattern(evidence);
  const row = evidence.comparison.rows.find((r) => r.parameter === cause.root);
  if (!row?.a || !row.b) return [];
  const measurement = fromLevels(evidence);
  const verdict = judgeDifference({ a: 'a', b: 'b' }, measurement);
  const basis = basisOf(row, evidence, { pattern: verdict.side === 'unknown' ? 'differ-open' : 'pattern-decided', measurement: null });
  const facts = verdict.side === 'unknown' ? [] : evidence.patterns.map((p) => p.reason);
  return [{ code: 'tdd-pattern', side: verdict.side, probability: verdict.probability, basis: { ...basis, facts }, consequences: cause.consequences }];
};

/** The two declared patterns as the only settings; likelihoods stand against the best pattern found. */
function fromLevels({ patterns }: Evidence): Measurement | null {
  const a = patterns.find((p) => p.side === 'a');
  const b = patterns.find((p) => p.side === 'b');
  if (!a || !b) return null;
  return { value: null, method: null, otherLogLikelihood: -6, logLikelihood: (setting) => Math.max(-40, (setting === 'a' ? a : b).logLikelihood) };
}

/** Agreeing or single patterns that the level refutes. */
function contradictedPattern(evidence: Evidence): Finding[] {
  const row = evidence.comparison.rows.find((r) => r.parameter === 'tddPeriodicity' || r.parameter === 'tddDownlinkSlots');
  if (!row || evidence.patterns.length === 0) return [];
  const { patterns } = evidence;
  const best = Math.max(...patterns.map((p) => p.logLikelihood));
  const measurement: Measurement = { value: null, method: null, otherLogLikelihood: Math.log(0.3), logLikelihood: () => best };
  const verdict = judgeContradiction(null, measurement, { sides: patterns.map((p) => p.side), transmitter: evidence.transmitter });
  if (!verdict) return [];
  const basis = basisOf(row, evidence, { pattern: 'pattern-contradicted', measurement: null });
  return [{ code: 'tdd-pattern', side: verdict.side, probability: verdict.probability, basis: { ...basis, facts: [...new Set(patterns.map((p) => p.reason))] }, consequences: [] }];
}
