import type { AirValue } from '#shared/decode';
import type { Evidence } from '../types.js';

/** The number behind an air value, or null where it was not determined. */
export function airNumber(evidence: Evidence, name: string): { value: number; air: AirValue } | null {
  const air = evidence.air[name];
  return air && typeof air.value === 'number' && Number.isFinite(air.value) ? { value: air.value, air } : null;
}

/** The word behind an air value, or null where it was not determined. */
export function airWord(evidence: Evidence, name: string): string | null {
  const value = evidence.air[name]?.value;
  return typeof value === 'string' ? value : null;
}

/** Declared value of a side for a parameter, undefined where the side is silent. */
export function declaredValue(evidence: Evidence, side: 'a' | 'b', parameter: string): unknown {
  return evidence.comparison.rows.find((row) => row.parameter === parameter)?.[side]?.value;
}
