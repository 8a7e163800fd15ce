import type { SettingValue } from '#shared/decode';
import { parameterFacts, type ParameterFacts } from '#shared/parameters';
import { duration, frequency, grouped, number, sampleRate } from './units.js';

/** Labels and values of settings as the trade writes them; the wire carries SI. */

const spaced = (name: string): string => {
  const words = name.replace(/([a-z\d])([A-Z])/g, '$1 $2').toLowerCase();
  return words.charAt(0).toUpperCase() + words.slice(1);
};

/** What the air shows beside the common parameters: name to label and the unit in which it travels. */
const AIR: Record<string, readonly [label: string, unit: 'Hz' | 's' | 'dB' | '%' | 'ppm' | null]> = {
  technology: ['Radio technology', null],
  subcarrierSpacingHz: ['Subcarrier spacing', 'Hz'],
  usefulSymbolS: ['Useful symbol', 's'],
  cyclicPrefix: ['Cyclic prefix', null],
  cyclicPrefixS: ['Cyclic prefix, length', 's'],
  carrierOffsetHz: ['Carrier offset', 'Hz'],
  occupiedBandwidthHz: ['Occupied bandwidth (99 %)', 'Hz'],
  resourceBlocks: ['Resource blocks', null],
  snrDb: ['Signal-to-noise ratio', 'dB'],
  evmPercent: ['Error vector magnitude', '%'],
  evmRandomPercent: ['EVM that random points would give', '%'],
  physicalCellId: ['Physical cell identity', null],
  ssbSubcarrierSpacingHz: ['Spacing of the synchronisation block', 'Hz'],
  ssbFrequencyHz: ['Synchronisation block, frequency', 'Hz'],
  kSsb: ['Subcarrier offset of the block (k_SSB)', null],
  systemFrameNumber: ['System frame number', null],
  mib: ['Master information block', null],
  spectrumInverted: ['Spectrum inverted', null],
  phaseCompensation: ['Per-symbol phase compensation', null],
  halfSubcarrierShift: ['7.5 kHz shift', null],
  sampleClockOffsetPpm: ['Sample-clock offset', 'ppm'],
  tddPattern: ['Downlink/uplink pattern', null],
  dcOffsetDb: ['DC to signal power', 'dB'],
  iqImbalanceDb: ['Image to signal power', 'dB'],
};

export const parameterLabel = (name: string): string => parameterFacts(name)?.label ?? spaced(name);
export const airLabel = (name: string): string => AIR[name]?.[0] ?? spaced(name);

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
  const unit = AIR[name]?.[1];
  if (typeof value !== 'number' || !unit) return plain(value);
  if (unit === 'Hz') return frequency(value);
  if (unit === 's') return duration(value);
  return `${number(value, 2)} ${unit}`;
}

/** Whether two values say the same number or word, within what a measurement can tell. */
export function sameSetting(x: SettingValue, y: SettingValue): boolean {
  if (typeof x === 'number' && typeof y === 'number') return Math.abs(x - y) <= 1e-5 * Math.max(Math.abs(x), Math.abs(y));
  return JSON.stringify(x) === JSON.stringify(y);
}
