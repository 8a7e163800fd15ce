import type { SettingValue } from '#shared/decode';
import type { Measurement } from '../model.js';
import { SCATTER } from '../priors.js';
import type { Evidence } from '../types.js';
import { channelBandwidth, resourceBlocks } from './bandwidth.js';
import { carrierFrequency, ssbFrequency } from './carrier.js';
import { categorical, certainty, normal } from './likelihoods.js';
import { airNumber } from './numbers.js';

type Measure = (evidence: Evidence) => Measurement | null;

/** One word out of a few. */
const word = (name: string, choices: number): Measure => (evidence) => {
  const air = evidence.air[name];
  return air && air.value !== null && air.value !== undefined ? categorical(air, choices) : null;
};

/** A setting that the unit itself broadcasts; its checksum stands behind it. */
const announced = (name: string, choices: number): Measure => (evidence) => {
  const value = evidence.announced[name];
  return value === undefined || value === null ? null : categorical({ value, confidence: 0.999, method: 'announced in the broadcast' }, choices);
};

const spacing: Measure = (evidence) => {
  const seen = airNumber(evidence, 'subcarrierSpacingHz');
  return seen && normal({ value: seen.value, method: seen.air.method ?? null, sigma: SCATTER.subcarrierSpacing * seen.value, range: 4 * seen.value, confidence: certainty(seen.air) });
};

const numerology: Measure = (evidence) => {
  const seen = airNumber(evidence, 'subcarrierSpacingHz');
  return seen && categorical({ ...seen.air, value: Math.round(Math.log2(seen.value / 15000)) }, 7);
};

const guardInterval: Measure = (evidence) => {
  const seen = airNumber(evidence, 'cyclicPrefixS');
  return seen && normal({ value: seen.value, method: seen.air.method ?? null, sigma: SCATTER.guardInterval * seen.value, range: 8 * seen.value, confidence: certainty(seen.air) });
};

/** Uplink on the air where the decode says so: then, and only then, the shift is seen. */
const boolean = (name: string, truth: (value: SettingValue) => boolean): Measure => (evidence) => {
  const air = evidence.air[name];
  return air && air.value !== null && air.value !== undefined ? categorical({ ...air, value: truth(air.value) }, 2) : null;
};

/** Technology `ofdm` leaves open which; it only speaks against those with a known preamble. */
const technology: Measure = (evidence) => {
  const air = evidence.air['technology'];
  if (!air || typeof air.value !== 'string') return null;
  const plain = categorical(air, 4);
  if (air.value !== 'ofdm') return plain;
  return { ...plain, noneOfLogLikelihood: () => Math.log(0.05), logLikelihood: (setting) => (setting === 'ofdm' ? Math.log(0.9) : setting === 'wifi' ? Math.log(0.02) : Math.log(0.2)) };
};

/** What the air says of a parameter, by its common name; a name without an entry is not seen on the air. */
const MEASURES: Readonly<Record<string, Measure>> = {
  technology,
  subcarrierSpacing: spacing,
  numerology,
  cyclicPrefix: (evidence) => word('cyclicPrefix', evidence.air['technology']?.value === 'wifi' ? 4 : 2)(evidence),
  guardInterval,
  carrierFrequency,
  resourceBlocks,
  channelBandwidth,
  physicalCellId: word('physicalCellId', 1008),
  duplexMode: word('duplexMode', 2),
  ssbSubcarrierSpacing: word('ssbSubcarrierSpacingHz', 5),
  ssbFrequency,
  kSsb: word('kSsb', 24),
  spectrumSense: (evidence) => {
    const air = evidence.air['spectrumInverted'];
    return air && typeof air.value === 'boolean' ? categorical({ ...air, value: air.value ? 'inverted' : 'upright' }, 2) : null;
  },
  phaseCompensation: boolean('phaseCompensation', (value) => value === 'present'),
  halfSubcarrierShift: boolean('halfSubcarrierShift', (value) => value === true),
  dmrsTypeAPosition: announced('dmrsTypeAPosition', 2),
  subCarrierSpacingCommon: announced('subCarrierSpacingCommon', 2),
};

export function measure(parameter: string, evidence: Evidence): Measurement | null {
  const name = inDirection(parameter, evidence);
  return name === null ? null : MEASURES[name]?.(evidence) ?? null;
}

/** A capture holds one direction: an uplink's own settings are seen in an uplink capture alone. */
function inDirection(parameter: string, evidence: Evidence): string | null {
  if (!parameter.startsWith('uplink')) return parameter;
  return evidence.air['direction']?.value === 'uplink' ? parameter[6]!.toLowerCase() + parameter.slice(7) : null;
}
