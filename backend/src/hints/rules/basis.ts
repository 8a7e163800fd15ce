import type { SettingValue } from '#shared/decode';
import { parameterFacts } from '#shared/parameters';
import type { ComparisonRow } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import type { Measurement } from '../model.js';
import type { Basis, Evidence } from '../types.js';

/** The sides that declare the row's parameter. */
export function declaredBy(row: ComparisonRow): Side[] {
  return (['a', 'b'] as const).filter((side) => row[side] !== null);
}

/** The basis of a finding about one row of the comparison. */
export function basisOf(row: ComparisonRow, evidence: Evidence, given: { pattern: Basis['pattern']; measurement: Measurement | null }): Basis {
  const declared: Partial<Record<Side, SettingValue>> = {};
  for (const side of declaredBy(row)) declared[side] = row[side]!.value;
  return {
    pattern: given.pattern,
    parameter: row.parameter,
    declared,
    declaredBy: declaredBy(row),
    air: given.measurement?.value ?? null,
    airPeriodHz: given.measurement?.periodHz ?? null,
    airParameter: row.parameter,
    method: given.measurement?.method ?? null,
    announced: row.announced,
    clause: row.clause ?? parameterFacts(row.parameter)?.clause ?? null,
    transmitter: evidence.transmitter,
    facts: [],
    sideFacts: constellationFacts(row.parameter, evidence),
  };
}

const SEEN_IN_CONSTELLATION = new Set(['subcarrierSpacing', 'numerology', 'cyclicPrefix', 'guardInterval', 'fftSize', 'sampleRate', 'technology']);

/** Where spacing or prefix is at odds, the constellation under each side's settings shows it. */
function constellationFacts(parameter: string, evidence: Evidence): Basis['sideFacts'] {
  if (!SEEN_IN_CONSTELLATION.has(parameter)) return {};
  return Object.fromEntries(evidence.under.map(({ side, closes, evmPercent, evmRandomPercent }) => [side, [
    `Demodulated under side ${side.toUpperCase()}'s settings the constellation ${closes ? 'closes' : 'stays open'}: EVM ${evmPercent.toFixed(1)} %, random points would give ${evmRandomPercent.toFixed(1)} %`,
  ]]));
}

/** The basis of a finding about the recording: the first fact is its summary. */
export function recordingBasis(facts: readonly string[], clause: string | null = null): Basis {
  return { pattern: 'capture', parameter: '', declared: {}, declaredBy: [], air: null, airPeriodHz: null, airParameter: '', method: null, announced: null, clause, transmitter: null, facts, sideFacts: {} };
}
