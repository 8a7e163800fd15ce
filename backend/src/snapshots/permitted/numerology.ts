import { parameterFacts, type ParameterName } from '#shared/parameters';
import type { NotPermitted } from '../types.js';
import { spacingHz } from '../compare/derive.js';
import type { View } from '../compare/view.js';
import { numerologyOf, sameDuration } from '../standards/numerology.js';
import { frequencyRange } from '../standards/nrRaster.js';
import { isWifiSpacing, wifiPrefixS } from '../standards/wifi.js';
import { someFrequencyHz } from './frequency.js';

const kHz = (hz: number): string => `${Number((hz / 1e3).toFixed(4))} kHz`;

/** TS 38.211 table 4.2-1: the extended prefix exists at 60 kHz only. */
export function extendedPrefix(view: View): NotPermitted[] {
  const spacing = statedSpacing(view);
  const word = view.text('cyclicPrefix');
  if (view.technology !== 'nr' || spacing === null || word === null) return [];
  if (word === 'extended' && Math.abs(spacing - 60e3) > 1) {
    return [{ parameter: view.named('cyclicPrefix'), clause: 'TS 38.211, table 4.2-1', note: `the extended prefix exists at 60 kHz only, not at ${kHz(spacing)}`, together: [spacingName(view)] }];
  }
  if (word === 'normal' || word === 'extended') return [];
  return [{ parameter: view.named('cyclicPrefix'), clause: 'TS 38.211, table 4.2-1', note: `NR has the normal and the extended prefix, not "${word}"` }];
}

/** The row under which a side's spacing stands. */
const spacingName = (view: View): ParameterName => view.named('subcarrierSpacing');

/** Only a spacing that the file states, in whatever words: a rate over a size proves nothing here. */
function statedSpacing(view: View): number | null {
  return view.has('subcarrierSpacing') || view.has('numerology') ? spacingHz(view) : null;
}

const RANGES: Readonly<Record<string, readonly number[]>> = { FR1: [15e3, 30e3, 60e3], 'FR2-1': [60e3, 120e3], 'FR2-2': [120e3, 480e3, 960e3] };

/** Bands below 1 GHz and their neighbours whose channel table (TS 38.104 table 5.3.5-1) has no row for 60 kHz. */
const WITHOUT_60_KHZ = new Set([5, 8, 12, 20, 28, 71]);

/** Spacing of the carrier's data against its frequency range and band (60 kHz is allowed in FR1). */
export function dataSpacing(view: View): NotPermitted[] {
  const spacing = statedSpacing(view);
  if (view.technology !== 'nr' || spacing === null) return [];
  const parameter = view.named(view.has('subcarrierSpacing') ? 'subcarrierSpacing' : 'numerology');
  const clause = 'TS 38.104, table 5.3.5-1';
  const here = { parameter, clause, yieldsToDifference: true, together: [view.named('band'), view.named('carrierFrequency')] };
  if (numerologyOf(spacing) === null) return [{ parameter, clause: 'TS 38.211, table 4.2-1', note: `NR has no spacing of ${kHz(spacing)}` }];
  if (spacing === 240e3) return [{ ...here, note: '240 kHz is a spacing of the synchronisation block only' }];
  const hz = someFrequencyHz(view);
  const range = hz === null ? null : frequencyRange(hz);
  if (range !== null && !RANGES[range].includes(spacing)) return [{ ...here, note: `${kHz(spacing)} is not a spacing for data in ${range}` }];
  const band = view.number('band');
  if (band !== null && spacing === 60e3 && WITHOUT_60_KHZ.has(band)) return [{ ...here, note: `band n${band} has no channel of 60 kHz` }];
  return [];
}

const LTE_SPACINGS = [15e3, 7.5e3, 2.5e3, 1.25e3];

/** TS 36.211 clause 6.12: 15 kHz, and less for broadcast. */
export function lteSpacing(view: View): NotPermitted[] {
  const spacing = statedSpacing(view);
  if (view.technology !== 'lte' || spacing === null || LTE_SPACINGS.includes(spacing) || Math.abs(spacing - 370.37) < 1) return [];
  return [{ parameter: view.named(view.has('subcarrierSpacing') ? 'subcarrierSpacing' : 'numerology'), clause: 'TS 36.211, clause 6.12', note: `LTE has no spacing of ${kHz(spacing)}` }];
}

/** LTE has two prefixes (TS 36.211 table 6.12-1). */
export function ltePrefix(view: View): NotPermitted[] {
  const word = view.text('cyclicPrefix');
  if (view.technology !== 'lte' || word === null || word === 'normal' || word === 'extended') return [];
  return [{ parameter: view.named('cyclicPrefix'), clause: 'TS 36.211, table 6.12-1', note: `LTE has the normal and the extended prefix, not "${word}"` }];
}

/** Guard intervals of the Wi-Fi OFDM PHYs, s: all of them, and those at a known spacing. */
const WIFI_GUARDS = [0.4e-6, 0.8e-6, 1.6e-6, 3.2e-6];

export function wifiGuard(view: View): NotPermitted[] {
  if (view.technology !== 'wifi') return [];
  const guard = view.number('guardInterval');
  const clause = 'IEEE 802.11, guard interval of the PHY';
  if (guard !== null && !WIFI_GUARDS.some((g) => sameDuration(g, guard))) {
    return [{ parameter: 'guardInterval', clause, note: `no Wi-Fi PHY has a guard interval of ${Number((guard * 1e6).toFixed(3))} us` }];
  }
  const spacing = statedSpacing(view);
  const word = view.text('cyclicPrefix');
  if (word === 'extended') return [{ parameter: 'cyclicPrefix', clause, note: 'Wi-Fi has no extended prefix' }];
  if (guard === null || spacing === null || !isWifiSpacing(spacing)) return [];
  const known = ['short', 'normal', 'double', 'quadruple'].some((w) => sameDuration(wifiPrefixS(w, spacing) ?? -1, guard));
  return known ? [] : [{ parameter: 'guardInterval', clause, note: `at ${kHz(spacing)} no Wi-Fi PHY has a guard interval of ${Number((guard * 1e6).toFixed(3))} us`, together: [spacingName(view)] }];
}

const SSB_SPACINGS = { FR1: [15e3, 30e3], 'FR2-1': [120e3, 240e3], 'FR2-2': [120e3, 480e3, 960e3] } as const satisfies Record<string, readonly number[]>;
const THIRTY_ONLY = [40, 46, 48, 77, 78, 79, 96, 102, 104];

/** Spacing of the synchronisation block by frequency range, and 15 kHz in bands that have blocks of 30 kHz only. */
export function ssbSpacing(view: View): NotPermitted[] {
  const spacing = view.number('ssbSubcarrierSpacing');
  if (spacing === null || view.technology !== 'nr') return [];
  const clause = 'TS 38.104, table 5.4.3.3-1';
  const hz = someFrequencyHz(view);
  const range = hz === null ? null : frequencyRange(hz);
  const allowed: readonly number[] = range === null ? [15e3, 30e3, 120e3, 240e3, 480e3, 960e3] : SSB_SPACINGS[range];
  if (!allowed.includes(spacing)) return [{ parameter: 'ssbSubcarrierSpacing', clause: parameterFacts('ssbSubcarrierSpacing')?.clause ?? clause, note: `${kHz(spacing)} is not a spacing of the synchronisation block${range === null ? '' : ` in ${range}`}`, yieldsToDifference: true }];
  const band = view.number('band');
  if (band !== null && spacing === 15e3 && THIRTY_ONLY.includes(band)) return [{ parameter: 'ssbSubcarrierSpacing', clause, note: `band n${band} has blocks of 30 kHz only`, yieldsToDifference: true, together: ['band'] }];
  return [];
}
