import { sameDuration } from './numerology.js';

export const WIFI_PREFIXES = ['short', 'normal', 'double', 'quadruple'] as const;
export type WifiPrefix = (typeof WIFI_PREFIXES)[number];

/**
 * Guard intervals by spacing, s (IEEE 802.11 OFDM PHYs at 20 MHz clocking and its halves; HE and
 * EHT at 78.125 kHz). The words: 0.8 us is normal; at half and quarter clock it grows with the symbol.
 */
const GUARDS: readonly { readonly spacingHz: number; readonly guards: Partial<Record<WifiPrefix, number>> }[] = [
  { spacingHz: 312_500, guards: { short: 0.4e-6, normal: 0.8e-6 } },
  { spacingHz: 156_250, guards: { short: 0.8e-6, normal: 1.6e-6 } },
  // A quarter-clocked legacy carrier and HE share this spacing: both meanings of "normal" stand.
  { spacingHz: 78_125, guards: { normal: 0.8e-6, double: 1.6e-6, quadruple: 3.2e-6 } },
];

/** The word for a guard interval; without a known spacing, of the 20 MHz clock. */
export function wifiPrefixOf(guardS: number, spacingHz: number | null): WifiPrefix | null {
  const table = guardsAt(spacingHz) ?? { short: 0.4e-6, normal: 0.8e-6, double: 1.6e-6, quadruple: 3.2e-6 };
  return WIFI_PREFIXES.find((p) => table[p] !== undefined && sameDuration(table[p], guardS)) ?? null;
}

/** Seconds of a guard interval's word at a spacing, null where the standard has none. */
export function wifiPrefixS(prefix: string, spacingHz: number | null): number | null {
  const table = guardsAt(spacingHz) ?? { short: 0.4e-6, normal: 0.8e-6, double: 1.6e-6, quadruple: 3.2e-6 };
  return table[prefix as WifiPrefix] ?? null;
}

export const isWifiSpacing = (spacingHz: number): boolean => guardsAt(spacingHz) !== null;

function guardsAt(spacingHz: number | null): Partial<Record<WifiPrefix, number>> | null {
  return spacingHz === null ? null : GUARDS.find((g) => Math.abs(g.spacingHz - spacingHz) < 1)?.guards ?? null;
}

/**
 * Centre of a 20 MHz channel number, or of a wider channel's number, Hz: IEEE 802.11 annex E,
 * start plus 5 MHz a number. Numbers up to 14 are in the 2.4 GHz band unless `band` says 6 GHz.
 */
export function wifiChannelHz(channel: number, band: string | number | null): number | null {
  const text = String(band ?? '').toLowerCase().replace(/ghz|\s/g, '');
  if (text.startsWith('6')) return channel === 2 ? 5935e6 : inRange(channel, 1, 233) ? 5950e6 + 5e6 * channel : null;
  if (channel === 14) return 2484e6;
  if (inRange(channel, 1, 13) && !text.startsWith('5')) return 2407e6 + 5e6 * channel;
  return inRange(channel, 32, 177) ? 5000e6 + 5e6 * channel : null;
}

const inRange = (n: number, low: number, high: number): boolean => Number.isInteger(n) && n >= low && n <= high;
