import { TS_S } from '../vocabulary/units.js';

/** TS 38.211 table 4.2-1: spacing 15 kHz · 2^µ. Null where the spacing is no numerology of NR. */
export function numerologyOf(spacingHz: number): number | null {
  const mu = Math.log2(spacingHz / 15e3);
  return Number.isInteger(mu) && mu >= 0 && mu <= 6 ? mu : null;
}

export const spacingOfNumerology = (mu: number): number => 15e3 * 2 ** mu;

export type CellularPrefix = 'normal' | 'extended';

/**
 * Prefix of the ordinary symbols, s: TS 38.211 clause 5.3.1 (144 and 512 T_s times 2^-µ), the
 * same numbers in TS 36.211 table 6.12-1 for 15 kHz.
 */
export const cellularPrefixS = (prefix: CellularPrefix, spacingHz: number): number =>
  (prefix === 'normal' ? 144 : 512) * TS_S * (15e3 / spacingHz);

/** The longer prefix that starts each half subframe, s: 16 T_s more, whatever the spacing. */
export const longPrefixS = (spacingHz: number): number => cellularPrefixS('normal', spacingHz) + 16 * TS_S;

/** Durations are written rounded ("4.7 us"); the prefixes of one spacing lie far further apart. */
const ROUNDING = 0.02;
export const sameDuration = (a: number, b: number): boolean => Math.abs(a - b) <= ROUNDING * Math.max(Math.abs(a), Math.abs(b));

/** The cellular prefix that a guard interval is, or null for one that no table has. */
export function cellularPrefixOf(guardS: number, spacingHz: number): CellularPrefix | null {
  if (sameDuration(guardS, cellularPrefixS('normal', spacingHz)) || sameDuration(guardS, longPrefixS(spacingHz))) return 'normal';
  return sameDuration(guardS, cellularPrefixS('extended', spacingHz)) ? 'extended' : null;
}
