import type { AirValue, ComparisonRow, SettingValue } from '#shared/decode';
import { numerologyOf } from '../standards/numerology.js';
import { hzToGscn, hzToNrArfcnFraction } from '../standards/nrRaster.js';
import type { CompareOptions } from '../types.js';

type Air = Readonly<Record<string, AirValue>>;
const value = (air: Air, name: string): SettingValue => air[name]?.value ?? null;
const number = (air: Air, name: string): number | null => {
  const found = value(air, name);
  return typeof found === 'number' ? found : null;
};

/** What the signal shows, under the common parameters' names and in their units; null where nothing was determined. */
const MEASURED: Readonly<Record<string, (air: Air, options: CompareOptions) => SettingValue>> = {
  technology: (air) => value(air, 'technology'),
  subcarrierSpacing: (air) => value(air, 'subcarrierSpacingHz'),
  numerology: (air) => numerologyNear(number(air, 'subcarrierSpacingHz')),
  cyclicPrefix: (air) => value(air, 'cyclicPrefix'),
  guardInterval: (air) => value(air, 'cyclicPrefixS'),
  carrierFrequency: carrierHz,
  nrArfcn: (air, options) => nearestArfcn(carrierHz(air, options)),
  resourceBlocks: (air) => value(air, 'resourceBlocks'),
  channelBandwidth: (air) => value(air, 'channelBandwidthHz'),
  physicalCellId: (air) => value(air, 'physicalCellId'),
  ssbSubcarrierSpacing: (air) => value(air, 'ssbSubcarrierSpacingHz'),
  ssbFrequency: (air) => value(air, 'ssbFrequencyHz'),
  ssbArfcn: (air) => nearestArfcn(number(air, 'ssbFrequencyHz')),
  gscn: (air) => nearestGscn(number(air, 'ssbFrequencyHz')),
  kSsb: (air) => value(air, 'kSsb'),
  spectrumSense: (air) => word(value(air, 'spectrumInverted'), true, 'inverted', 'upright'),
  phaseCompensation: (air) => word(value(air, 'phaseCompensation'), 'present', true, false),
  halfSubcarrierShift: (air) => value(air, 'halfSubcarrierShift'),
  tddPeriodicity: (air) => tdd(air, 'periodS'),
  tddDownlinkSlots: (air) => tdd(air, 'downlinkSlots'),
  tddDownlinkSymbols: (air) => tdd(air, 'downlinkSymbols'),
  tddUplinkSlots: (air) => tdd(air, 'uplinkSlots'),
  tddUplinkSymbols: (air) => tdd(air, 'uplinkSymbols'),
  compressionMethod: (air) => value(air, 'compressionMethod'),
  iqBitWidth: (air) => value(air, 'iqBitWidth'),
  frameStructure: (air) => value(air, 'frameStructure'),
  cpLength: (air) => value(air, 'cpLengthTs'),
  eaxcIds: (air) => value(air, 'eaxcIds'),
};

/** The rows with the columns of what is announced and what is measured filled in. */
export function withAir(rows: readonly ComparisonRow[], options: CompareOptions): ComparisonRow[] {
  const air = options.air ?? {};
  return rows.map((row) => {
    const base = measuredName(row.parameter, options.direction ?? 'downlink');
    return base === null ? row : { ...row, announced: announcedFor(base, options), air: MEASURED[base]?.(air, options) ?? null };
  });
}

/** A capture holds one direction: rows of the other stay empty. */
function measuredName(parameter: string, direction: 'downlink' | 'uplink'): string | null {
  const isUplink = parameter.startsWith('uplink');
  if (isUplink && direction === 'downlink') return null;
  return isUplink ? parameter[6].toLowerCase() + parameter.slice(7) : parameter;
}

function announcedFor(parameter: string, { announced, air }: CompareOptions): SettingValue {
  const direct = announced?.[parameter];
  if (direct !== undefined && direct !== null) return direct;
  const mib = air?.['mib']?.value;
  if (mib === null || typeof mib !== 'object' || Array.isArray(mib)) return null;
  if (parameter === 'dmrsTypeAPosition' && typeof mib['dmrsTypeAPosition'] === 'string') return mib['dmrsTypeAPosition'];
  const blocks = /^n(\d+)$/.exec(String(mib['dlBandwidth'] ?? ''));
  return parameter === 'resourceBlocks' && blocks !== null ? Number(blocks[1]) : null;
}

/** The capture's stated centre plus the measured offset, where the grid was placed. */
function carrierHz(air: Air, { centreFrequencyHz }: CompareOptions): number | null {
  const offset = number(air, 'carrierOffsetHz');
  const placed = air['carrierOffsetHz']?.method?.startsWith('fractional') !== true;
  return offset === null || !placed || centreFrequencyHz === null || centreFrequencyHz === undefined ? null : centreFrequencyHz + offset;
}

function numerologyNear(hz: number | null): number | null {
  return hz === null ? null : numerologyOf(15e3 * 2 ** Math.round(Math.log2(hz / 15e3)));
}

function nearestArfcn(hz: SettingValue): number | null {
  const found = typeof hz === 'number' ? hzToNrArfcnFraction(hz) : null;
  return found === null ? null : Math.round(found);
}

/** A block is received a little off its place: the synchronisation raster is far coarser. */
function nearestGscn(hz: number | null): number | null {
  const arfcn = nearestArfcn(hz);
  if (hz === null || arfcn === null) return null;
  const step = hz < 3000e6 ? 50e3 : hz < 24_250.08e6 ? 1.44e6 : 17.28e6;
  const start = hz < 3000e6 ? 0 : hz < 24_250.08e6 ? 3000e6 : 24_250.08e6;
  const nearest = start + step * Math.round((hz - start) / step);
  return Math.abs(nearest - hz) < 20e3 ? hzToGscn(nearest) : null;
}

const word = (found: SettingValue, yes: SettingValue, ifYes: SettingValue, ifNo: SettingValue): SettingValue =>
  found === null ? null : found === yes ? ifYes : ifNo;

function tdd(air: Air, field: string): SettingValue {
  const pattern = value(air, 'tddPattern');
  if (pattern === null || typeof pattern !== 'object' || Array.isArray(pattern)) return null;
  const found = pattern[field];
  return typeof found === 'number' ? found : null;
}
