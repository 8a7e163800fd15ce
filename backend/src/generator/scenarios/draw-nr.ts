import type { Random } from '../random.js';
import { blockSpacingHz, blockStartSymbol, type BlockCase } from '../nr/block-pattern.js';
import { gscnHz, gscnWithin, nrArfcn, nrArfcnHz } from '../nr/raster.js';
import type { NrBlocks, NrSpec, TddPattern } from '../nr/spec.js';
import type { Declared } from '../snapshots/declared.js';
import { drawImpairments, drawReceiver, drawRecording } from './draw-receiver.js';
import type { Drawn, Wish } from './drawn.js';
import { nrAir } from './nr-air.js';
import { channelBlocks, NR_BANDS, type NrBand } from './nr-bands.js';

interface Channel {
  readonly band: NrBand;
  readonly spacingHz: number;
  readonly blockCase: BlockCase;
  readonly mhz: number;
  readonly blocks: number;
}

/** A downlink carrier of a band with its synchronisation blocks on the raster, recorded honestly; null where no band fits the wish. */
export function drawNr(random: Random, wish: Wish): Drawn | null {
  for (let tries = 0; tries < 1000; tries++) {
    const channel = drawChannel(random, wish);
    const placed = channel && place(random, channel);
    if (!channel || !placed) continue;
    const spec = drawSpec(random, wish, { channel, ...placed });
    if (!spec) continue;
    return drawnFrom(random, wish, { channel, spec, gscn: placed.gscn });
  }
  return null;
}

function drawChannel(random: Random, wish: Wish): Channel | null {
  const isHigh = random.chance(0.1);
  const band = random.pick(NR_BANDS.filter((b) => (b.lowHz > 2e10) === isHigh && (wish.tdd === undefined || (b.duplex === 'tdd') === wish.tdd)));
  const spacingHz = wish.spacingHz ?? (wish.prefix === 'extended' ? 60000 : random.pick(band.spacingsHz));
  if (!band.spacingsHz.includes(spacingHz)) return null;
  const blockCase = random.pick(band.cases);
  const widest = (wish.maxRateHz ?? 62e6) / 1.05;
  const options = Object.entries(channelBlocks(band.lowHz, spacingHz)).map(([mhz, blocks]) => ({ mhz: Number(mhz), blocks }))
    .filter((o) => o.mhz * 1e6 <= band.highHz - band.lowHz && 12 * o.blocks * spacingHz >= 240 * blockSpacingHz(blockCase) + 4 * spacingHz && 12 * o.blocks * spacingHz < widest);
  if (options.length === 0) return null;
  return { band, spacingHz, blockCase, ...random.pick(options) };
}

/** Carrier and block on their rasters, the block inside the carrier and on the 15 kHz (or common) grid. */
function place(random: Random, { band, spacingHz, blockCase, mhz, blocks }: Channel): { carrierHz: number; gscn: number } | null {
  const low = band.lowHz + mhz * 5e5;
  const high = band.highHz - mhz * 5e5;
  const wanted = random.uniform(low, high);
  const carrierHz = band.rasterHz === 100_000 ? 100_000 * Math.round(wanted / 100_000) : rasterNear(wanted, band.rasterHz);
  const half = 6 * blocks * spacingHz;
  const blockSpacing = blockSpacingHz(blockCase);
  const grid = carrierHz > 7.125e9 ? Math.max(60_000, Math.min(spacingHz, 120_000)) : 15_000;
  const options = gscnWithin(carrierHz - half + 120 * blockSpacing, carrierHz + half - 120 * blockSpacing)
    .filter((g) => (gscnHz(g) - 120 * blockSpacing - (carrierHz - half)) % grid === 0);
  return options.length === 0 ? null : { carrierHz, gscn: random.pick(options) };
}

function rasterNear(hz: number, stepHz: number): number {
  const n = nrArfcn(hz);
  const raster = hz < 3e9 ? 5000 : hz < 24.25e9 ? 15000 : 60000;
  return nrArfcnHz(n - (n % (stepHz / raster)));
}

function drawSpec(random: Random, wish: Wish, { channel, carrierHz, gscn }: { channel: Channel; carrierHz: number; gscn: number }): NrSpec | null {
  const { band, spacingHz, blockCase } = channel;
  const extended = wish.prefix ? wish.prefix === 'extended' : spacingHz === 60000 && random.chance(0.3);
  const tdd = band.duplex === 'tdd' ? drawPattern(random, spacingHz) : null;
  const periodMs = random.pick([5, 10, 10, 20] as const);
  const halfFrame = periodMs === 5 ? 0 : random.pick([0, 0, 1] as const);
  const sent = sentBlocks(random, { blockCase, maxBlocks: maxBlocks(band, blockCase, carrierHz), tdd, spacingHz, halves: periodMs === 5 ? [0, 1] : [halfFrame] });
  if (sent.length === 0) return null;
  const isHigh = carrierHz > 7.125e9;
  const common = isHigh ? (spacingHz === 60000 ? 60000 : 120000) : spacingHz === 15000 ? 15000 : 30000;
  const blocks: NrBlocks = {
    blockCase, frequencyHz: gscnHz(gscn), sent, maxBlocks: maxBlocks(band, blockCase, carrierHz), periodMs, halfFrame,
    pssBoostDb: random.pick([0, 0, 3]), gainDb: random.pick([0, 0, 3]),
  };
  const pointA = carrierHz - 6 * channel.blocks * spacingHz;
  const unit = isHigh ? common : 15000;
  const kSsb = Math.round((blocks.frequencyHz - 120 * blockSpacingHz(blockCase) - pointA) / unit) % ((12 * common) / unit);
  return {
    carrierHz, spacingHz, prefix: extended ? 'extended' : 'normal', resourceBlocks: channel.blocks, cellId: random.integer(0, 1007), blocks, tdd,
    mib: {
      systemFrameNumber: random.integer(0, 1023), subCarrierSpacingCommon: common === 15000 || common === 60000 ? 'scs15or60' : 'scs30or120', kSsb,
      dmrsTypeAPosition: random.pick(['pos2', 'pos3']), pdcchConfigSib1: random.integer(0, 255), cellBarred: random.chance(0.1), intraFreqReselection: random.chance(0.7), spare: 0,
    },
    load: wish.fullLoad
      ? { slots: 1, blocks: 1, modulations: ['qpsk', '16qam', '64qam'], controlSymbols: random.integer(0, 2), dmrs: true }
      : { slots: random.uniform(0.4, 1), blocks: random.chance(0.5) ? 1 : random.uniform(0.4, 1), modulations: random.pick([['qpsk'], ['qpsk', '16qam'], ['64qam'], ['qpsk', '16qam', '64qam', '256qam']] as const), controlSymbols: random.integer(0, 2), dmrs: random.chance(0.8) },
    phaseCompensation: wish.phaseCompensation ?? true,
    // Up to a quarter of the ordinary prefix.
    taperS: random.chance(0.3) ? random.uniform(0, 9 / 128 / 4) / spacingHz : 0,
    seed: random.bits(),
  };
}

/** L_max of TS 38.213 clause 4.1. */
function maxBlocks(band: NrBand, blockCase: BlockCase, carrierHz: number): 4 | 8 | 64 {
  if (carrierHz > 7.125e9) return 64;
  const split = blockCase === 'C' && band.duplex === 'tdd' ? 1.88e9 : 3e9;
  return carrierHz < split ? 4 : 8;
}

/** Common patterns, by slots at the carrier's spacing. */
export function drawPattern(random: Random, spacingHz: number): TddPattern {
  const scale = spacingHz / 15000;
  const periodS = spacingHz >= 60000 ? random.pick([0.00125, 0.0025, 0.005]) : random.pick(spacingHz === 30000 ? [0.0025, 0.005, 0.01] : [0.005, 0.01]);
  const slots = Math.round(periodS * 1000 * scale);
  const uplinkSlots = random.integer(1, Math.max(1, Math.floor(slots / 3)));
  return { periodS, downlinkSlots: slots - uplinkSlots - 1, downlinkSymbols: random.pick([3, 6, 8, 10]), uplinkSlots, uplinkSymbols: random.pick([1, 2, 3]) };
}

interface Candidates {
  readonly blockCase: BlockCase;
  readonly maxBlocks: number;
  readonly tdd: TddPattern | null;
  readonly spacingHz: number;
  readonly halves: readonly number[];
}

/** Some of the candidates, all of them in whole downlink slots. */
function sentBlocks(random: Random, { blockCase, maxBlocks: most, tdd, spacingHz, halves }: Candidates): number[] {
  const symbolS = 0.001 / (14 * (blockSpacingHz(blockCase) / 15000));
  const slotS = 0.001 / (spacingHz / 15000);
  const isHeld = (i: number) => !tdd || halves.every((half) => {
    const start = (0.005 * half + blockStartSymbol(blockCase, i) * symbolS) % tdd.periodS;
    return start + 4.2 * symbolS <= tdd.downlinkSlots * slotS;
  });
  const possible = Array.from({ length: most }, (_, i) => i).filter(isHeld);
  if (possible.length === 0) return [];
  const share = random.pick([0, 0.5, 1]);
  const chosen = possible.filter(() => random.chance(share));
  return chosen.length > 0 ? chosen : [random.pick(possible)];
}

function drawnFrom(random: Random, wish: Wish, { channel, spec, gscn }: { channel: Channel; spec: NrSpec; gscn: number }): Drawn {
  const period = spec.blocks!.periodMs / 1000;
  const durationS = Math.min(wish.maxDurationS ?? 0.03, Math.max(period + 0.0055, random.uniform(0.008, 0.024)));
  const receiver = drawReceiver(random, { carrierHz: spec.carrierHz, widthHz: (12 * spec.resourceBlocks + 1) * spec.spacingHz, durationS }, wish);
  const capture = { signal: { kind: 'nr', spec } as const, receiver, impairments: drawImpairments(random, wish, 9 / 128 / Math.max(spec.spacingHz, blockSpacingHz(channel.blockCase))), recording: drawRecording(random), seed: random.bits() };
  return { signal: capture.signal, capture, declared: nrDeclared(random, { channel, spec, gscn, inverted: wish.inverted === true }), air: nrAir(capture), label: `NR, ${spec.spacingHz / 1000} kHz, ${channel.mhz} MHz in n${channel.band.band}` };
}

function nrDeclared(random: Random, { channel, spec, gscn, inverted }: { channel: Channel; spec: NrSpec; gscn: number; inverted: boolean }): Declared {
  const blocks = spec.blocks!;
  const fftSize = 2 ** Math.ceil(Math.log2(12.5 * spec.resourceBlocks));
  return {
    technology: 'nr',
    subcarrierSpacing: spec.spacingHz,
    cyclicPrefix: spec.prefix,
    fftSize,
    sampleRate: fftSize * spec.spacingHz,
    carrierFrequency: spec.carrierHz,
    resourceBlocks: spec.resourceBlocks,
    channelBandwidth: channel.mhz * 1e6,
    band: channel.band.band,
    duplexMode: channel.band.duplex,
    ...(spec.tdd ? {
      tddPeriodicity: spec.tdd.periodS, tddDownlinkSlots: spec.tdd.downlinkSlots, tddDownlinkSymbols: spec.tdd.downlinkSymbols,
      tddUplinkSlots: spec.tdd.uplinkSlots, tddUplinkSymbols: spec.tdd.uplinkSymbols,
    } : {}),
    physicalCellId: spec.cellId,
    ssbSubcarrierSpacing: blockSpacingHz(blocks.blockCase),
    ssbArfcn: nrArfcn(blocks.frequencyHz),
    gscn,
    kSsb: spec.mib.kSsb,
    ssbPeriodicity: blocks.periodMs / 1000,
    phaseCompensation: spec.phaseCompensation,
    spectrumSense: inverted ? 'inverted' : 'upright',
    dmrsTypeAPosition: spec.mib.dmrsTypeAPosition,
    nTaOffset: spec.carrierHz > 7.125e9 ? 13792 : random.pick([0, 25600]),
  };
}
