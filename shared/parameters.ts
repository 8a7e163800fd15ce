import type { HintCode } from './vocabulary.js';

/**
 * The common parameters: what two snapshots are compared by. The names are the contract's; the
 * tie sheet, the comparison and the glossaries use no others.
 */

/**
 * `signal`: describes the signal between the two, so both sides must state the same.
 * `local-choice`: a unit's own business; at odds only where what it implies differs.
 * `one-unit-only`: on a split radio exactly one unit does it; on an air link it describes the signal.
 */
export type ParameterKind = 'signal' | 'local-choice' | 'one-unit-only';

/** `frequency` Hz, `rate` samples per second, `time` s, the rest as their `unit` says. */
export type ParameterType =
  | 'frequency' | 'rate' | 'time' | 'delay' | 'tc' | 'ts' | 'count' | 'boolean' | 'token' | 'band' | 'list' | 'text';

export interface ParameterFacts {
  /** The trade's wording, for the tie sheet. */
  readonly label: string;
  readonly type: ParameterType;
  /** Unit of the value; null for plain numbers and words. */
  readonly unit: 'Hz' | 'sps' | 's' | 'ns' | 'T_c' | 'T_s' | 'blocks' | 'bit' | null;
  readonly clause: string | null;
  /** The hint to which a difference belongs. */
  readonly hint: HintCode;
  readonly kind: ParameterKind;
  /** Stated apart for the uplink, under the name `uplink` + the parameter's. */
  readonly directional: boolean;
}

type Row = [label: string, type: ParameterType, unit: ParameterFacts['unit'], hint: HintCode, clause: string | null, flags?: string];

/** Flags: `d` directional, `l` local choice, `o` one unit only. */
const facts = ([label, type, unit, hint, clause, flags = '']: Row): ParameterFacts => ({
  label, type, unit, hint, clause,
  kind: flags.includes('l') ? 'local-choice' : flags.includes('o') ? 'one-unit-only' : 'signal',
  directional: flags.includes('d'),
});

const DELAY_CLAUSE = 'ETSI TS 103 859, delay management';
const CARRIER_CLAUSE = 'TS 38.104, clause 5.4.2';
const TDD_CLAUSE = 'TS 38.213, clause 11.1';

const ROWS = {
  technology: ['Radio technology', 'token', null, 'technology', null],
  subcarrierSpacing: ['Subcarrier spacing', 'frequency', 'Hz', 'subcarrier-spacing', 'TS 38.211, table 4.2-1', 'd'],
  numerology: ['Numerology', 'count', null, 'subcarrier-spacing', 'TS 38.211, table 4.2-1', 'd'],
  cyclicPrefix: ['Cyclic prefix', 'token', null, 'cyclic-prefix', 'TS 38.211, table 4.2-1', 'd'],
  guardInterval: ['Guard interval', 'time', 's', 'cyclic-prefix', 'TS 38.211, clause 5.3.1', 'd'],
  fftSize: ['Transform size', 'count', null, 'fft-size', 'TS 38.211, clause 5.3.1', 'l'],
  sampleRate: ['Sample rate', 'rate', 'sps', 'sample-rate', 'TS 38.211, clause 5.3.1', 'l'],
  carrierFrequency: ['Carrier frequency', 'frequency', 'Hz', 'carrier-frequency', CARRIER_CLAUSE, 'd'],
  nrArfcn: ['NR channel number', 'count', null, 'carrier-frequency', 'TS 38.104, table 5.4.2.1-1', 'd'],
  earfcn: ['LTE channel number', 'count', null, 'carrier-frequency', 'TS 36.104, clause 5.7.3', 'd'],
  wifiChannel: ['Wi-Fi channel', 'count', null, 'carrier-frequency', 'IEEE 802.11, annex E', 'd'],
  pointAArfcn: ['Point A', 'count', null, 'carrier-frequency', 'TS 38.211, clause 4.4.4.2', 'd'],
  offsetToCarrier: ['Offset to carrier', 'count', 'blocks', 'carrier-frequency', 'TS 38.331, SCS-SpecificCarrier', 'd'],
  resourceBlocks: ['Resource blocks', 'count', 'blocks', 'channel-bandwidth', 'TS 38.104, clause 5.3.2', 'd'],
  channelBandwidth: ['Channel bandwidth', 'frequency', 'Hz', 'channel-bandwidth', 'TS 38.104, clause 5.3.5', 'd'],
  initialBwpLocation: ['Initial bandwidth part', 'count', null, 'configuration', 'TS 38.213, clause 12', 'd'],
  band: ['Operating band', 'band', null, 'configuration', 'TS 38.104, clause 5.2', 'd'],
  duplexMode: ['Duplex mode', 'token', null, 'configuration', 'TS 38.104, clause 5.2'],
  tddReferenceSpacing: ['Spacing of the TDD pattern', 'frequency', 'Hz', 'tdd-pattern', TDD_CLAUSE],
  tddPeriodicity: ['TDD period', 'time', 's', 'tdd-pattern', TDD_CLAUSE],
  tddDownlinkSlots: ['TDD downlink slots', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddDownlinkSymbols: ['TDD downlink symbols', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddUplinkSlots: ['TDD uplink slots', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddUplinkSymbols: ['TDD uplink symbols', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddSecondPeriodicity: ['Second TDD period', 'time', 's', 'tdd-pattern', TDD_CLAUSE],
  tddSecondDownlinkSlots: ['Second pattern, downlink slots', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddSecondDownlinkSymbols: ['Second pattern, downlink symbols', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddSecondUplinkSlots: ['Second pattern, uplink slots', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddSecondUplinkSymbols: ['Second pattern, uplink symbols', 'count', null, 'tdd-pattern', TDD_CLAUSE],
  tddSubframeAssignment: ['LTE uplink-downlink configuration', 'count', null, 'tdd-pattern', 'TS 36.211, table 4.2-2'],
  tddSpecialSubframe: ['LTE special subframe', 'count', null, 'tdd-pattern', 'TS 36.211, table 4.2-1'],
  physicalCellId: ['Physical cell identity', 'count', null, 'physical-cell-id', 'TS 38.211, clause 7.4.2.1'],
  ssbSubcarrierSpacing: ['Spacing of the synchronisation block', 'frequency', 'Hz', 'ssb-subcarrier-spacing', 'TS 38.211, clause 7.4.3.1'],
  ssbArfcn: ['Synchronisation block, channel number', 'count', null, 'ssb-placement', 'TS 38.104, clause 5.4.3'],
  ssbFrequency: ['Synchronisation block, frequency', 'frequency', 'Hz', 'ssb-placement', 'TS 38.104, clause 5.4.3'],
  gscn: ['Synchronisation channel (GSCN)', 'count', null, 'ssb-placement', 'TS 38.104, table 5.4.3.1-1'],
  kSsb: ['Subcarrier offset of the block (k_SSB)', 'count', null, 'ssb-placement', 'TS 38.211, clause 7.4.3.1'],
  offsetToPointA: ['Offset to point A', 'count', 'blocks', 'ssb-placement', 'TS 38.211, clause 4.4.4.2'],
  ssbPeriodicity: ['Period of the synchronisation block', 'time', 's', 'configuration', 'TS 38.331, ServingCellConfigCommon'],
  subCarrierSpacingCommon: ['Common spacing announced', 'token', null, 'configuration', 'TS 38.331, MIB'],
  phaseCompensation: ['Per-symbol phase compensation', 'boolean', null, 'phase-compensation', 'TS 38.211, clause 5.4', 'o'],
  spectrumSense: ['Spectrum sense', 'token', null, 'spectrum-inversion', null],
  halfSubcarrierShift: ['7.5 kHz shift', 'boolean', null, 'half-subcarrier-shift', 'TS 38.104, clause 5.4.2.1', 'o'],
  nTaOffset: ['Timing-advance offset', 'tc', 'T_c', 'timing-offset', 'TS 38.133, table 7.1.2-2'],
  dmrsTypeAPosition: ['First DM-RS symbol', 'token', null, 'configuration', 'TS 38.211, clause 7.4.1.1.2'],
  referenceClock: ['Reference clock', 'text', null, 'configuration', null],
  compressionMethod: ['I/Q compression', 'token', null, 'iq-compression', 'ETSI TS 103 859, clause 8.3.3', 'd'],
  iqBitWidth: ['I/Q bit width', 'count', 'bit', 'iq-bit-width', 'ETSI TS 103 859, clause 8.3.3', 'd'],
  frameStructure: ['Frame structure', 'count', null, 'frame-structure', 'ETSI TS 103 859, clause 7.5.2', 'd'],
  cpLength: ['Fronthaul cyclic-prefix length', 'ts', 'T_s', 'fronthaul-cp-length', 'ETSI TS 103 859, clause 7.5.2', 'd'],
  cpLengthOther: ['Fronthaul prefix of the other symbols', 'ts', 'T_s', 'fronthaul-cp-length', 'ETSI TS 103 859, clause 7.5.2', 'd'],
  centreOffset: ['Offset to the absolute centre', 'count', null, 'prb-allocation', 'ETSI TS 103 859, clause 7.5.3', 'd'],
  eaxcIds: ['Antenna-carrier identifiers', 'list', null, 'eaxc-mapping', 'ETSI TS 103 859, clause 5.1.3', 'd'],
} as const satisfies Record<string, Row>;

/** Delay windows by their management names, ns. */
export const DELAY_NAMES = [
  't1a-max-up', 't1a-min-up', 't1a-max-cp-dl', 't1a-min-cp-dl', 't1a-max-cp-ul', 't1a-min-cp-ul',
  't2a-max-up', 't2a-min-up', 't2a-max-cp-dl', 't2a-min-cp-dl', 't2a-max-cp-ul', 't2a-min-cp-ul',
  'tcp-adv-dl', 'ta3-min', 'ta3-max', 'ta4-min', 'ta4-max', 't12-min', 't12-max', 't34-min', 't34-max', 'tx-max', 'rx-max',
] as const;

type BaseName = keyof typeof ROWS | (typeof DELAY_NAMES)[number];
export type ParameterName = BaseName | `uplink${Capitalize<BaseName>}`;

const delayFacts = (name: string): ParameterFacts =>
  facts([`Delay ${name}`, 'delay', 'ns', 'timing-window', DELAY_CLAUSE]);

const BASE: ReadonlyMap<string, ParameterFacts> = new Map([
  ...Object.entries(ROWS).map(([name, row]): [string, ParameterFacts] => [name, facts(row as Row)]),
  ...DELAY_NAMES.map((name): [string, ParameterFacts] => [name, delayFacts(name)]),
]);

const capital = (text: string): string => text[0].toUpperCase() + text.slice(1);

/** The uplink's name of a directional parameter: `subcarrierSpacing` to `uplinkSubcarrierSpacing`. */
export const uplinkName = (name: ParameterName): ParameterName => `uplink${capital(name)}` as ParameterName;

const UPLINK: ReadonlyMap<string, ParameterFacts> = new Map(
  [...BASE].filter(([, f]) => f.directional).map(([name, f]): [string, ParameterFacts] => [
    uplinkName(name as ParameterName), { ...f, label: `Uplink: ${f.label[0].toLowerCase()}${f.label.slice(1)}` },
  ]),
);

/** Every parameter in the tie sheet's order, the uplink's after the rest. */
export const PARAMETERS: ReadonlyMap<string, ParameterFacts> = new Map([...BASE, ...UPLINK]);
export const PARAMETER_NAMES = [...PARAMETERS.keys()] as ParameterName[];

/** Facts of a parameter; null for a name that is not common. */
export const parameterFacts = (name: string): ParameterFacts | null => PARAMETERS.get(name) ?? null;

/** On a fronthaul link the carrier's blocks are those that the two units exchange. */
export const hintCodeFor = (name: ParameterName, link: 'air' | 'fronthaul'): HintCode =>
  link === 'fronthaul' && name.toLowerCase().endsWith('resourceblocks')
    ? 'prb-allocation'
    : PARAMETERS.get(name)?.hint ?? 'configuration';
