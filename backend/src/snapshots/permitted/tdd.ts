import type { ParameterName } from '#shared/parameters';
import type { NotPermitted } from '../types.js';
import { patternOf, referenceSpacing, type TddPattern } from '../compare/tdd.js';
import type { View } from '../compare/view.js';

const CLAUSE = 'TS 38.213, clause 11.1';
/** Periods with the finest slots that some of them need, ms. */
const PERIODS_MS = [0.5, 0.625, 1, 1.25, 2, 2.5, 3, 4, 5, 10];

const FIELDS = ['Periodicity', 'DownlinkSlots', 'DownlinkSymbols', 'UplinkSlots', 'UplinkSymbols'] as const;

/** Slots and symbols of a pattern must fit its period, and the period must hold whole slots. */
export function tddPattern(view: View): NotPermitted[] {
  const spacing = referenceSpacing(view);
  if (view.technology !== 'nr') return [];
  return (['', 'Second'] as const).flatMap((order) => {
    const pattern = patternOf(view, order);
    const found = pattern === null ? [] : fits(pattern, { order, spacing });
    // A pattern is one setting of many fields, counted in slots of the spacing.
    return found.map((f) => ({ ...f, yieldsToDifference: true, together: [...FIELDS.map((field): ParameterName => `tdd${order}${field}`), 'subcarrierSpacing' as const] }));
  });
}

function fits(pattern: TddPattern, { order, spacing }: { order: '' | 'Second'; spacing: number | null }): NotPermitted[] {
  const { periodS, downlinkSlots, downlinkSymbols, uplinkSlots, uplinkSymbols } = pattern;
  const partial = [['DownlinkSymbols', downlinkSymbols], ['UplinkSymbols', uplinkSymbols]] as const;
  const tooMany = partial.find(([, n]) => n !== null && n > 13);
  if (tooMany !== undefined) return [{ parameter: `tdd${order}${tooMany[0]}`, clause: CLAUSE, note: `a partial slot has at most 13 symbols of one direction, not ${tooMany[1]}` }];
  if (periodS === null) return [];
  if (!PERIODS_MS.some((p) => Math.abs(p - periodS * 1e3) < 1e-6)) return [{ parameter: `tdd${order}Periodicity`, clause: CLAUSE, note: `there is no period of ${Number((periodS * 1e3).toFixed(6))} ms` }];
  if (spacing === null) return [];
  const slots = (periodS * 1e3 * spacing) / 15e3;
  if (Math.abs(slots - Math.round(slots)) > 1e-6) return [{ parameter: `tdd${order}Periodicity`, clause: CLAUSE, note: `${periodS * 1e3} ms hold no whole number of slots at ${spacing / 1e3} kHz` }];
  const symbols = ((downlinkSlots ?? 0) + (uplinkSlots ?? 0)) * 14 + (downlinkSymbols ?? 0) + (uplinkSymbols ?? 0);
  if (symbols <= Math.round(slots) * 14) return [];
  return [{ parameter: downlinkSlots === null ? `tdd${order}UplinkSlots` : `tdd${order}DownlinkSlots`, clause: CLAUSE, note: `downlink and uplink take ${symbols} symbols, but the period has ${Math.round(slots) * 14}` }];
}
