import type { ComparisonRow, SettingValue } from '#shared/decode';
import { DELAY_NAMES, type ParameterName } from '#shared/parameters';
import type { CompareOptions, FoundValue } from '../types.js';
import type { Pair } from './families.js';
import { equalValues, pairRow } from './row.js';
import type { View } from './view.js';

/** Parameters that one word says, compared as they stand. */
const PLAIN: readonly ParameterName[] = [
  'technology', 'band', 'duplexMode', 'initialBwpLocation', 'physicalCellId', 'ssbSubcarrierSpacing', 'offsetToPointA', 'ssbPeriodicity',
  'subCarrierSpacingCommon', 'spectrumSense', 'nTaOffset', 'dmrsTypeAPosition', 'referenceClock', 'compressionMethod', 'frameStructure', 'centreOffset',
];

const rowOf = (pair: Pair, name: ParameterName, same?: (x: SettingValue, y: SettingValue) => boolean): ComparisonRow[] => {
  const values: [FoundValue | null, FoundValue | null] = [pair.a.get(name), pair.b.get(name)];
  return values[0] === null && values[1] === null ? [] : [pairRow(pair.a.named(name), values, same)];
};

export function plainRows(pair: Pair): ComparisonRow[] {
  return PLAIN.flatMap((name) => rowOf(pair, name, name === 'band' ? bandsMeet : undefined));
}

/** A cell may be announced in several overlapping bands. */
function bandsMeet(x: SettingValue, y: SettingValue): boolean {
  const [a, b] = [x, y].map((v) => (Array.isArray(v) ? v : [v]));
  return a.some((v) => b.includes(v));
}

/** Without compression the width says only that samples are whole: 16 bits and no statement are the same. */
export const bitWidthRows = (pair: Pair): ComparisonRow[] => rowOf(pair, 'iqBitWidth');

/** k_SSB, of which some fields state the low four bits only: those are compared modulo 16. */
export function kSsbRows(pair: Pair, air: number | null): ComparisonRow[] {
  const [a, b] = [pair.a.get('kSsb'), pair.b.get('kSsb')];
  if (a === null && b === null) return [];
  const same = (x: SettingValue, y: SettingValue): boolean =>
    a?.lowBitsOnly === true || b?.lowBitsOnly === true ? Number(x) % 16 === Number(y) % 16 : equalValues(x, y);
  const compared = pairRow('kSsb', [a, b], same);
  const complete = (side: FoundValue | null, others: readonly (number | null)[]): SettingValue | undefined =>
    side?.lowBitsOnly === true ? others.find((o): o is number => o !== null && o % 16 === Number(side.value) % 16) : undefined;
  const [ka, kb] = [complete(a, [number(b), air]), complete(b, [number(a), air])];
  const low = [a, b].some((v) => v?.lowBitsOnly === true);
  return [{
    ...compared,
    a: compared.a === null || ka === undefined ? compared.a : { ...compared.a, value: ka },
    b: compared.b === null || kb === undefined ? compared.b : { ...compared.b, value: kb },
    note: low ? 'ssb-SubcarrierOffset states the low four bits; compared modulo 16' : compared.note,
  }];
}

const number = (found: FoundValue | null): number | null => (typeof found?.value === 'number' && found.lowBitsOnly !== true ? found.value : null);

/** Prefix lengths in the management model's number: the same prefix counted in other units is named as that. */
export function cpLengthRows(pair: Pair): ComparisonRow[] {
  return (['cpLength', 'cpLengthOther'] as const).flatMap((name) => rowOf(pair, name)).map((r) => {
    if (r.verdict !== 'differ' || typeof r.a?.value !== 'number' || typeof r.b?.value !== 'number') return r;
    const ratio = Math.max(r.a.value, r.b.value) / Math.min(r.a.value, r.b.value);
    if (![2, 4, 8, 16].includes(ratio)) return r;
    return { ...r, note: `the two numbers differ by exactly ${ratio}: the same prefix counted in other units (T_s, T_s·2^-µ or samples), not another prefix` };
  });
}

/**
 * On a split radio exactly one unit must do it: nobody and both are at odds. On an air link the
 * statement describes the signal, and the two must be equal.
 */
export function oneUnitRows(pair: Pair, link: CompareOptions['link']): ComparisonRow[] {
  return (['phaseCompensation', 'halfSubcarrierShift'] as const).flatMap((name) => rowOf(pair, name)).map((r) => {
    if (link === 'air' || r.a === null || r.b === null) return r;
    const doing = [r.a.value, r.b.value].filter((v) => v === true).length;
    if (doing === 1) return { ...r, verdict: 'agree' as const, note: 'exactly one of the two units does it' };
    if (doing === 2) return { ...r, verdict: 'differ' as const, note: 'both units do it; exactly one must' };
    return isDue(r.parameter, pair) ? { ...r, verdict: 'differ' as const, note: 'neither unit does it; exactly one must' } : r;
  });
}

/** Phase compensation is always somebody's; the 7.5 kHz shift is LTE's uplink's, and elsewhere an option. */
const isDue = (parameter: string, { a, b }: Pair): boolean => parameter === 'phaseCompensation' || [a, b].some((v: View) => v.technology === 'lte');

/** Identifiers on the downlink, or of both directions together, whichever the two share. */
export function eaxcRows(pair: Pair, whole: Pair): ComparisonRow[] {
  return rowOf(pair, 'eaxcIds').map((r) => {
    if (r.verdict !== 'differ') return r;
    const all = (view: View, other: View): string => JSON.stringify([...new Set([...ids(view), ...ids(other)])].sort((x, y) => x - y));
    const together = all(pair.a, whole.a) === all(pair.b, whole.b);
    return together ? { ...r, verdict: 'agree' as const, note: 'the same identifiers, taken over both directions' } : r;
  });
}

const ids = (view: View): number[] => {
  const value = view.get('eaxcIds')?.value;
  return Array.isArray(value) ? value.map(Number) : [];
};

export const delayRows = (pair: Pair): ComparisonRow[] => DELAY_NAMES.flatMap((name) => rowOf(pair, name));
