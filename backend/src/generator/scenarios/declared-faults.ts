import type { HintCode } from '#shared/vocabulary';
import { gscnHz, nrArfcn } from '../nr/raster.js';
import type { Random } from '../random.js';
import type { Declared, DeclaredName } from '../snapshots/declared.js';
import { drawPattern } from './draw-nr.js';
import type { Drawn, Wish } from './drawn.js';
import { channelBlocks } from './nr-bands.js';

export type SignalKind = Drawn['signal']['kind'];

/** A way in which a side's configuration can depart from what is on the air. */
export interface DeclaredFault {
  readonly name: string;
  readonly code: HintCode;
  readonly kinds: readonly SignalKind[];
  readonly wish?: (random: Random) => Wish;
  /** What both sides must state for the fault to show. */
  readonly must: readonly DeclaredName[];
  readonly never?: readonly DeclaredName[];
  readonly standard: boolean;
  /** `air`: the capture tells whose setting is wrong. `maybe`: it may. `nothing`: only the two files speak. */
  readonly told: 'air' | 'maybe' | 'nothing';
  readonly allowed?: readonly HintCode[];
  /** The wrong configuration, or null where this situation has none. */
  readonly deviate: (drawn: Drawn, random: Random) => Declared | null;
}

const different = <T>(random: Random, from: readonly T[], than: T): T | null => {
  const others = from.filter((v) => v !== than);
  return others.length === 0 ? null : random.pick(others);
};

function otherSpacing({ declared }: Drawn, random: Random): Declared | null {
  const isHigh = (declared.carrierFrequency ?? 0) > 7.125e9;
  const spacing = different(random, isHigh ? [60000, 120000] : [15000, 30000, 60000], declared.subcarrierSpacing!);
  const blocks = spacing && channelBlocks(declared.carrierFrequency!, spacing)[declared.channelBandwidth! / 1e6];
  if (!spacing || !blocks) return null;
  return { ...declared, subcarrierSpacing: spacing, resourceBlocks: blocks, fftSize: declared.sampleRate! / spacing, cyclicPrefix: 'normal' };
}

function otherBandwidth({ declared }: Drawn, random: Random): Declared | null {
  const own = declared.channelBandwidth! / 1e6;
  const rows = declared.technology === 'lte' ? { 1.4: 6, 3: 15, 5: 25, 10: 50, 15: 75, 20: 100 } : channelBlocks(declared.carrierFrequency!, declared.subcarrierSpacing!);
  const other = different(random, Object.keys(rows).map(Number).filter((mhz) => mhz <= 4 * own && mhz >= own / 4), own);
  return other === null ? null : { ...declared, channelBandwidth: other * 1e6, resourceBlocks: rows[other as keyof typeof rows] };
}

function otherCarrier({ declared }: Drawn, random: Random): Declared | null {
  const away = random.pick([-5, -2, -1, 1, 1, 2, 10]);
  if (declared.technology === 'wifi') return { ...declared, carrierFrequency: declared.carrierFrequency! + random.pick([-20e6, -5e6, 5e6, 20e6]) };
  if (declared.technology === 'lte') return { ...declared, carrierFrequency: declared.carrierFrequency! + 100_000 * away, earfcn: declared.earfcn! + away };
  const hz = declared.carrierFrequency!;
  const step = hz > 7.125e9 ? 120_000 : hz > 3e9 ? 30_000 : 100_000;
  return { ...declared, carrierFrequency: hz + step * away };
}

function otherBlock({ declared }: Drawn, random: Random): Declared | null {
  const gscn = declared.gscn! + random.pick([-3, -1, 1, 2, 3]) * (declared.carrierFrequency! < 3e9 ? 3 : 1);
  return { ...declared, gscn, ssbArfcn: nrArfcn(gscnHz(gscn)) };
}

function otherPattern({ declared }: Drawn, random: Random): Declared | null {
  for (let tries = 0; tries < 20; tries++) {
    const p = drawPattern(random, declared.subcarrierSpacing!);
    const isOther = p.periodS !== declared.tddPeriodicity || Math.abs(p.downlinkSlots - declared.tddDownlinkSlots!) >= 1;
    if (isOther) return { ...declared, tddPeriodicity: p.periodS, tddDownlinkSlots: p.downlinkSlots, tddDownlinkSymbols: p.downlinkSymbols, tddUplinkSlots: p.uplinkSlots, tddUplinkSymbols: p.uplinkSymbols };
  }
  return null;
}

const CELLULAR: readonly SignalKind[] = ['nr', 'lte'];

export const DECLARED_FAULTS: readonly DeclaredFault[] = [
  { name: 'spacing', code: 'subcarrier-spacing', kinds: ['nr'], must: ['subcarrierSpacing'], never: ['tddPeriodicity', 'tddDownlinkSlots', 'tddDownlinkSymbols', 'tddUplinkSlots', 'tddUplinkSymbols', 'kSsb'], standard: true, told: 'air', deviate: otherSpacing },
  {
    name: 'spacing, Wi-Fi', code: 'subcarrier-spacing', kinds: ['wifi'], must: ['subcarrierSpacing'], never: ['fftSize', 'sampleRate'], standard: false, told: 'air', allowed: ['sample-rate', 'cyclic-prefix'],
    deviate: ({ declared }, random) => ({ ...declared, subcarrierSpacing: different(random, [78_125, 312_500, 156_250], declared.subcarrierSpacing!)! }),
  },
  {
    name: 'spacing, own OFDM', code: 'subcarrier-spacing', kinds: ['ofdm'], must: ['subcarrierSpacing'], never: ['fftSize', 'sampleRate'], standard: false, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, subcarrierSpacing: declared.subcarrierSpacing! * random.pick([0.5, 2, 1.25]) }),
  },
  {
    name: 'prefix, NR', code: 'cyclic-prefix', kinds: ['nr'], wish: (random) => ({ spacingHz: 60000, prefix: random.pick(['normal', 'extended']) }), must: ['cyclicPrefix'], standard: true, told: 'air',
    deviate: ({ declared }) => ({ ...declared, cyclicPrefix: declared.cyclicPrefix === 'normal' ? 'extended' : 'normal' }),
  },
  {
    name: 'prefix, LTE', code: 'cyclic-prefix', kinds: ['lte', 'lte-uplink'], must: ['cyclicPrefix'], standard: false, told: 'air',
    deviate: ({ declared }) => ({ ...declared, cyclicPrefix: declared.cyclicPrefix === 'normal' ? 'extended' : 'normal' }),
  },
  {
    name: 'guard, Wi-Fi', code: 'cyclic-prefix', kinds: ['wifi'], wish: (random) => ({ wifiFormat: random.pick(['ht', 'vht', 'he']) }), must: ['guardInterval'], never: ['cyclicPrefix'], standard: false, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, guardInterval: different(random, declared.subcarrierSpacing === 78_125 ? [0.8e-6, 1.6e-6, 3.2e-6] : [0.4e-6, 0.8e-6], declared.guardInterval!)! }),
  },
  {
    name: 'guard, own OFDM', code: 'cyclic-prefix', kinds: ['ofdm'], must: ['guardInterval'], standard: false, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, guardInterval: declared.guardInterval! * random.pick([0.5, 2]) }),
  },
  {
    name: 'transform', code: 'fft-size', kinds: ['nr', 'lte', 'ofdm', 'wifi'], must: ['fftSize', 'sampleRate'], never: ['subcarrierSpacing'], standard: false, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, fftSize: declared.fftSize! * random.pick([0.5, 2]) }),
  },
  {
    name: 'rate', code: 'sample-rate', kinds: ['nr', 'lte', 'ofdm'], must: ['fftSize', 'sampleRate'], never: ['subcarrierSpacing'], standard: false, told: 'air',
    deviate: ({ declared }) => ({ ...declared, sampleRate: declared.sampleRate! * 0.75 }),
  },
  { name: 'bandwidth', code: 'channel-bandwidth', kinds: CELLULAR, wish: () => ({ fullLoad: true }), must: ['resourceBlocks', 'channelBandwidth'], standard: true, told: 'air', deviate: otherBandwidth },
  {
    name: 'bandwidth, Wi-Fi', code: 'channel-bandwidth', kinds: ['wifi'], must: ['channelBandwidth'], never: ['fftSize', 'sampleRate'], standard: false, told: 'air',
    deviate: ({ declared }, random) => (declared.channelBandwidth! < 20e6 ? null : { ...declared, channelBandwidth: different(random, [20e6, 40e6, 80e6], declared.channelBandwidth!)! }),
  },
  { name: 'carrier', code: 'carrier-frequency', kinds: ['nr', 'lte', 'wifi'], must: ['carrierFrequency'], never: ['kSsb'], standard: true, told: 'air', deviate: otherCarrier },
  { name: 'block', code: 'ssb-placement', kinds: ['nr'], must: ['ssbArfcn'], never: ['gscn', 'kSsb'], standard: true, told: 'air', deviate: otherBlock },
  {
    name: 'k_SSB', code: 'ssb-placement', kinds: ['nr'], must: ['kSsb'], standard: false, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, kSsb: (declared.kSsb! + random.integer(1, 10)) % 12 }),
  },
  {
    name: 'block spacing', code: 'ssb-subcarrier-spacing', kinds: ['nr'], must: ['ssbSubcarrierSpacing'], standard: true, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, ssbSubcarrierSpacing: different(random, declared.carrierFrequency! > 7.125e9 ? [120_000, 240_000] : [15_000, 30_000], declared.ssbSubcarrierSpacing!)! }),
  },
  {
    name: 'identity', code: 'physical-cell-id', kinds: CELLULAR, must: ['physicalCellId'], standard: true, told: 'air',
    deviate: ({ declared }, random) => ({ ...declared, physicalCellId: (declared.physicalCellId! + random.pick([1, 2, 3, random.integer(4, 300)])) % (declared.technology === 'nr' ? 1008 : 504) }),
  },
  { name: 'pattern', code: 'tdd-pattern', kinds: ['nr'], wish: () => ({ tdd: true, fullLoad: true }), must: ['tddPeriodicity', 'subcarrierSpacing'], standard: true, told: 'maybe', deviate: otherPattern },
  {
    name: 'sense', code: 'spectrum-inversion', kinds: ['nr', 'lte', 'wifi'], wish: (random) => ({ inverted: random.chance(0.5) }), must: ['spectrumSense'], standard: false, told: 'air',
    deviate: ({ declared }) => ({ ...declared, spectrumSense: declared.spectrumSense === 'upright' ? 'inverted' : 'upright' }),
  },
  {
    name: 'symbol phase', code: 'phase-compensation', kinds: ['nr'], wish: (random) => ({ phaseCompensation: random.chance(0.4) }), must: ['phaseCompensation'], standard: false, told: 'air',
    deviate: ({ declared, air }) => (air.phaseCompensation ? { ...declared, phaseCompensation: !declared.phaseCompensation } : null),
  },
  {
    name: 'half subcarrier', code: 'half-subcarrier-shift', kinds: ['lte-uplink'], wish: (random) => ({ uplink: true, halfSubcarrierShift: random.chance(0.5) }), must: ['halfSubcarrierShift'], standard: false, told: 'air',
    deviate: ({ declared, air }) => (air.halfSubcarrierShift ? { ...declared, halfSubcarrierShift: !declared.halfSubcarrierShift } : null),
  },
  {
    name: 'advance', code: 'timing-offset', kinds: ['nr'], must: ['nTaOffset'], standard: true, told: 'nothing',
    deviate: ({ declared }, random) => (declared.nTaOffset === 13792 ? null : { ...declared, nTaOffset: different(random, [0, 25600, 39936], declared.nTaOffset!)! }),
  },
  {
    name: 'reference position', code: 'configuration', kinds: ['nr'], must: ['dmrsTypeAPosition'], standard: true, told: 'air',
    deviate: ({ declared }) => ({ ...declared, dmrsTypeAPosition: declared.dmrsTypeAPosition === 'pos2' ? 'pos3' : 'pos2' }),
  },
  {
    name: 'block period', code: 'configuration', kinds: ['nr'], must: ['ssbPeriodicity'], standard: true, told: 'nothing',
    deviate: ({ declared }, random) => ({ ...declared, ssbPeriodicity: different(random, [0.02, 0.04, 0.08, 0.16], declared.ssbPeriodicity!)! }),
  },
  {
    name: 'technology', code: 'technology', kinds: ['nr', 'lte', 'wifi'], must: ['technology'], standard: false, told: 'air', never: ['earfcn', 'band'],
    deviate: ({ declared }, random) => ({ ...declared, technology: different(random, ['nr', 'lte', 'wifi'] as const, declared.technology as 'nr')! }),
  },
  {
    name: 'prefix not permitted', code: 'not-permitted', kinds: ['nr'], wish: (random) => ({ spacingHz: random.pick([15000, 30000]) }), must: ['cyclicPrefix', 'subcarrierSpacing'], standard: true, told: 'air', allowed: ['cyclic-prefix'],
    deviate: ({ declared }) => ({ ...declared, cyclicPrefix: 'extended' }),
  },
];
