import type { ParameterName } from '#shared/parameters';
import type { ComparisonRow } from '#shared/decode';
import { sameDuration } from '../standards/numerology.js';
import type { FoundValue } from '../types.js';
import {
  bandwidthOfBlocksStated, blocksOfBandwidth, carrierStatements, guardS, prefixOfGuard, prefixWordS, spacingStatements, ssbStatements, type Statement,
} from './derive.js';
import { declaredFrom, pairRow, row, wordsNote } from './row.js';
import type { View } from './view.js';

/** Both sides in one direction. */
export interface Pair { readonly a: View; readonly b: View }

const values = ({ a, b }: Pair, name: ParameterName): [FoundValue | null, FoundValue | null] => [a.get(name), b.get(name)];
const both = ({ a, b }: Pair, name: ParameterName): boolean => a.has(name) && b.has(name);

interface Family {
  readonly names: readonly ParameterName[];
  /** Name under which values in different words are set against each other. */
  readonly common: ParameterName;
  readonly statements: (view: View) => readonly Statement[];
  readonly same: (x: number, y: number) => boolean;
}

/** Half of the narrowest raster step is 2.5 kHz; frequencies in MHz are written to the kHz. */
const sameFrequency = (x: number, y: number): boolean => Math.abs(x - y) <= 500;

/**
 * Parameters that say one quantity in different words: one row for the quantity, whatever words
 * each side uses, and one for every other name that both sides use.
 */
function familyRows(pair: Pair, { names, common, statements, same }: Family): ComparisonRow[] {
  const [a, b] = [statements(pair.a), statements(pair.b)];
  const shared = names.filter((n) => n !== common && both(pair, n)).map((n) => sharedRow(pair, n, { statements, same }));
  const quantity = quantityRow(pair.a.named(common), { a, b, same });
  const unread = names.filter((n) => !both(pair, n) && isUnread(pair, n, [...a, ...b]));
  return [...(quantity === null ? [] : [quantity]), ...shared, ...oneSided(pair, unread)];
}

interface Sides { readonly a: readonly Statement[]; readonly b: readonly Statement[]; readonly same: (x: number, y: number) => boolean }

function quantityRow(parameter: ParameterName, { a, b, same }: Sides): ComparisonRow | null {
  const [x, y] = [a[0] ?? null, b[0] ?? null];
  const spoken = [x, y].some((s) => s !== null && !isGuess(s));
  if (!spoken) return null;
  if (x === null || y === null) {
    const only = x ?? y;
    return only === null || isGuess(only) ? null : row({ parameter, a: declaredFrom(x), b: declaredFrom(y), verdict: 'one-sided', note: wordsNote(x, y) });
  }
  const verdict = same(x.value, y.value) ? 'agree' : 'differ';
  const twice = verdict === 'differ' && a.some((s) => b.some((t) => !isGuess(s) && !isGuess(t) && same(s.value, t.value)));
  return row({ parameter, a: declaredFrom(x), b: declaredFrom(y), verdict, note: twice ? 'one side states this twice, and its two statements differ' : wordsNote(x, y) });
}

/** Values that neither file states outright: alone they are nothing to set against each other. */
const isGuess = (s: Statement): boolean => s.name === 'technology' || s.name === 'fftSize';

/** Stated, but outside every table: it can only be shown as it stands. */
const isUnread = ({ a, b }: Pair, name: ParameterName, statements: readonly Statement[]): boolean =>
  (a.has(name) || b.has(name)) && !statements.some((s) => s.name === name);

function sharedRow(pair: Pair, name: ParameterName, { statements, same }: Pick<Family, 'statements' | 'same'>): ComparisonRow {
  const of = (view: View): number | null => statements(view).find((s) => s.name === name)?.value ?? null;
  const [x, y] = [of(pair.a), of(pair.b)];
  // Compared as the quantity where it is one; numbers outside every table are compared as they stand.
  const compared = pairRow(pair.a.named(name), values(pair, name));
  return x === null || y === null ? compared : { ...compared, verdict: same(x, y) ? 'agree' : 'differ' };
}

export function oneSided(pair: Pair, names: readonly ParameterName[]): ComparisonRow[] {
  return names.filter((n) => pair.a.has(n) || pair.b.has(n)).map((n) => pairRow(pair.a.named(n), values(pair, n)));
}

export const spacingRows = (pair: Pair): ComparisonRow[] => familyRows(pair, {
  names: ['subcarrierSpacing', 'numerology'], common: 'subcarrierSpacing', statements: spacingStatements,
  same: (x, y) => Math.abs(x - y) <= 1e-3 * Math.max(x, y),
});

/** Point A and the offset to it are set against each other as well where both sides state them: the grid hangs on them. */
export function carrierRows(pair: Pair): ComparisonRow[] {
  const rows = familyRows(pair, {
    names: ['carrierFrequency', 'nrArfcn', 'earfcn', 'wifiChannel'], common: 'carrierFrequency', statements: carrierStatements, same: sameFrequency,
  });
  const used = [pair.a, pair.b].some((v) => carrierStatements(v).some((s) => s.name === 'pointAArfcn'));
  const grid: readonly ParameterName[] = ['pointAArfcn', 'offsetToCarrier'];
  return [...rows, ...oneSided(pair, grid.filter((n) => both(pair, n) || !used))];
}

export const ssbRows = (pair: Pair): ComparisonRow[] =>
  familyRows(pair, { names: ['ssbFrequency', 'ssbArfcn', 'gscn'], common: 'ssbFrequency', statements: ssbStatements, same: sameFrequency });

/** Prefixes by word, guard intervals by duration, and a word against a duration by what it means at the spacing. */
export function prefixRows(pair: Pair): ComparisonRow[] {
  const names: readonly ParameterName[] = ['cyclicPrefix', 'guardInterval'];
  const rows = names.filter((n) => both(pair, n)).map((n) => (n === 'cyclicPrefix' ? pairRow(pair.a.named(n), values(pair, n)) : guardRow(pair)));
  if (rows.length > 0) return rows;
  return wordRow(pair) ?? durationRow(pair) ?? oneSided(pair, names);
}

function guardRow(pair: Pair): ComparisonRow {
  const [x, y] = [guardS(pair.a), guardS(pair.b)];
  const plain = pairRow(pair.a.named('guardInterval'), values(pair, 'guardInterval'));
  if (x === null || y === null) return plain;
  return { ...plain, a: declaredFrom(x), b: declaredFrom(y), verdict: sameDuration(x.value, y.value) ? 'agree' : 'differ', note: wordsNote(x, y) };
}

function wordRow(pair: Pair): ComparisonRow[] | null {
  const word = (view: View): Statement<string> | null => {
    const from = view.get('cyclicPrefix');
    return from === null ? prefixOfGuard(view) : { value: String(from.value), name: 'cyclicPrefix', from, derived: false };
  };
  const [x, y] = [word(pair.a), word(pair.b)];
  if (x === null || y === null) return null;
  return [row({ parameter: pair.a.named('cyclicPrefix'), a: declaredFrom(x), b: declaredFrom(y), verdict: x.value === y.value ? 'agree' : 'differ', note: wordsNote(x, y) })];
}

function durationRow(pair: Pair): ComparisonRow[] | null {
  const [x, y] = [guardS(pair.a) ?? prefixWordS(pair.a), guardS(pair.b) ?? prefixWordS(pair.b)];
  if (x === null || y === null) return null;
  return [row({ parameter: pair.a.named('guardInterval'), a: declaredFrom(x), b: declaredFrom(y), verdict: sameDuration(x.value, y.value) ? 'agree' : 'differ', note: wordsNote(x, y) })];
}

/**
 * Blocks and channel. Blocks set against a channel are at odds only where they do not fit it, or
 * fill another channel exactly: fewer blocks than a channel holds are legal.
 */
export function widthRows(pair: Pair): ComparisonRow[] {
  const names: readonly ParameterName[] = ['resourceBlocks', 'channelBandwidth'];
  const shared = names.filter((n) => both(pair, n)).map((n) => pairRow(pair.a.named(n), values(pair, n)));
  if (shared.length === 2) return shared;
  const crossed = crossedWidths(pair);
  if (shared.length === 1) {
    const other = names.filter((n) => !both(pair, n));
    // The file that lacks the channel says it through its blocks, where they fill one.
    const said = crossed !== null && crossed.parameter !== shared[0].parameter && crossed.verdict === 'agree' && shared[0].verdict === 'agree';
    return [...shared, ...(said ? [crossed] : oneSided(pair, other))];
  }
  return crossed === null ? oneSided(pair, names) : [crossed];
}

function crossedWidths(pair: Pair): ComparisonRow | null {
  const own = (view: View): Statement | null => {
    const from = view.get('channelBandwidth');
    return typeof from?.value === 'number' ? { value: from.value, name: 'channelBandwidth', from, derived: false } : null;
  };
  const [a, b] = [own(pair.a) ?? bandwidthOfBlocksStated(pair.a), own(pair.b) ?? bandwidthOfBlocksStated(pair.b)];
  if (a !== null && b !== null) {
    return row({ parameter: pair.a.named('channelBandwidth'), a: declaredFrom(a), b: declaredFrom(b), verdict: a.value === b.value ? 'agree' : 'differ', note: wordsNote(a, b) });
  }
  return blocksAgainstChannel(pair);
}

/** Blocks that fill no channel exactly, against the most that the other side's channel holds. */
function blocksAgainstChannel(pair: Pair): ComparisonRow | null {
  const [mostA, mostB] = [blocksOfBandwidth(pair.a), blocksOfBandwidth(pair.b)];
  const [blocksA, blocksB] = values(pair, 'resourceBlocks');
  const parameter = pair.a.named('resourceBlocks');
  const fits = (blocks: FoundValue, most: Statement): 'agree' | 'differ' => (Number(blocks.value) <= most.value ? 'agree' : 'differ');
  const note = 'fewer blocks than the channel holds are allowed';
  if (blocksA !== null && mostB !== null) {
    const verdict = fits(blocksA, mostB);
    return { ...pairRow(parameter, [blocksA, null]), b: declaredFrom(mostB), verdict, note: verdict === 'agree' ? note : mostB.how ?? null };
  }
  if (blocksB === null || mostA === null) return null;
  const verdict = fits(blocksB, mostA);
  return { ...pairRow(parameter, [null, blocksB]), a: declaredFrom(mostA), verdict, note: verdict === 'agree' ? note : mostA.how ?? null };
}
