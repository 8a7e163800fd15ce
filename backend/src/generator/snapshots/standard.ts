import { nrArfcn, nrArfcnHz } from '../nr/raster.js';
import type { Declared } from './declared.js';
import { XER_CHOICE, type ConfigTree } from './syntax.js';

/** Names of the parameters that the fields of TS 38.331 can say here. */
export const NR_STANDARD_NAMES: readonly (keyof Declared)[] = [
  'subcarrierSpacing', 'cyclicPrefix', 'carrierFrequency', 'resourceBlocks', 'band', 'tddPeriodicity', 'tddDownlinkSlots', 'tddDownlinkSymbols',
  'tddUplinkSlots', 'tddUplinkSymbols', 'physicalCellId', 'ssbSubcarrierSpacing', 'ssbArfcn', 'ssbPeriodicity', 'nTaOffset', 'dmrsTypeAPosition',
];

/** Enumerated values are words in JSON and YAML, and may be empty elements in XML (XER). */
type Word = (text: string) => ConfigTree;

/** A serving cell in the field names of TS 38.331. Needs spacing, carrier and blocks. */
export function nrStandardTree(declared: Declared, { xer, uplinkShiftHz }: { xer: boolean; uplinkShiftHz: number | null }): { readonly [key: string]: ConfigTree } {
  const word: Word = (text) => (xer ? { [text]: XER_CHOICE } : text);
  const list = (element: string, items: readonly ConfigTree[]): ConfigTree => (xer ? { [element]: items } : items);
  const pointA = nrArfcn(declared.carrierFrequency! - 6 * declared.resourceBlocks! * declared.subcarrierSpacing!);
  const carrier = { offsetToCarrier: declared.offsetToCarrier ?? 0, subcarrierSpacing: word(`kHz${declared.subcarrierSpacing! / 1000}`), carrierBandwidth: declared.resourceBlocks! };
  const bands: Record<string, ConfigTree> = declared.band === undefined ? {} : { frequencyBandList: list('FreqBandIndicatorNR', [declared.band]) };
  const frequencyInfo: Record<string, ConfigTree> = {
    ...bands,
    absoluteFrequencyPointA: pointA,
    'scs-SpecificCarrierList': list('SCS-SpecificCarrier', [carrier]),
  };
  const part = {
    locationAndBandwidth: wholeCarrier(declared.resourceBlocks!),
    subcarrierSpacing: word(`kHz${declared.subcarrierSpacing! / 1000}`),
    ...(declared.cyclicPrefix === 'extended' ? { cyclicPrefix: word('extended') } : {}),
  };
  return {
    ...(declared.physicalCellId === undefined ? {} : { physCellId: declared.physicalCellId }),
    downlinkConfigCommon: {
      frequencyInfoDL: { ...(declared.ssbArfcn === undefined ? {} : { absoluteFrequencySSB: declared.ssbArfcn }), ...frequencyInfo },
      initialDownlinkBWP: { genericParameters: part },
    },
    // An uplink that must not be held against the downlink.
    ...(uplinkShiftHz === null ? {} : { uplinkConfigCommon: { frequencyInfoUL: { ...frequencyInfo, absoluteFrequencyPointA: nrArfcn(nrArfcnHz(pointA) + uplinkShiftHz) } } }),
    ...(declared.ssbPeriodicity === undefined ? {} : { 'ssb-periodicityServingCell': word(`ms${Math.round(declared.ssbPeriodicity * 1000)}`) }),
    ...(declared.dmrsTypeAPosition === undefined ? {} : { 'dmrs-TypeA-Position': word(declared.dmrsTypeAPosition) }),
    ...(declared.ssbSubcarrierSpacing === undefined ? {} : { ssbSubcarrierSpacing: word(`kHz${declared.ssbSubcarrierSpacing / 1000}`) }),
    ...(declared.tddPeriodicity === undefined ? {} : { 'tdd-UL-DL-ConfigurationCommon': pattern(declared, word) }),
    ...(declared.nTaOffset === undefined ? {} : { 'n-TimingAdvanceOffset': word(`n${declared.nTaOffset}`) }),
    'ss-PBCH-BlockPower': -6,
  };
}

function pattern(declared: Declared, word: Word): ConfigTree {
  return {
    referenceSubcarrierSpacing: word(`kHz${declared.subcarrierSpacing! / 1000}`),
    pattern1: {
      'dl-UL-TransmissionPeriodicity': word(`ms${String(declared.tddPeriodicity! * 1000).replace('.', 'p')}`),
      nrofDownlinkSlots: declared.tddDownlinkSlots!,
      nrofDownlinkSymbols: declared.tddDownlinkSymbols!,
      nrofUplinkSlots: declared.tddUplinkSlots!,
      nrofUplinkSymbols: declared.tddUplinkSymbols!,
    },
  };
}

/** Resource indication value of all blocks (TS 38.214 clause 5.1.2.2.2 with 275 blocks). */
export function wholeCarrier(blocks: number): number {
  return blocks - 1 <= 137 ? 275 * (blocks - 1) : 275 * (275 - blocks + 1) + 274;
}

/** Names of the parameters that the fields of TS 36.331 can say here. */
export const LTE_STANDARD_NAMES: readonly (keyof Declared)[] = ['earfcn', 'resourceBlocks', 'physicalCellId', 'tddSubframeAssignment', 'tddSpecialSubframe'];

/** A cell in the field names of TS 36.331. */
export function lteStandardTree(declared: Declared): { readonly [key: string]: ConfigTree } {
  return {
    ...(declared.resourceBlocks === undefined ? {} : { 'MasterInformationBlock': { 'dl-Bandwidth': `n${declared.resourceBlocks}` } }),
    ...(declared.earfcn === undefined ? {} : { 'dl-CarrierFreq': declared.earfcn }),
    ...(declared.physicalCellId === undefined ? {} : { physCellId: declared.physicalCellId }),
    ...(declared.tddSubframeAssignment === undefined ? {} : { 'tdd-Config': { subframeAssignment: `sa${declared.tddSubframeAssignment}`, specialSubframePatterns: `ssp${declared.tddSpecialSubframe ?? 5}` } }),
    radioResourceConfigCommon: { 'ul-CyclicPrefixLength': 'len1' },
  };
}
