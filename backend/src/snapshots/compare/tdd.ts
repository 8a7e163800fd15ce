import type { ComparisonRow } from '#shared/decode';
import type { ParameterName } from '#shared/parameters';
import type { FoundValue } from '../types.js';
import { spacingHz } from './derive.js';
import type { Pair } from './families.js';
import { pairRow } from './row.js';
import type { View } from './view.js';

/** One pattern counted in slots of a reference spacing (TS 38.213 clause 11.1). */
export interface TddPattern {
  readonly periodS: number | null;
  readonly downlinkSlots: number | null;
  readonly downlinkSymbols: number | null;
  readonly uplinkSlots: number | null;
  readonly uplinkSymbols: number | null;
}

const FIELDS = ['DownlinkSlots', 'DownlinkSymbols', 'UplinkSlots', 'UplinkSymbols'] as const;
type Order = '' | 'Second';
const nameOf = (order: Order, field: (typeof FIELDS)[number] | 'Periodicity'): ParameterName => `tdd${order}${field}` as ParameterName;

/** Spacing in whose slots a side counts: stated, or the carrier's. */
export const referenceSpacing = (view: View): number | null => view.number('tddReferenceSpacing') ?? spacingHz(view);

export function patternOf(view: View, order: Order = ''): TddPattern | null {
  const periodS = view.number(nameOf(order, 'Periodicity'));
  const [downlinkSlots, downlinkSymbols, uplinkSlots, uplinkSymbols] = FIELDS.map((f) => view.number(nameOf(order, f)));
  const nothing = [periodS, downlinkSlots, downlinkSymbols, uplinkSlots, uplinkSymbols].every((v) => v === null);
  return nothing ? null : { periodS, downlinkSlots, downlinkSymbols, uplinkSlots, uplinkSymbols };
}

/**
 * Slots of one spacing counted in slots of a finer one: one slot is `ratio` finer slots, and the
 * partial slot's symbols may fill whole finer slots.
 */
export function counted(pattern: TddPattern, ratio: number): TddPattern {
  const split = (slots: number | null, symbols: number | null): [number | null, number | null] => {
    if (slots === null || symbols === null) return [slots === null ? null : slots * ratio, symbols === null ? null : symbols * ratio];
    const all = (slots * 14 + symbols) * ratio;
    return [Math.floor(all / 14), all % 14];
  };
  const [downlinkSlots, downlinkSymbols] = split(pattern.downlinkSlots, pattern.downlinkSymbols);
  const [uplinkSlots, uplinkSymbols] = split(pattern.uplinkSlots, pattern.uplinkSymbols);
  return { periodS: pattern.periodS, downlinkSlots, downlinkSymbols, uplinkSlots, uplinkSymbols };
}

/** Patterns counted in different slots are compared in the finer ones. */
export function tddRows(pair: Pair): ComparisonRow[] {
  const [refA, refB] = [referenceSpacing(pair.a), referenceSpacing(pair.b)];
  const finer = Math.max(refA ?? 0, refB ?? 0);
  const ratio = (ref: number | null): number => (bothStated(pair) && ref !== null && ref > 0 && Number.isInteger(finer / ref) ? finer / ref : 1);
  const sides = { a: { view: pair.a, ratio: ratio(refA) }, b: { view: pair.b, ratio: ratio(refB) } };
  return [...patternRows(sides, ''), ...(sameTwice(pair) ? [] : patternRows(sides, 'Second')), ...plainRows(pair)];
}

/** Two different spacings that the sides state for themselves are a finding of their own; only stated references convert. */
const bothStated = ({ a, b }: Pair): boolean => a.has('tddReferenceSpacing') || b.has('tddReferenceSpacing');

interface CountedSide { readonly view: View; readonly ratio: number }

function patternRows(sides: { a: CountedSide; b: CountedSide }, order: Order): ComparisonRow[] {
  const period = rowIfStated(nameOf(order, 'Periodicity'), [sides.a.view.get(nameOf(order, 'Periodicity')), sides.b.view.get(nameOf(order, 'Periodicity'))]);
  const fields = FIELDS.flatMap((field) => rowIfStated(nameOf(order, field), [converted(sides.a, order, field), converted(sides.b, order, field)]));
  return [...period, ...fields];
}

function rowIfStated(parameter: ParameterName, values: [FoundValue | null, FoundValue | null]): ComparisonRow[] {
  return values[0] === null && values[1] === null ? [] : [pairRow(parameter, values)];
}

function converted({ view, ratio }: CountedSide, order: Order, field: (typeof FIELDS)[number]): FoundValue | null {
  const found = view.get(nameOf(order, field));
  const pattern = patternOf(view, order);
  if (found === null || pattern === null || ratio === 1) return found;
  const key = (field[0].toLowerCase() + field.slice(1)) as Exclude<keyof TddPattern, 'periodS'>;
  const value = counted(pattern, ratio)[key];
  return value === null ? found : { ...found, value, note: `counted in slots of the finer spacing (1 slot is ${ratio})` };
}

/** A second pattern that repeats the first says nothing new. */
function sameTwice({ a, b }: Pair): boolean {
  const repeats = (view: View): boolean => {
    const second = patternOf(view, 'Second');
    return second === null || JSON.stringify(second) === JSON.stringify(patternOf(view));
  };
  return repeats(a) && repeats(b);
}

function plainRows(pair: Pair): ComparisonRow[] {
  return (['tddSubframeAssignment', 'tddSpecialSubframe'] as const).flatMap((n) => rowIfStated(n, [pair.a.get(n), pair.b.get(n)]));
}
