import type { CaptureSpec, Impairments } from '../generator/scenarios/capture.js';
import type { LteSpec } from '../generator/lte/spec.js';
import { gscnHz, gscnWithin, nrArfcn } from '../generator/nr/raster.js';
import type { NrSpec } from '../generator/nr/spec.js';
import type { Declared } from '../generator/snapshots/declared.js';
import type { WifiSpec } from '../generator/wifi/spec.js';

/** The demo's radios. Carriers, identities and patterns are invented; rasters and tables are the standards'. */
export const CRANE_HZ = 3_489_420_000;
export const YARD_HZ = 780_500_000;
export const YARD_EARFCN = 9435;
export const QUAY_HZ = 5_300_000_000;

interface NrWish { spacingHz?: 30_000 | 60_000; prefix?: 'normal' | 'extended'; resourceBlocks?: number; cellId?: number; phaseCompensation?: boolean; carrierHz?: number; seed: number }

const BLOCK_HZ = 30_000;

/** A block on the synchronisation raster, inside the carrier and on its 15 kHz grid (TS 38.104 clause 5.4.3). */
function placedBlock(carrierHz: number, widthHz: number): number {
  const low = carrierHz - widthHz / 2;
  const half = 120 * BLOCK_HZ;
  const fitting = gscnWithin(low + half, carrierHz + widthHz / 2 - half).filter((gscn) => (gscnHz(gscn) - half - low) % 15_000 === 0);
  const [gscn] = fitting;
  if (gscn === undefined) throw new RangeError(`no synchronisation raster point fits a carrier at ${carrierHz} Hz`);
  return gscn;
}

export function craneRadio({ spacingHz = 30_000, prefix = 'normal', resourceBlocks = spacingHz === 60_000 ? 18 : 38, cellId = 418, phaseCompensation = true, carrierHz = CRANE_HZ, seed }: NrWish): { spec: NrSpec; declared: Declared } {
  const width = 12 * resourceBlocks * spacingHz;
  const frequencyHz = gscnHz(placedBlock(carrierHz, width));
  const kSsb = Math.round((frequencyHz - 120 * BLOCK_HZ - (carrierHz - width / 2)) / 15_000) % 24;
  const tdd = { periodS: 0.005, downlinkSlots: spacingHz === 60_000 ? 13 : 6, downlinkSymbols: 6, uplinkSlots: spacingHz === 60_000 ? 6 : 3, uplinkSymbols: 3 };
  const spec: NrSpec = {
    carrierHz, spacingHz, prefix, resourceBlocks, cellId, phaseCompensation, seed, tdd,
    blocks: { blockCase: 'C', frequencyHz, sent: [0, 1, 2, 3], maxBlocks: 8, periodMs: 10, halfFrame: 0 },
    mib: { systemFrameNumber: 300, subCarrierSpacingCommon: 'scs30or120', kSsb, dmrsTypeAPosition: 'pos2', pdcchConfigSib1: 164, cellBarred: false, intraFreqReselection: true, spare: 0 },
    load: { slots: 0.9, blocks: 1, modulations: ['qpsk', '16qam', '64qam'], controlSymbols: 2, dmrs: true },
  };
  return {
    spec,
    declared: {
      technology: 'nr', subcarrierSpacing: spacingHz, cyclicPrefix: prefix, carrierFrequency: carrierHz, resourceBlocks, channelBandwidth: 15e6, band: 78, duplexMode: 'tdd',
      tddPeriodicity: tdd.periodS, tddDownlinkSlots: tdd.downlinkSlots, tddDownlinkSymbols: tdd.downlinkSymbols, tddUplinkSlots: tdd.uplinkSlots, tddUplinkSymbols: tdd.uplinkSymbols,
      physicalCellId: cellId, ssbSubcarrierSpacing: BLOCK_HZ, ssbArfcn: nrArfcn(frequencyHz), kSsb, ssbPeriodicity: 0.01, phaseCompensation, spectrumSense: 'upright', dmrsTypeAPosition: 'pos2',
    },
  };
}

export function yardRadio({ resourceBlocks = 25, prefix = 'normal', seed }: { resourceBlocks?: 25 | 50; prefix?: 'normal' | 'extended'; seed: number }): { spec: LteSpec; declared: Declared } {
  const fftSize = resourceBlocks === 25 ? 512 : 1024;
  return {
    spec: {
      carrierHz: YARD_HZ, resourceBlocks, prefix, duplex: 'fdd', cellId: 274, ports: 2, systemFrameNumber: 512, phichDuration: 'normal', phichResource: 2, controlSymbols: 2,
      load: { subframes: 0.9, blocks: 1, modulations: ['qpsk', '16qam'] }, seed,
    },
    declared: {
      technology: 'lte', subcarrierSpacing: 15_000, cyclicPrefix: prefix, fftSize, sampleRate: 15_000 * fftSize, earfcn: YARD_EARFCN, carrierFrequency: YARD_HZ, resourceBlocks,
      channelBandwidth: resourceBlocks * 200_000, band: 28, duplexMode: 'fdd', physicalCellId: 274, spectrumSense: 'upright',
    },
  };
}

export function quayRadio({ guardUs = 0.4, seed }: { guardUs?: 0.4 | 0.8; seed: number }): { spec: WifiSpec; declared: Declared } {
  return {
    spec: { carrierHz: QUAY_HZ, format: 'ht', mhz: 20, guardUs, mcs: 4, clock: 1, symbols: [60, 220], gapUs: [60, 300], seed },
    declared: { technology: 'wifi', guardInterval: guardUs * 1e-6, fftSize: 64, sampleRate: 20e6, carrierFrequency: QUAY_HZ, channelBandwidth: 20e6, spectrumSense: 'upright' },
  };
}

const CLEAN: Impairments = { snrDb: 24, channel: { profile: 'flat', dopplerHz: 0 }, phaseNoiseHz: 0, sense: 'upright', rmsDbfs: -18 };

interface Recorded { rateHz: number; durationS: number; impairments?: Partial<Impairments>; format?: CaptureSpec['recording']['format']; stated?: CaptureSpec['recording']['stated']; offsetHz?: number }

/** A recording of one of the radios by the lab's recorder: ordinary clock, cabled. */
export function recorded(signal: CaptureSpec['signal'], { rateHz, durationS, impairments, format = 'archive', stated, offsetHz = 0 }: Recorded): CaptureSpec {
  const { carrierHz } = signal.spec;
  return {
    signal, seed: 7 + Math.round(durationS * 1e6) + Math.round(rateHz / 1e3),
    receiver: { centreHz: carrierHz + offsetHz, sampleRateHz: rateHz, startS: 0.0012, durationS, clockPpm: 0.04, carrierOffsetHz: carrierHz * 0.04e-6, phase: 0.7 },
    impairments: { ...CLEAN, ...impairments },
    recording: { format, datatype: 'ci16_le', ...(stated ? { stated } : {}) },
  };
}

export const crane = (spec: NrSpec, change: Partial<Recorded> = {}) => recorded({ kind: 'nr', spec }, { rateHz: 15.36e6, durationS: 0.018, ...change });
export const yard = (spec: LteSpec, change: Partial<Recorded> = {}) => recorded({ kind: 'lte', spec }, { rateHz: spec.resourceBlocks === 25 ? 7.68e6 : 15.36e6, durationS: 0.025, ...change });
export const quay = (spec: WifiSpec, change: Partial<Recorded> = {}) => recorded({ kind: 'wifi', spec }, { rateHz: 25e6, durationS: 0.008, ...change });
