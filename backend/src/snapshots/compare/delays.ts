import type { ComparisonRow } from '#shared/decode';
import type { ParameterName } from '#shared/parameters';
import type { Pair } from './families.js';
import { declaredOf, row } from './row.js';
import type { View } from './view.js';

/**
 * A sender's window [max, min] and the receiver's window before air time: T1a within T2a plus the
 * transport T12. T12 is seldom stated, so only what no transport can mend is at odds: a sender's
 * window wider than the receiver's, or one that ends after it.
 */
const DOWNLINK = ['up', 'cp-dl', 'cp-ul'] as const;

export function windowRows(pair: Pair): ComparisonRow[] {
  return [...[[pair.a, pair.b, false], [pair.b, pair.a, true]] as const].flatMap(([du, ru, swapped]) =>
    [...DOWNLINK.flatMap((plane) => downlinkWindow(du, ru, { plane, swapped })), ...uplinkWindow(du, ru, swapped)]);
}

interface Plane { readonly plane: (typeof DOWNLINK)[number]; readonly swapped: boolean }

function downlinkWindow(du: View, ru: View, { plane, swapped }: Plane): ComparisonRow[] {
  const name = (end: string, edge: string): ParameterName => `${end}-${edge}-${plane}` as ParameterName;
  const [t1aMax, t1aMin] = [du.number(name('t1a', 'max')), du.number(name('t1a', 'min'))];
  const [t2aMax, t2aMin] = [ru.number(name('t2a', 'max')), ru.number(name('t2a', 'min'))];
  const [t12Min, t12Max] = transport(du, ru, 't12');
  if (t1aMin !== null && t2aMin !== null && t1aMin < t2aMin + t12Max) {
    return [at(name('t1a', 'min'), name('t2a', 'min'), { du, ru, swapped, note: `what leaves ${t1aMin} ns before air time${t12Max > 0 ? `, less ${t12Max} ns of transport,` : ''} comes after the receive window ends (${t2aMin} ns)` })];
  }
  if (t1aMax !== null && t2aMax !== null && t12Min !== null && t1aMax > t2aMax + t12Min) {
    return [at(name('t1a', 'max'), name('t2a', 'max'), { du, ru, swapped, note: `what leaves ${t1aMax} ns before air time, less ${t12Min} ns of transport, comes before the receive window opens (${t2aMax} ns)` })];
  }
  const known = t1aMax !== null && t1aMin !== null && t2aMax !== null && t2aMin !== null;
  if (!known || t1aMax - t1aMin <= t2aMax - t2aMin) return [];
  return [at(name('t1a', 'max'), name('t2a', 'max'), { du, ru, swapped, note: `the transmit window (${t1aMax - t1aMin} ns) is wider than the receive window (${t2aMax - t2aMin} ns): no transport delay mends that` })];
}

function uplinkWindow(du: View, ru: View, swapped: boolean): ComparisonRow[] {
  const [ta3Min, ta3Max] = [ru.number('ta3-min'), ru.number('ta3-max')];
  const [ta4Min, ta4Max] = [du.number('ta4-min'), du.number('ta4-max')];
  const [, t34Max] = transport(du, ru, 't34');
  if (ta3Max !== null && ta4Max !== null && ta4Max < ta3Max + t34Max) {
    return [at('ta4-max', 'ta3-max', { du, ru, swapped, note: `what the radio unit sends ${ta3Max} ns after air time comes after the receive window ends (${ta4Max} ns)` })];
  }
  const known = ta3Min !== null && ta3Max !== null && ta4Min !== null && ta4Max !== null;
  if (!known || ta3Max - ta3Min <= ta4Max - ta4Min) return [];
  return [at('ta4-max', 'ta3-max', { du, ru, swapped, note: `the transmit window (${ta3Max - ta3Min} ns) is wider than the receive window (${ta4Max - ta4Min} ns): no transport delay mends that` })];
}

/** Stated transport delays: the least (null where open) and the most (0 where open, the kindest case). */
function transport(du: View, ru: View, which: 't12' | 't34'): [number | null, number] {
  const value = (edge: string): number | null => du.number(`${which}-${edge}` as ParameterName) ?? ru.number(`${which}-${edge}` as ParameterName);
  return [value('min'), value('max') ?? value('min') ?? 0];
}

interface Window { readonly du: View; readonly ru: View; readonly swapped: boolean; readonly note: string }

function at(sent: ParameterName, received: ParameterName, { du, ru, swapped, note }: Window): ComparisonRow {
  const [x, y] = [declaredOf(du.get(sent)), declaredOf(ru.get(received))];
  return row({ parameter: sent, a: swapped ? y : x, b: swapped ? x : y, verdict: 'differ', note: `${sent} against ${received}: ${note}` });
}
