import { uplinkName, type ParameterName } from '#shared/parameters';
import type { Step } from './names.js';

/** A field found by its name and place. The lower the rank, the more it speaks of the carrier's own data. */
export interface NamedField { readonly parameter: ParameterName; readonly rank: number; readonly unit?: string; readonly lowBitsOnly?: boolean }

/** Structures that mark a file as TS 38.331's or TS 36.331's. */
const NR_STRUCTURE = /^(servingcellconfigcommon(sib)?|servingcellconfig|spcellconfig(common)?|downlinkconfigcommon(sib)?|uplinkconfigcommon(sib)?|frequencyinfo[du]l(sib)?|initial(down|up)linkbwp|(down|up)linkbwp.*|genericparameters|scsspecificcarrier(list)?|tdduldlconfigurationcommon|bwp(common)?)$/;
const LTE_STRUCTURE = /^(radioresourceconfigcommon(sib)?|mobilitycontrolinfo|systeminformationblocktype[12]|tddconfig|phichconfig)$/;
const NR_FIELD = /^(absolutefrequencypointa|absolutefrequencyssb|scsspecificcarrierlist|carrierbandwidth|ssbperiodicityservingcell|ssbsubcarrieroffset|referencesubcarrierspacing|ntimingadvanceoffset)$/;
const LTE_FIELD = /^(dlbandwidth|ulbandwidth|ulcyclicprefixlength|specialsubframepatterns|subframeassignment|dlcarrierfreq)$/;

export const isRrcStructure = (step: Step): boolean => NR_STRUCTURE.test(step.compact) || LTE_STRUCTURE.test(step.compact);

/** The technology whose field or structure a key names. */
export function rrcTechnology(step: Step): 'nr' | 'lte' | null {
  if (NR_STRUCTURE.test(step.compact) || NR_FIELD.test(step.compact)) return 'nr';
  return LTE_STRUCTURE.test(step.compact) || LTE_FIELD.test(step.compact) ? 'lte' : null;
}

const at = (parameter: ParameterName, rank = 0): NamedField => ({ parameter, rank });

const FIELDS: Readonly<Record<string, NamedField>> = {
  physcellid: at('physicalCellId'),
  absolutefrequencypointa: at('pointAArfcn'),
  absolutefrequencyssb: at('ssbArfcn'),
  offsettocarrier: at('offsetToCarrier'),
  carrierbandwidth: at('resourceBlocks'),
  locationandbandwidth: at('initialBwpLocation'),
  frequencybandlist: at('band'), freqbandindicatornr: at('band'), freqbandindicator: at('band'),
  ssbsubcarrierspacing: at('ssbSubcarrierSpacing'),
  ssbsubcarrieroffset: { parameter: 'kSsb', rank: 1, lowBitsOnly: true },
  ssbperiodicityservingcell: at('ssbPeriodicity'),
  offsettopointa: at('offsetToPointA'),
  subcarrierspacingcommon: at('subCarrierSpacingCommon'),
  frequencyshift7p5khz: at('halfSubcarrierShift'),
  ntimingadvanceoffset: at('nTaOffset'),
  dmrstypeaposition: at('dmrsTypeAPosition'),
  referencesubcarrierspacing: at('tddReferenceSpacing'),
  dlbandwidth: at('resourceBlocks'),
  ulbandwidth: at('uplinkResourceBlocks'),
  dlcarrierfreq: at('earfcn'), dlearfcn: at('earfcn'), earfcndl: at('earfcn'),
  ulcarrierfreq: at('uplinkEarfcn'), ulearfcn: at('uplinkEarfcn'), earfcnul: at('uplinkEarfcn'),
  ulcyclicprefixlength: at('uplinkCyclicPrefix'),
  subframeassignment: at('tddSubframeAssignment'),
  specialsubframepatterns: at('tddSpecialSubframe'),
};

const PATTERN: Readonly<Record<string, string>> = {
  dlultransmissionperiodicity: 'Periodicity', nrofdownlinkslots: 'DownlinkSlots', nrofdownlinksymbols: 'DownlinkSymbols',
  nrofuplinkslots: 'UplinkSlots', nrofuplinksymbols: 'UplinkSymbols',
};

/** The field of TS 38.331 or TS 36.331 that a key names under its parents. */
export function rrcField(steps: readonly Step[]): NamedField | null {
  const key = steps.at(-1)?.compact ?? '';
  const parents = steps.slice(0, -1);
  if (key in PATTERN || key === 'dlultransmissionperiodicityv1530') return patternField(key, parents);
  if (key === 'subcarrierspacing' || key === 'cyclicprefix') return partField(key, parents);
  const rank = parents.some((p) => /channelbwperscslist/.test(p.compact)) ? 3 : 0;
  const found = FIELDS[key] ?? flattened(key);
  return found === undefined ? null : { ...found, rank: found.rank + rank + partRank(parents) };
}

/** Files that flatten the structure put the direction before the field: `dl_carrierBandwidth`. */
function flattened(key: string): NamedField | undefined {
  const found = /^(dl|ul)(absolutefrequencypointa|offsettocarrier|carrierbandwidth)$/.exec(key);
  const field = found === null ? undefined : FIELDS[found[2]];
  return field === undefined || found?.[1] === 'dl' ? field : { ...field, parameter: uplinkName(field.parameter) };
}

/** The extension of Release 15 (3 and 4 ms) overrides the field that it extends. */
function patternField(key: string, parents: readonly Step[]): NamedField {
  const extended = key.endsWith('v1530');
  const name = PATTERN[extended ? 'dlultransmissionperiodicity' : key];
  const second = parents.some((p) => p.compact === 'pattern2');
  return { parameter: `tdd${second ? 'Second' : ''}${name}` as ParameterName, rank: extended ? 0 : 1 };
}

/** Spacing and prefix of a bandwidth part, spacing of a carrier; elsewhere in a file they are plain names. */
function partField(key: string, parents: readonly Step[]): NamedField | null {
  const inCarrier = parents.some((p) => /^scsspecificcarrier(list)?$|channelbwperscslist/.test(p.compact));
  const inPart = parents.some((p) => /bwp|genericparameters/.test(p.compact));
  if (!inCarrier && !inPart && !parents.some(isRrcStructure)) return null;
  const parameter = key === 'cyclicprefix' ? 'cyclicPrefix' : 'subcarrierSpacing';
  const inList = parents.some((p) => /channelbwperscslist/.test(p.compact)) ? 2 : 0;
  return { parameter, rank: (inCarrier ? 1 + inList : 0) + partRank(parents) };
}

/** Further bandwidth parts speak of the carrier only where the initial one is silent. */
const partRank = (parents: readonly Step[]): number => (parents.some((p) => /linkbwptoaddmodlist|^bwp(common|dedicated)?$|^bwp(down|up)link/.test(p.compact)) ? 2 : 0);

/** A bandwidth part: the structure in which an absent cyclicPrefix means the normal one. */
export const isBandwidthPart = (step: Step): boolean => step.compact === 'genericparameters';
export const isUplinkFrequencyInfo = (step: Step): boolean => /^frequencyinfoul(sib)?$/.test(step.compact);
