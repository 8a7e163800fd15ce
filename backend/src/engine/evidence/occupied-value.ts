import type { AirValue } from '#shared/decode';
import type { TechnologyFinding } from '../types.js';
import type { Look } from './look.js';

/** The 99 % bandwidth, unless what was decoded is wider than what stands out: a signal that fills its capture leaves no floor to stand out of. */
export function occupiedBandwidth({ spectrum, choice }: Look): AirValue {
  const value = spectrum.occupiedBandwidthHz;
  if (value === null) return { value: null, reason: 'nothing stands out of a flat floor' };
  if (choice.finding && value < leastWidthHz(choice.finding)) return { value: null, reason: 'the signal fills the capture: less stands out than was decoded' };
  return { value, confidence: 0.9, method: '99 % of the power above the floor' };
}

/** Subcarriers of the synchronisation signals: 127 in NR (TS 38.211 clause 7.4.2), 62 in LTE (TS 36.211 clause 6.11). */
const NR_SYNC = 127;
const LTE_SYNC_HZ = 62 * 15e3;
/** Least part of a Wi-Fi channel that its subcarriers fill: 52 of 64 in the legacy frame. */
const WIFI_SHARE = 0.75;

/** Width of what was decoded, Hz; 0 where that is not known. */
function leastWidthHz({ technology, air }: TechnologyFinding): number {
  const known = (name: string): number => {
    const value = air[name]?.value;
    return typeof value === 'number' ? value : 0;
  };
  if (technology === 'nr') return NR_SYNC * known('ssbSubcarrierSpacingHz');
  return technology === 'lte' ? (air['direction']?.value === 'uplink' ? 0 : LTE_SYNC_HZ) : WIFI_SHARE * known('channelBandwidthHz');
}
