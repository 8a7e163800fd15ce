import { describe, expect, it } from 'vitest';
import { lteCarrier } from '#backend/generator/lte/carrier';
import { nrCarrier } from '#backend/generator/nr/carrier';
import type { NrSpec } from '#backend/generator/nr/spec';
import { detectNr } from '#engine/nr/detect';
import type { SampleSource } from '#engine/types';
import { capture, context, memory, noise, type Reception } from './air-capture.js';

/** 30 kHz, 24 blocks at 3.5 GHz; GSCN 7846 lies 480 kHz above the carrier's centre. */
const MID: NrSpec = {
  carrierHz: 3_499_200_000, spacingHz: 30_000, prefix: 'normal', resourceBlocks: 24, cellId: 805,
  blocks: { blockCase: 'C', frequencyHz: 3_499_680_000, sent: [0, 1, 2, 3], maxBlocks: 8, periodMs: 20, halfFrame: 0 },
  mib: { systemFrameNumber: 700, subCarrierSpacingCommon: 'scs30or120', kSsb: 8, dmrsTypeAPosition: 'pos3', pdcchConfigSib1: 97, cellBarred: false, intraFreqReselection: true, spare: 0 },
  tdd: null, load: { slots: 1, blocks: 1, modulations: ['qpsk', '16qam'], controlSymbols: 1, dmrs: true }, phaseCompensation: true, seed: 5,
};
/** 15 kHz, 25 blocks at 1.84 GHz, four blocks in the second half frame; GSCN 4606. */
const LOW: NrSpec = {
  ...MID, carrierHz: 1_842_500_000, spacingHz: 15_000, resourceBlocks: 25, cellId: 90,
  blocks: { blockCase: 'A', frequencyHz: 1_842_650_000, sent: [0, 1, 3], maxBlocks: 4, periodMs: 20, halfFrame: 1 },
  mib: { ...MID.mib, systemFrameNumber: 1022, subCarrierSpacingCommon: 'scs15or60', kSsb: 4, dmrsTypeAPosition: 'pos2' },
};
/** 120 kHz, 32 blocks at 27 GHz, blocks beyond the eighth. */
const HIGH: NrSpec = {
  ...MID, carrierHz: 27_014_400_000, spacingHz: 120_000, resourceBlocks: 32, cellId: 7,
  blocks: { blockCase: 'D', frequencyHz: 27_014_880_000, sent: [11, 12, 40], maxBlocks: 64, periodMs: 20, halfFrame: 0 },
  mib: { ...MID.mib, kSsb: 4, systemFrameNumber: 2 },
};

interface Case { readonly name: string; readonly spec: NrSpec; readonly air: Reception }

const CASES: readonly Case[] = [
  { name: '30 kHz beside the centre at 25 Msps', spec: MID, air: { sampleRateHz: 25e6, durationS: 0.006, startS: 0.019, snrDb: 12, offsetHz: -2.1e6, clockPpm: 0.4 } },
  { name: '30 kHz, inverted, uncompensated, 6 dB', spec: { ...MID, phaseCompensation: false, cellId: 3 }, air: { sampleRateHz: 15.36e6, durationS: 0.006, startS: 0.0195, snrDb: 6, inverted: true, clockPpm: -0.3 } },
  { name: '15 kHz with four blocks, 0 dB', spec: LOW, air: { sampleRateHz: 7.68e6, durationS: 0.006, startS: 0.0247, snrDb: 0, clockPpm: 1 } },
  { name: '15 kHz through the vehicular channel at three quarters of a native rate', spec: { ...LOW, cellId: 1007, phaseCompensation: false }, air: { sampleRateHz: 5.76e6, durationS: 0.006, startS: 0.0247, snrDb: 15, profile: 'vehicular', clockPpm: -2 } },
  { name: '120 kHz', spec: HIGH, air: { sampleRateHz: 61.44e6, durationS: 0.0045, startS: 0.02, snrDb: 10, clockPpm: 0.1 } },
];

/** The centre is stated; the offset is where the RF reference stands above it. */
function tuned(source: SampleSource, spec: NrSpec, air: Reception): SampleSource {
  return { ...source, centreFrequencyHz: spec.carrierHz - (air.offsetHz ?? 0) };
}

describe('NR downlink from the project\'s own generator, which shares no table with the engine', () => {
  for (const { name, spec, air } of CASES) {
    it(name, () => {
      const { source, trueOffsetHz } = capture(nrCarrier(spec), air);
      const finding = detectNr(context(tuned(source, spec, air)))!;
      const value = (key: string) => finding.air[key].value;
      const { mib, blocks } = spec;
      expect(value('physicalCellId')).toBe(spec.cellId);
      expect(value('ssbSubcarrierSpacingHz')).toBe(spec.spacingHz);
      expect(value('spectrumInverted')).toBe(air.inverted ?? false);
      expect(value('kSsb')).toBe(mib.kSsb);
      expect(value('mib')).toMatchObject({
        dmrsTypeAPosition: mib.dmrsTypeAPosition, pdcchConfigSIB1: mib.pdcchConfigSib1, cellBarred: 'notBarred', intraFreqReselection: 'allowed',
        halfFrame: blocks!.halfFrame, subCarrierSpacingCommon: mib.subCarrierSpacingCommon, ssbIndex: blocks!.sent[0],
      });
      // Each capture starts within the frame of 10·(2 or 3) ms after the transmitter's time zero.
      expect(value('systemFrameNumber')).toBe((mib.systemFrameNumber + 2) % 1024);
      expect(value('phaseCompensation')).toBe(spec.phaseCompensation ? 'present' : 'absent');
      // One per cent of the spacing, as the contract asks.
      expect(Math.abs((value('ssbFrequencyHz') as number) - (blocks!.frequencyHz + trueOffsetHz - (air.offsetHz ?? 0)))).toBeLessThan(0.01 * spec.spacingHz);
      const miss = (value('carrierOffsetHz') as number) - trueOffsetHz;
      const fractional = finding.air.carrierOffsetHz.method!.startsWith('fractional');
      expect(Math.abs(fractional ? miss - Math.round(miss / spec.spacingHz) * spec.spacingHz : miss)).toBeLessThan(0.01 * spec.spacingHz);
      expect(finding.grid!.subcarrierSpacingHz).toBe(spec.spacingHz);
      // Subframes start at whole milliseconds of the transmitter's time.
      const subframes = ((air.startS ?? 0) + finding.grid!.startSample / source.sampleRateHz) * 1000;
      expect(Math.abs(subframes - Math.round(subframes))).toBeLessThan(1e-3);
    });
  }

  it('places the carrier by the edges of its power', () => {
    const { source } = capture(nrCarrier(MID), { sampleRateHz: 30.72e6, durationS: 0.005, startS: 0.0195, snrDb: 15 });
    const { air } = detectNr(context({ ...source, centreFrequencyHz: MID.carrierHz }))!;
    expect(air.resourceBlocks.value).toBe(24);
    expect(Math.abs(air.carrierOffsetHz.value as number)).toBeLessThan(300);
  });

  it('gives no absolute frequency where the capture states no centre', () => {
    const { source } = capture(nrCarrier(LOW), { sampleRateHz: 7.68e6, durationS: 0.006, startS: 0.0247, snrDb: 10 });
    const { air } = detectNr(context(source))!;
    expect(air.ssbFrequencyHz.value).toBeNull();
    expect(air.ssbFrequencyHz.reason).toMatch(/centre/);
    expect(Math.abs((air.ssbOffsetHz.value as number) - 150_000)).toBeLessThan(150);
  });

  it('EVM and signal-to-noise ratio follow EVM = 1/√SNR in white noise (20 dB: 10 %)', () => {
    const { source } = capture(nrCarrier(MID), { sampleRateHz: 15.36e6, durationS: 0.006, startS: 0.0195, snrDb: 20 });
    const { air } = detectNr(context({ ...source, centreFrequencyHz: MID.carrierHz }))!;
    // 4 blocks, 2,300 degrees of freedom: 1.5 % of scatter; the rest is for the generator's and the engine's filters.
    expect(air.evmPercent.value as number).toBeGreaterThan(9);
    expect(air.evmPercent.value as number).toBeLessThan(11);
    expect(Math.abs((air.snrDb.value as number) - 20)).toBeLessThan(0.8);
  });

  it('measures a fast transmitter clock as positive', () => {
    const { source } = capture(nrCarrier(MID), { sampleRateHz: 15.36e6, durationS: 0.045, startS: 0.0195, snrDb: 20, clockPpm: 4 });
    const { air } = detectNr(context({ ...source, centreFrequencyHz: MID.carrierHz }))!;
    expect(Math.abs((air.sampleClockOffsetPpm.value as number) - 4)).toBeLessThan(0.3);
  });

  it('cannot tell the compensation where the carrier is a multiple of 1.92 MHz·2^µ, and says so (TS 38.211 clause 5.4)', () => {
    // 911 · 3.84 MHz; GSCN 7846 is 1.44 MHz above.
    const spec = { ...MID, carrierHz: 3_498_240_000, mib: { ...MID.mib, kSsb: 12 }, resourceBlocks: 51 };
    const { source } = capture(nrCarrier(spec), { sampleRateHz: 30.72e6, durationS: 0.005, startS: 0.0195, snrDb: 20 });
    const { air } = detectNr(context({ ...source, centreFrequencyHz: spec.carrierHz }))!;
    expect(air.phaseCompensation.value).toBeNull();
    expect(air.phaseCompensation.reason).toMatch(/apart|equally/);
  });
});

describe('what is no NR', () => {
  it('noise gives no cell', () => {
    for (let seed = 1; seed <= 8; seed++) {
      const source = memory(noise(40_000, seed), 7.68e6);
      expect(detectNr(context({ ...source, centreFrequencyHz: 2e9 }))).toBeNull();
    }
  });

  it('LTE gives no cell', () => {
    const spec = { carrierHz: 1.8425e9, resourceBlocks: 25, prefix: 'normal', duplex: 'fdd', cellId: 301, ports: 2, systemFrameNumber: 7, phichDuration: 'normal', phichResource: 1, controlSymbols: 2, load: { subframes: 1, blocks: 1, modulations: ['qpsk'] }, seed: 3 } as const;
    const { source } = capture(lteCarrier(spec), { sampleRateHz: 7.68e6, durationS: 0.0105, snrDb: 25 });
    expect(detectNr(context({ ...source, centreFrequencyHz: 1.8425e9 }))).toBeNull();
  });

  it('an empty or very short capture gives nothing', () => {
    for (const samples of [0, 1, 500]) expect(detectNr(context(memory(noise(samples, 1), 7.68e6)))).toBeNull();
  });
});
