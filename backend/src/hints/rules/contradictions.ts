import type { ComparisonRow } from '#shared/decode';
import { hintCodeFor, uplinkName, type ParameterName } from '#shared/parameters';
import { impliedSpacing } from '../measurements/impliedSpacing.js';
import { measure } from '../measurements/measure.js';
import { judgeContradiction } from '../model.js';
import type { Evidence, Finding, Rule } from '../types.js';
import { basisOf, declaredBy } from './basis.js';

/** Parameters with a rule of their own, or that are seen only through others. */
const ELSEWHERE = new Set(['numerology', 'fftSize', 'sampleRate', 'carrierFrequency', 'uplinkCarrierFrequency']);

/** What agreeing snapshots, or the one that speaks, declare against what the air shows. */
export const contradictions: Rule = (evidence) => [
  ...evidence.comparison.rows.flatMap((row) => againstAir(row, evidence) ?? []),
  ...impliedAgainstAir(evidence),
];

function againstAir(row: ComparisonRow, evidence: Evidence): Finding | null {
  if (ELSEWHERE.has(row.parameter) || row.verdict === 'differ' || otherDirection(row.parameter, evidence)) return null;
  const sides = declaredBy(row);
  const measurement = measure(row.parameter, evidence);
  if (!measurement || sides.length === 0) return null;
  const declared = row[sides[0]!]!.value;
  const verdict = judgeContradiction(declared, measurement, { sides, transmitter: evidence.transmitter });
  if (!verdict) return null;
  return {
    code: hintCodeFor(row.parameter as ParameterName, 'air'),
    side: verdict.side,
    probability: verdict.probability,
    basis: basisOf(row, evidence, { pattern: verdict.pattern, measurement }),
    consequences: [],
  };
}

/** Where a snapshot states the uplink apart, its plain names speak of the downlink. */
function otherDirection(parameter: string, evidence: Evidence): boolean {
  return evidence.air['direction']?.value === 'uplink' && evidence.comparison.rows.some((row) => row.parameter === uplinkName(parameter as ParameterName));
}

/** Rate over transform size gives a spacing that the air does not show, on the sides that declare both. */
function impliedAgainstAir(evidence: Evidence): Finding[] {
  const { rows } = evidence.comparison;
  const measurement = measure('subcarrierSpacing', evidence);
  if (!measurement || rows.some((r) => ['fftSize', 'sampleRate'].includes(r.parameter) && r.verdict === 'differ')) return [];
  const sides = (['a', 'b'] as const).filter((side) => impliedSpacing(evidence, side) !== null);
  if (sides.length === 0) return [];
  const implied = impliedSpacing(evidence, sides[0]!)!;
  const verdict = judgeContradiction(implied, measurement, { sides, transmitter: evidence.transmitter });
  if (!verdict) return [];
  const culprit = culpritOf(implied / Number(measurement.value));
  const basis = { ...basisOf(rows.find((r) => r.parameter === culprit)!, evidence, { pattern: verdict.pattern, measurement }), airParameter: 'subcarrierSpacing' };
  return [{ code: culprit === 'fftSize' ? 'fft-size' : 'sample-rate', side: verdict.side, probability: verdict.probability, basis, consequences: [] }];
}

/** Transforms change by powers of two, clocks by other ratios (three quarters above all; common practice). */
function culpritOf(ratio: number): 'fftSize' | 'sampleRate' {
  const octaves = Math.log2(ratio);
  return Math.abs(octaves - Math.round(octaves)) < 0.02 ? 'fftSize' : 'sampleRate';
}
