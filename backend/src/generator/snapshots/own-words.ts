import type { Random } from '../random.js';
import { groupOf, inUnit, QUANTITY, type Declared, type DeclaredName } from './declared.js';
import type { ConfigTree } from './syntax.js';

/** Words that invented vendors use; one of each row is drawn a file. */
const WORDS: Record<DeclaredName, readonly string[]> = {
  technology: ['airSystem', 'gen', 'modemKind', 'waveFamily'],
  subcarrierSpacing: ['toneGap', 'binPitch', 'carrierStep', 'sepTone'],
  cyclicPrefix: ['headCopy', 'prefixSort', 'guardKind', 'lead'],
  guardInterval: ['leadTime', 'guardSpan', 'headTime'],
  fftSize: ['xform', 'binCount', 'blockLen'],
  sampleRate: ['clock', 'tick', 'adcPace'],
  carrierFrequency: ['mid', 'tuneTo', 'loPoint', 'middleFreq'],
  nrArfcn: ['chanNo', 'rasterNo'],
  earfcn: ['chanNo', 'rasterNo'],
  pointAArfcn: ['anchorNo', 'originChan'],
  offsetToCarrier: ['originGap', 'anchorLift'],
  resourceBlocks: ['groups', 'blockTally', 'lanes'],
  channelBandwidth: ['breadth', 'wide', 'extent'],
  band: ['range', 'bandNo'],
  duplexMode: ['pairing', 'duplexWay'],
  tddPeriodicity: ['cycle', 'turnTime'],
  tddDownlinkSlots: ['downWhole', 'outSlots'],
  tddDownlinkSymbols: ['downPart', 'outTail'],
  tddUplinkSlots: ['upWhole', 'inSlots'],
  tddUplinkSymbols: ['upPart', 'inHead'],
  tddSubframeAssignment: ['turnPlan', 'splitPlan'],
  tddSpecialSubframe: ['gapPlan', 'bendPlan'],
  physicalCellId: ['ident', 'code', 'siteTag', 'cellNo'],
  ssbSubcarrierSpacing: ['beaconGap', 'syncPitch'],
  ssbArfcn: ['beaconNo', 'syncChan'],
  gscn: ['beaconStep', 'syncRaster'],
  kSsb: ['beaconSlip', 'syncShift'],
  ssbPeriodicity: ['beaconEvery', 'syncCycle'],
  phaseCompensation: ['rotComp', 'upTurn', 'symbolTurn'],
  spectrumSense: ['mirror', 'sense', 'flip'],
  halfSubcarrierShift: ['halfTone', 'shift7k5'],
  nTaOffset: ['lead_tc', 'advanceBase'],
  dmrsTypeAPosition: ['refPos', 'pilotAt'],
};

const SECTIONS = {
  radio: ['air', 'phy', 'modem', 'wave'],
  carrier: ['rf', 'chan', 'tuner', 'lane'],
  cell: ['site', 'beaconing', 'station'],
  frame: ['frame', 'timing', 'turns'],
} as const;

/** Other words for the values of a parameter: pairs of own word and common word. */
const VALUES: Partial<Record<DeclaredName, readonly (readonly (readonly [string | number, string | boolean])[])[]>> = {
  technology: [[['G5', 'nr'], ['G4', 'lte'], ['LAN', 'wifi'], ['OWN', 'ofdm']], [[5, 'nr'], [4, 'lte'], [11, 'wifi'], [0, 'ofdm']]],
  cyclicPrefix: [[[0, 'normal'], [1, 'extended'], [2, 'short'], [3, 'double'], [4, 'quadruple']], [['STD', 'normal'], ['LONG', 'extended'], ['SHT', 'short'], ['TWICE', 'double'], ['FOURFOLD', 'quadruple']]],
  duplexMode: [[['PAIRED', 'fdd'], ['TURNS', 'tdd']], [[1, 'fdd'], [2, 'tdd']]],
  phaseCompensation: [[[1, true], [0, false]], [['PER_SYMBOL', true], ['FREE_RUN', false]]],
  spectrumSense: [[[0, 'upright'], [1, 'inverted']], [['POS', 'upright'], ['NEG', 'inverted']]],
  halfSubcarrierShift: [[[1, true], [0, false]], [['ADDED', true], ['NONE', false]]],
  dmrsTypeAPosition: [[[2, 'pos2'], [3, 'pos3']], [['EARLY', 'pos2'], ['LATE', 'pos3']]],
};

const UNITS = { frequency: [['Hz', 0], ['kHz', 3], ['MHz', 6]], rate: [['Hz', 0], ['Msps', 6]], time: [['us', -6], ['ms', -3], ['ns', -9]] } as const;

/** A file in a vendor's own words, and the glossary that explains them, by key path. */
export function ownWords(declared: Declared, random: Random): { tree: { readonly [key: string]: ConfigTree }; glossary: { readonly [path: string]: ConfigTree } } {
  const tree: Record<string, Record<string, ConfigTree>> = {};
  const glossary: Record<string, ConfigTree> = {};
  const sections = Object.fromEntries(Object.entries(SECTIONS).map(([group, names]) => [group, random.pick(names as readonly string[])]));
  for (const [name, value] of Object.entries(declared) as [DeclaredName, string | number | boolean][]) {
    const words = WORDS[name];
    if (value === undefined) continue;
    const section = sections[groupOf(name)];
    const said = saying(name, value, random);
    const key = `${random.pick(words)}${said.suffix}`;
    tree[section] = { ...tree[section], [key]: said.written };
    glossary[`${section}.${key}`] = said.entry;
  }
  tree[sections.radio] = { ...tree[sections.radio], spare: random.integer(1, 9) };
  tree.build = { label: `r${random.integer(2, 30)}-${random.pick(['a', 'b', 'c'])}`, sealed: 1 };
  return { tree, glossary };
}

function saying(name: DeclaredName, value: string | number | boolean, random: Random): { suffix: string; written: ConfigTree; entry: ConfigTree } {
  const quantity = QUANTITY[name];
  if (quantity) {
    const [unit, exponent] = random.pick(UNITS[quantity] as readonly (readonly [string, number])[]);
    const suffix = random.chance(0.5) ? `_${unit}` : '';
    return { suffix, written: inUnit(Number(value), exponent), entry: { parameter: name, unit } };
  }
  const mapping = VALUES[name];
  if (!mapping) return { suffix: '', written: value, entry: { parameter: name } };
  const pairs = random.pick(mapping);
  const own = pairs.find(([, common]) => common === value)![0];
  return { suffix: '', written: own, entry: { parameter: name, values: Object.fromEntries(pairs.map(([word, common]) => [word, common])) } };
}
