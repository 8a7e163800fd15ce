import { parameterFacts, type ParameterName } from '#shared/parameters';
import type { ComparisonRow, Declared, SettingValue } from '#shared/decode';
import type { FoundValue } from '../types.js';
import type { Statement } from './derive.js';

export type Verdict = ComparisonRow['verdict'];

export interface RowParts {
  readonly parameter: ParameterName;
  readonly a: Declared | null;
  readonly b: Declared | null;
  readonly verdict: Verdict;
  readonly note?: string | null;
}

export const declaredOf = (found: FoundValue | null, value?: SettingValue): Declared | null =>
  found === null ? null : { value: value ?? found.value, path: found.path, raw: found.raw, line: found.line };

export const declaredFrom = (statement: Statement<number | string> | null): Declared | null =>
  statement === null ? null : declaredOf(statement.from, statement.value);

export function row({ parameter, a, b, verdict, note }: RowParts): ComparisonRow {
  return { parameter, a, b, announced: null, air: null, verdict, clause: parameterFacts(parameter)?.clause ?? null, note: note ?? null };
}

/** How each side said it, where one of them used other words. */
export function wordsNote(a: Statement<number | string> | null, b: Statement<number | string> | null): string | null {
  const parts = ([['A', a], ['B', b]] as const).flatMap(([side, s]) => (s?.how === undefined ? [] : [`side ${side}: ${s.how}`]));
  const implied = ([['A', a], ['B', b]] as const).flatMap(([side, s]) => (s?.from.implied === true && s.from.note !== undefined ? [`side ${side}: ${s.from.note}`] : []));
  return [...parts, ...implied].join('; ') || null;
}

/** A row of two values of one parameter, equal by `same`. */
export function pairRow(parameter: ParameterName, [a, b]: readonly [FoundValue | null, FoundValue | null], same: (x: SettingValue, y: SettingValue) => boolean = equalValues): ComparisonRow {
  const verdict: Verdict = a === null || b === null ? 'one-sided' : same(a.value, b.value) ? 'agree' : 'differ';
  const notes = ([['A', a], ['B', b]] as const).flatMap(([side, v]) => (v?.note === undefined ? [] : [`side ${side}: ${v.note}`]));
  return row({ parameter, a: declaredOf(a), b: declaredOf(b), verdict, note: notes.join('; ') || null });
}

/** Equal up to the rounding of decimal text. */
export function equalValues(x: SettingValue, y: SettingValue): boolean {
  if (typeof x === 'number' && typeof y === 'number') return Math.abs(x - y) <= 1e-9 * Math.max(Math.abs(x), Math.abs(y));
  return JSON.stringify(x) === JSON.stringify(y);
}
