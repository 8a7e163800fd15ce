import type { ParameterName } from '#shared/parameters';
import type { NotPermitted } from '../types.js';
import type { View } from '../compare/view.js';

interface Range { readonly parameter: ParameterName; readonly technology: string | null; readonly allows: (value: number) => boolean; readonly clause: string; readonly says: string }

const between = (low: number, high: number) => (n: number): boolean => Number.isInteger(n) && n >= low && n <= high;
const oneOf = (values: readonly number[]) => (n: number): boolean => values.some((v) => Math.abs(v - n) < 1e-9 * Math.max(1, v));

/** Parameters with a fixed set of values. k_SSB above 23 (11 in FR2) is allowed: it says that no SIB1 belongs to the block. */
const RANGES: readonly Range[] = [
  { parameter: 'physicalCellId', technology: 'nr', allows: between(0, 1007), clause: 'TS 38.211, clause 7.4.2.1', says: 'identities go from 0 to 1007' },
  { parameter: 'physicalCellId', technology: 'lte', allows: between(0, 503), clause: 'TS 36.211, clause 6.11', says: 'identities go from 0 to 503' },
  { parameter: 'kSsb', technology: 'nr', allows: between(0, 31), clause: 'TS 38.211, clause 7.4.3.1', says: 'k_SSB has five bits' },
  { parameter: 'offsetToPointA', technology: 'nr', allows: between(0, 2199), clause: 'TS 38.211, clause 4.4.4.2', says: 'the offset goes from 0 to 2199 blocks' },
  { parameter: 'offsetToCarrier', technology: 'nr', allows: between(0, 2199), clause: 'TS 38.331, SCS-SpecificCarrier', says: 'the offset goes from 0 to 2199 blocks' },
  { parameter: 'nTaOffset', technology: 'nr', allows: oneOf([0, 13792, 25600, 39936]), clause: 'TS 38.133, table 7.1.2-2', says: 'the offset is 0, 13792, 25600 or 39936 T_c' },
  { parameter: 'ssbPeriodicity', technology: 'nr', allows: oneOf([0.005, 0.01, 0.02, 0.04, 0.08, 0.16]), clause: 'TS 38.331, ServingCellConfigCommon', says: 'the period is 5, 10, 20, 40, 80 or 160 ms' },
  { parameter: 'numerology', technology: 'nr', allows: between(0, 6), clause: 'TS 38.211, table 4.2-1', says: 'numerologies go from 0 to 6' },
  { parameter: 'iqBitWidth', technology: null, allows: between(1, 16), clause: 'ETSI TS 103 859, clause 8.3.3', says: 'widths go from 1 to 16 bits' },
  { parameter: 'frameStructure', technology: null, allows: between(0, 255), clause: 'ETSI TS 103 859, clause 7.5.2', says: 'the field has eight bits' },
];

export function ranges(view: View): NotPermitted[] {
  return RANGES.flatMap(({ parameter, technology, allows, clause, says }) => {
    const value = view.number(parameter);
    if (value === null || (technology !== null && view.technology !== technology) || allows(value)) return [];
    return [{ parameter: view.named(parameter), clause, note: `${says}; the file states ${value}` }];
  });
}
