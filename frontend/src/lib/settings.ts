import type { SettingValue } from '#shared/decode';
import { parameterFacts, type ParameterFacts } from '#shared/parameters';
import { duration, frequency, grouped, number, sampleRate } from './units.js';

/** Labels and values of settings as the trade writes them; the wire carries SI. */

const spaced = (name: string): string => {
  const words = name.replace(/([a-z\d])([A-Z])/g, '$1 $2').toLowerCase().replace(/\b(ssb|mib|sib1|pdcch|tdd|evm)\b/g, (w) => w.toUpperCase()).replace(/\bdmrs\b/, 'DM-RS');
  return words.charAt(0).toUpperCase() + words.slice(1);
};

/** What the air shows, in the order in which it is read; the unit stands at the end of each name. */
const AIR: Record<string, string> = {
  technology: 'Radio technology',
  frameFormat: 'Frame format',
  subcarrierSpacingHz: 'Subcarrier spacing',
  usefulSymbolS: 'Useful symbol',
  cyclicPrefix: 'Cyclic prefix',
  cyclicPrefixS: 'Cyclic prefix, length',
  carrierOffsetHz: 'Carrier offset',
  occupiedBandwidthHz: 'Occupied bandwidth (99 %)',
  channelBandwidthHz: 'Channel bandwidth',
  resourceBlocks: 'Resource blocks',
  snrDb: 'Signal-to-noise ratio',
  evmPercent: 'Error vector magnitude',
  evmRandomPercent: 'EVM that random points would give',
  physicalCellId: 'Physical cell identity',
  ssbSubcarrierSpacingHz: 'Spacing of the synchronisation block',
  ssbFrequencyHz: 'Synchronisation block, frequency',
  ssbOffsetHz: 'Synchronisation block, from the centre',
  kSsb: 'Subcarrier offset of the block (k_SSB)',
  systemFrameNumber: 'System frame number',
  mib: 'Master information block',
  tddPattern: 'Downlink/uplink pattern',
  spectrumInverted: 'Spectrum inverted',
  phaseCompensation: 'Per-symbol phase compensation',
  halfSubcarrierShift: '7.5 kHz shift',
  sampleClockOffsetPpm: 'Sample-clock offset',
  dcOffsetDb: 'DC to signal power',
  iqImbalanceDb: 'Image to signal power',
};
const AIR_ORDER = Object.keys(AIR);
const placeOf = (name: string): number => (AIR_ORDER.includes(name) ? AIR_ORDER.indexOf(name) : AIR_ORDER.length);
/** Names of the air record in reading order; what this list does not know stands last. */
export const inAirOrder = (names: readonly string[]): string[] => names.toSorted((x, y) => placeOf(x) - placeOf(y) || x.localeCompare(y));

const UNIT = /(Hz|Db|Percent|Ppm|S)$/;
const unitOf = (name: string): string | undefined => (name.length > 1 ? UNIT.exec(name)?.[1] : undefined);

export const parameterLabel = (name: string): string => parameterFacts(name)?.label ?? spaced(name);
export const airLabel = (name: string): string => AIR[name] ?? spaced(name.replace(UNIT, ''));

function quantity(value: number, { type, unit }: ParameterFacts): string {
  switch (type) {
    case 'frequency': return frequency(value);
    case 'rate': return sampleRate(value);
    case 'time': return duration(value);
    case 'delay': return `${grouped(value)} ns`;
    case 'tc': case 'ts': return `${number(value)} ${unit ?? ''}`.trim();
    default: return unit === 'bit' ? `${number(value)} bit` : number(value);
  }
}

/** Names that the wire carries in small letters. */
const TOKENS: Record<string, string> = { nr: 'NR', lte: 'LTE', wifi: 'Wi‑Fi', ofdm: 'OFDM', tdd: 'TDD', fdd: 'FDD' };

function pairs(value: Record<string, unknown>): string {
  return Object.entries(value).map(([key, v]) => `${spaced(key).toLowerCase()} ${plain(v as SettingValue)}`).join(', ');
}
function plain(value: SettingValue): string {
  if (value === null || value === undefined) return '—';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (typeof value === 'number') return number(value);
  if (Array.isArray(value)) return value.map(plain).join(', ');
  return typeof value === 'object' ? pairs(value) : TOKENS[value] ?? value;
}

/** A declared or measured value of a common parameter. */
export function settingText(name: string, value: SettingValue): string {
  const facts = parameterFacts(name);
  if (typeof value === 'boolean' && facts?.type === 'boolean') return value ? 'on' : 'off';
  return facts && typeof value === 'number' ? quantity(value, facts) : plain(value);
}

/** A value of the decode's `air` record, whose unit stands in its name. */
export function airText(name: string, value: SettingValue): string {
  if (typeof value !== 'number') return plain(value);
  switch (unitOf(name)) {
    case 'Hz': return frequency(value);
    case 'S': return duration(value);
    case 'Db': return `${number(value, 1)} dB`;
    case 'Percent': return `${number(value, 2)} %`;
    case 'Ppm': return `${number(value, 3)} ppm`;
    default: return number(value);
  }
}

/** Fields of a broadcast message under the names that the standards give them (TS 38.331 and TS 36.331, MIB), and what was derived from them. */
const PARTS: Record<string, string> = {
  subCarrierSpacingCommonHz: 'Common spacing', ssbSubcarrierOffset: 'ssb-SubcarrierOffset', dmrsTypeAPosition: 'dmrs-TypeA-Position',
  pdcchConfigSIB1: 'pdcch-ConfigSIB1', subCarrierSpacingCommon: 'subCarrierSpacingCommon', cellBarred: 'cellBarred', intraFreqReselection: 'intraFreqReselection',
  systemFrameNumber: 'systemFrameNumber', ssbIndex: 'Block index', dlBandwidth: 'dl-Bandwidth', phichDuration: 'phich-Duration', phichResource: 'phich-Resource',
};

/** The parts of a value that has several, each under its name. */
export const partsOf = (value: SettingValue): [string, string][] | null =>
  value !== null && typeof value === 'object' && !Array.isArray(value)
    ? Object.entries(value).map(([key, v]) => [PARTS[key] ?? spaced(key.replace(UNIT, '')), airText(key, v as SettingValue)])
    : null;

/** Whether two values say the same number or word, within what a measurement can tell. */
export function sameSetting(x: SettingValue, y: SettingValue): boolean {
  if (typeof x === 'number' && typeof y === 'number') return Math.abs(x - y) <= 1e-5 * Math.max(Math.abs(x), Math.abs(y));
  return JSON.stringify(x) === JSON.stringify(y);
}
