import type { LteSpec } from '../lte/spec.js';
import { LTE_BANDWIDTH_HZ } from '../lte/timing.js';
import type { UplinkSpec } from '../lte/uplink.js';
import type { Random } from '../random.js';
import type { CaptureSpec } from './capture.js';
import { drawImpairments, drawReceiver, drawRecording } from './draw-receiver.js';
import type { Drawn, Wish } from './drawn.js';
import type { AirExpectation } from './expectation.js';

/** Bands of TS 36.104 Tables 5.5-1 and 5.7.3-1: downlink from, to (MHz), first channel number; uplink the same. */
const BANDS = [
  { band: 1, duplex: 'fdd', low: 2110, high: 2170, first: 0, upLow: 1920, upFirst: 18000 },
  { band: 3, duplex: 'fdd', low: 1805, high: 1880, first: 1200, upLow: 1710, upFirst: 19200 },
  { band: 7, duplex: 'fdd', low: 2620, high: 2690, first: 2750, upLow: 2500, upFirst: 20750 },
  { band: 8, duplex: 'fdd', low: 925, high: 960, first: 3450, upLow: 880, upFirst: 21450 },
  { band: 20, duplex: 'fdd', low: 791, high: 821, first: 6150, upLow: 832, upFirst: 24150 },
  { band: 28, duplex: 'fdd', low: 758, high: 803, first: 9210, upLow: 703, upFirst: 27210 },
  { band: 38, duplex: 'tdd', low: 2570, high: 2620, first: 37750, upLow: 2570, upFirst: 37750 },
  { band: 40, duplex: 'tdd', low: 2300, high: 2400, first: 38650, upLow: 2300, upFirst: 38650 },
  { band: 41, duplex: 'tdd', low: 2496, high: 2690, first: 39650, upLow: 2496, upFirst: 39650 },
] as const;

/** Frequency of a channel number of these bands (TS 36.104 clause 5.7.3), Hz. */
export function earfcnHz(earfcn: number): number {
  const row = BANDS.find((b) => earfcn >= b.first && earfcn < b.first + 10 * (b.high - b.low));
  if (row) return row.low * 1e6 + 100_000 * (earfcn - row.first);
  const up = BANDS.find((b) => earfcn >= b.upFirst && earfcn < b.upFirst + 10 * (b.high - b.low))!;
  return up.upLow * 1e6 + 100_000 * (earfcn - up.upFirst);
}

export function drawLte(random: Random, wish: Wish): Drawn {
  if (wish.uplink) return drawUplink(random, wish);
  const band = random.pick(BANDS.filter((b) => wish.tdd === undefined || (b.duplex === 'tdd') === wish.tdd));
  const options = ([6, 15, 25, 50, 75, 100] as const).filter((n) => n === 6 || LTE_BANDWIDTH_HZ[n] * 1.1 <= (wish.maxRateHz ?? Infinity));
  const resourceBlocks = random.pick(options);
  const half = LTE_BANDWIDTH_HZ[resourceBlocks] / 2e5;
  const step = random.integer(Math.ceil(half), Math.floor(10 * (band.high - band.low) - half));
  const earfcn = band.first + step;
  const spec: LteSpec = {
    carrierHz: earfcnHz(earfcn), resourceBlocks, prefix: wish.prefix ?? (random.chance(0.25) ? 'extended' : 'normal'), duplex: band.duplex,
    ...(band.duplex === 'tdd' ? { tddConfiguration: random.integer(0, 6), specialSubframe: random.integer(0, 7) } : {}),
    cellId: random.integer(0, 503), ports: random.pick([1, 2]), systemFrameNumber: random.integer(0, 1023), phichDuration: 'normal', phichResource: random.pick([0, 1, 2, 3]),
    controlSymbols: random.integer(resourceBlocks === 6 ? 2 : 1, 3),
    load: wish.fullLoad ? { subframes: 1, blocks: 1, modulations: ['qpsk', '16qam'] } : { subframes: random.uniform(0.4, 1), blocks: random.chance(0.5) ? 1 : random.uniform(0.3, 1), modulations: random.pick([['qpsk'], ['qpsk', '16qam', '64qam']] as const) },
    taperS: random.chance(0.3) ? random.uniform(0, 1.2e-6) : 0,
    seed: random.bits(),
  };
  const durationS = Math.min(wish.maxDurationS ?? 0.03, random.uniform(0.012, 0.025));
  const receiver = drawReceiver(random, { carrierHz: spec.carrierHz, widthHz: (12 * resourceBlocks + 1) * 15000, durationS }, wish);
  const capture: CaptureSpec = { signal: { kind: 'lte', spec }, receiver, impairments: drawImpairments(random, wish, 4.6e-6), recording: drawRecording(random), seed: random.bits() };
  const fftSize = 2 ** Math.ceil(Math.log2(12.2 * resourceBlocks));
  return {
    signal: capture.signal, capture, air: downlinkAir(spec, capture), label: `LTE, ${LTE_BANDWIDTH_HZ[resourceBlocks] / 1e6} MHz in band ${band.band}`,
    declared: {
      technology: 'lte', subcarrierSpacing: 15000, cyclicPrefix: spec.prefix, fftSize, sampleRate: 15000 * fftSize, earfcn, carrierFrequency: spec.carrierHz, resourceBlocks,
      channelBandwidth: LTE_BANDWIDTH_HZ[resourceBlocks], band: band.band, duplexMode: band.duplex, physicalCellId: spec.cellId, spectrumSense: wish.inverted ? 'inverted' : 'upright',
      ...(band.duplex === 'tdd' ? { tddSubframeAssignment: spec.tddConfiguration, tddSpecialSubframe: spec.specialSubframe } : {}),
    },
  };
}

function downlinkAir(spec: LteSpec, capture: CaptureSpec): Record<string, AirExpectation> {
  const { receiver } = capture;
  const first = Math.floor(receiver.startS / 0.01);
  const last = Math.floor((receiver.startS + receiver.durationS) / 0.01);
  const frames = Array.from({ length: last - first + 1 }, (_, i) => (spec.systemFrameNumber + first + i) % 1024);
  return {
    technology: { oneOf: ['lte'] },
    subcarrierSpacingHz: { value: 15000, tol: 75 },
    cyclicPrefix: { oneOf: [spec.prefix] },
    carrierOffsetHz: { value: spec.carrierHz - receiver.centreHz + (receiver.carrierOffsetHz ?? 0), tol: 225, modulo: 15000 },
    physicalCellId: { value: spec.cellId, tol: 0 },
    systemFrameNumber: { oneOf: frames },
    mib: { mib: { systemFrameNumber: frames, resourceBlocks: spec.resourceBlocks } },
    resourceBlocks: { value: spec.resourceBlocks, tol: 0 },
    spectrumInverted: { oneOf: [capture.impairments.sense !== 'upright'] },
  };
}

/** Below, a recorder's ±2 ppm stay under half of the 7.5 kHz, and the shift can be told from an offset. */
const TELLING_MHZ = 1600;

function drawUplink(random: Random, wish: Wish): Drawn {
  const band = random.pick(wish.halfSubcarrierShift === undefined ? BANDS : BANDS.filter((b) => b.upLow < TELLING_MHZ));
  const resourceBlocks = random.pick([25, 50, 100].filter((n) => n === 25 || LTE_BANDWIDTH_HZ[n] * 1.1 <= (wish.maxRateHz ?? Infinity)));
  const earfcn = band.upFirst + random.integer(100, 10 * (band.high - band.low) - 100);
  const allocatedBlocks = random.pick([15, 20, 25, 50, 75, 100].filter((n) => n <= resourceBlocks));
  const spec: UplinkSpec = {
    carrierHz: earfcnHz(earfcn), resourceBlocks, prefix: wish.prefix ?? 'normal', cellId: random.integer(0, 503), allocatedBlocks, firstBlock: random.integer(0, resourceBlocks - allocatedBlocks),
    subframes: random.uniform(0.6, 1), modulation: random.pick(['qpsk', '16qam']), halfSubcarrierShift: wish.halfSubcarrierShift ?? true, seed: random.bits(),
  };
  const drawn = drawReceiver(random, { carrierHz: spec.carrierHz, widthHz: 12 * resourceBlocks * 15000, durationS: random.uniform(0.008, 0.02) }, wish);
  // The shift shows only against a clock that is better than it: 0.5 ppm of 2 GHz is 1 kHz.
  const ppm = random.uniform(-0.2, 0.2);
  const receiver = { ...drawn, clockPpm: ppm, carrierOffsetHz: spec.carrierHz * ppm * 1e-6 };
  const capture: CaptureSpec = { signal: { kind: 'lte-uplink', spec }, receiver, impairments: drawImpairments(random, wish, 4.6e-6), recording: drawRecording(random), seed: random.bits() };
  return {
    signal: capture.signal, capture, label: `LTE uplink, ${LTE_BANDWIDTH_HZ[resourceBlocks] / 1e6} MHz in band ${band.band}`,
    declared: {
      technology: 'lte', subcarrierSpacing: 15000, cyclicPrefix: spec.prefix, carrierFrequency: spec.carrierHz, earfcn, resourceBlocks, channelBandwidth: LTE_BANDWIDTH_HZ[resourceBlocks],
      halfSubcarrierShift: spec.halfSubcarrierShift, spectrumSense: wish.inverted ? 'inverted' : 'upright',
    },
    air: {
      technology: { oneOf: ['lte', 'ofdm'] },
      subcarrierSpacingHz: { value: 15000, tol: 75 },
      cyclicPrefix: { oneOf: [spec.prefix] },
      ...(spec.carrierHz < TELLING_MHZ * 1e6 ? { halfSubcarrierShift: { oneOf: [spec.halfSubcarrierShift] } } : {}),
    },
  };
}
