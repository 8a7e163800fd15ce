import type { ComparisonRow, DecodeResult, Demodulation, Hint } from '#shared/decode';
import type { HintSide, Side } from '#shared/vocabulary';
import type { Basis, Finding, View } from './types.js';
import { ONE_SIDED_PLACE } from './look-next.js';
import { visible, writeHint } from './wording/writeHint.js';

/**
 * A stored result as a reader may see it. `full`: everything; `compare-only`: values that both
 * sides declare, without key path or text, and "declared by side B" for the rest; `none`: as if
 * that side had given no snapshot. The result of the decode itself is not changed.
 */
export function redactResult(result: DecodeResult, view: View): DecodeResult {
  if (view.a === 'full' && view.b === 'full') return result;
  return {
    ...result,
    inputs: result.inputs.filter((input) => mayName(input, view)),
    comparison: result.comparison.flatMap((row) => redactRow(row, view) ?? []),
    hints: result.hints.flatMap((hint) => redactHint(hint, view) ?? []),
    lookNext: result.lookNext.filter(({ place }) => place !== ONE_SIDED_PLACE && !place.includes('running configuration')),
    plots: result.plots ? { ...result.plots, demodulations: result.plots.demodulations.filter((d) => mayShow(d, result, view)) } : result.plots,
  };
}

function hidden(view: View): boolean {
  return view.a === 'none' || view.b === 'none';
}

/** A side's own files are named only to those who may see them; what no side owns is for all. */
function mayName(input: DecodeResult['inputs'][number], view: View): boolean {
  const of = (input as { of?: string }).of;
  return of !== 'a' && of !== 'b' ? of === 'capture' : view[of] === 'full';
}

function redactRow(row: ComparisonRow, view: View): ComparisonRow | null {
  const sides = (['a', 'b'] as const).filter((side) => row[side] !== null && view[side] !== 'none');
  if (sides.length === 0) return null;
  const both = row.a !== null && row.b !== null;
  const cell = (side: Side): ComparisonRow['a'] => {
    const value = row[side];
    if (value === null || view[side] === 'full') return value;
    if (view[side] === 'none') return null;
    const redacted = { value: both ? value.value : null, path: null, raw: null, line: null };
    return both ? redacted : { ...redacted, declaredBy: side } as ComparisonRow['a'];
  };
  const alone = both && hidden(view);
  const partly = (['a', 'b'] as const).some((side) => row[side] !== null && view[side] !== 'full');
  return { ...row, a: cell('a'), b: cell('b'), verdict: alone ? aloneVerdict(row) : row.verdict, note: partly ? null : row.note ?? null };
}

/** What is off standard may be the hidden side's doing: seen alone, the row only stands there. */
function aloneVerdict(row: ComparisonRow): ComparisonRow['verdict'] {
  return row.verdict === 'agree' || row.verdict === 'differ' || row.verdict === 'not-permitted' ? 'one-sided' : row.verdict;
}

function redactHint(hint: Hint, view: View): Hint | null {
  const basis = hint['basis'] as Basis | undefined;
  if (!basis) return null;
  const kept = hidden(view) ? withoutHidden(basis, hint.side, view) : { basis, side: hint.side };
  if (!kept) return null;
  const finding: Finding = { code: hint.code, side: kept.side, probability: hint.confidence, basis: visible(kept.basis, view), consequences: hint.consequences ?? [] };
  return writeHint(finding, view);
}

/** A finding that rests on a side whose snapshot the reader may not know of is kept only where it stands without it. */
function withoutHidden(basis: Basis, side: HintSide, view: View): { basis: Basis; side: HintSide } | null {
  const seen = basis.declaredBy.filter((s) => view[s] !== 'none');
  if (seen.length === basis.declaredBy.length) return { basis, side };
  const own = seen[0];
  const onAir = basis.air !== null;
  if (!own || !onAir || (side !== own && side !== 'both')) return null;
  return { side: own, basis: { ...basis, pattern: 'one-contradicted', declaredBy: [own], declared: { [own]: basis.declared[own] }, sideFacts: { [own]: basis.sideFacts[own] } } };
}

/** Demodulation under a side's settings shows its spacing and prefix. */
function mayShow(demodulation: Demodulation, result: DecodeResult, view: View): boolean {
  const side = demodulation.under;
  if (side === 'air' || view[side] === 'full') return true;
  return view[side] === 'compare-only' && bothDeclare(result, 'subcarrierSpacing') && (demodulation.settings.cyclicPrefix === null || bothDeclare(result, 'cyclicPrefix'));
}

function bothDeclare(result: DecodeResult, parameter: string): boolean {
  return result.comparison.some((row) => row.parameter === parameter && row.a !== null && row.b !== null);
}
