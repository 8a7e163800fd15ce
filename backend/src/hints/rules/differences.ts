import type { ComparisonRow, SettingValue } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import type { Cause } from '../../snapshots/types.js';
import { impliedPair } from '../measurements/impliedSpacing.js';
import { measure } from '../measurements/measure.js';
import { judgeDifference, type Measurement } from '../model.js';
import type { Evidence, Finding, Rule } from '../types.js';
import { basisOf } from './basis.js';

/** Codes whose likelihood is worked out by a rule of their own. */
const OWN_RULE = new Set(['tdd-pattern']);

/** The two snapshots differ in one cause: which side does the air speak against? */
export const differences: Rule = (evidence) =>
  evidence.comparison.causes.filter((cause) => !OWN_RULE.has(cause.code)).flatMap((cause) => judged(cause, evidence) ?? []);

function judged(cause: Cause, evidence: Evidence): Finding | null {
  const row = evidence.comparison.rows.find((r) => r.parameter === cause.root);
  if (!row?.a || !row.b || row.verdict === 'agree') return null;
  const contest = contestOf(cause, row, evidence);
  const verdict = judgeDifference(contest.declared, contest.measurement);
  const measurement = verdict.pattern === 'differ-open' ? null : contest.measurement;
  return {
    code: cause.code,
    side: verdict.side,
    probability: verdict.probability,
    basis: { ...basisOf(row, evidence, { pattern: verdict.pattern, measurement }), airParameter: contest.airParameter },
    consequences: cause.consequences,
  };
}

interface Contest {
  readonly declared: Record<Side, SettingValue>;
  readonly measurement: Measurement | null;
  readonly airParameter: string;
}

/** Transform size and sample rate are seen on the air only through the spacing that they imply. */
function contestOf(cause: Cause, row: ComparisonRow, evidence: Evidence): Contest {
  const implied = cause.root === 'fftSize' || cause.root === 'sampleRate' ? impliedPair(evidence) : null;
  if (implied) return { declared: implied, measurement: measure('subcarrierSpacing', evidence), airParameter: 'subcarrierSpacing' };
  return { declared: { a: row.a!.value, b: row.b!.value }, measurement: measure(cause.root, evidence), airParameter: cause.root };
}
