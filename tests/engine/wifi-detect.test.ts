import { describe, expect, it } from 'vitest';
import { addNoise } from '#backend/generator/impairments/noise';
import { lteCarrier } from '#backend/generator/lte/carrier';
import { ownOfdm, type OwnOfdmSpec } from '#backend/generator/plain/own-ofdm';
import { Random } from '#backend/generator/random';
import { wifiBursts } from '#backend/generator/wifi/bursts';
import type { WifiSpec } from '#backend/generator/wifi/spec';
import { detectWifi, surveyWifi } from '#engine/wifi/detect';
import { capture, context, memory, noise, type Reception } from './air-capture.js';

const SPEC: WifiSpec = { carrierHz: 5.3e9, format: 'ht', mhz: 20, guardUs: 0.8, mcs: 4, clock: 1, symbols: [20, 50], gapUs: [30, 120], seed: 21 };

const OWN: OwnOfdmSpec = { carrierHz: 2.45e9, spacingHz: 312_500, fftSize: 64, prefixSamples: 16, lowest: -26, highest: 26, emptyDc: true, modulation: 'qpsk', pilotEvery: 14, bursts: { on: 30, off: 10 }, seed: 4 };

interface Case { readonly name: string; readonly spec: Partial<WifiSpec>; readonly air: Partial<Reception>; readonly prefix: string; readonly spacingHz?: number }

const CASES: readonly Case[] = [
  { name: 'HT, short guard, 30.72 Msps', spec: { guardUs: 0.4 }, air: { sampleRateHz: 30.72e6 }, prefix: 'short' },
  { name: 'HT, long guard, at its own rate, 5 dB', spec: {}, air: { snrDb: 5 }, prefix: 'normal' },
  { name: 'HT 40 MHz beside the centre, inverted', spec: { mhz: 40, guardUs: 0.4 }, air: { sampleRateHz: 61.44e6, offsetHz: -8.7e6, inverted: true }, prefix: 'short' },
  { name: 'VHT 80 MHz', spec: { format: 'vht', mhz: 80, guardUs: 0.4 }, air: { sampleRateHz: 100e6, durationS: 0.002, clockPpm: 18 }, prefix: 'short' },
  { name: 'HE, 4x training, 3.2 µs', spec: { format: 'he', guardUs: 3.2, heTraining: 4, symbols: [10, 20] }, air: { sampleRateHz: 25e6, clockPpm: -20 }, prefix: 'quadruple', spacingHz: 78_125 },
  { name: 'HE, 2x training, 1.6 µs, 40 MHz', spec: { format: 'he', guardUs: 1.6, heTraining: 2, mhz: 40, symbols: [10, 20] }, air: { sampleRateHz: 50e6, snrDb: 8 }, prefix: 'double', spacingHz: 78_125 },
  { name: 'legacy at the 10 MHz clock', spec: { format: 'legacy', clock: 0.5 }, air: { sampleRateHz: 12.5e6, durationS: 0.008 }, prefix: 'normal', spacingHz: 156_250 },
  { name: 'legacy at the 5 MHz clock, indoor channel', spec: { format: 'legacy', clock: 0.25 }, air: { sampleRateHz: 7.68e6, durationS: 0.012, profile: 'indoor' }, prefix: 'normal', spacingHz: 78_125 },
];

describe('802.11 frames from the project\'s own generator, which shares no table with the engine', () => {
  for (const { name, spec, air, prefix, spacingHz = 312_500 } of CASES) {
    it(name, () => {
      const sent = { ...SPEC, ...spec };
      const { source, trueOffsetHz } = capture(wifiBursts(sent), { sampleRateHz: 20e6, durationS: 0.004, snrDb: 15, startS: 0, ...air });
      const finding = detectWifi(context(source))!;
      const value = (key: string) => finding.air[key]?.value;
      expect(value('subcarrierSpacingHz')).toBe(spacingHz);
      expect(value('cyclicPrefix')).toBe(prefix);
      expect(value('cyclicPrefixS') as number).toBeCloseTo((sent.guardUs * 1e-6) / sent.clock, 12);
      expect(value('spectrumInverted')).toBe(air.inverted ?? false);
      // One per cent of the spacing, as the contract asks.
      expect(Math.abs((value('carrierOffsetHz') as number) - trueOffsetHz)).toBeLessThan(0.01 * spacingHz);
      expect(value('evmRandomPercent') as number).toBeGreaterThan(90);
      if (sent.format !== 'legacy') expect(finding.announced).toEqual({ channelBandwidth: sent.mhz * 1e6, guardInterval: expect.closeTo(sent.guardUs * 1e-6, 12) });
      expect(finding.confidence).toBeGreaterThan(0.99);
    });
  }

  it('measures the guard interval where the frames announce another', () => {
    const sent: WifiSpec = { ...SPEC, guardUs: 0.4, announced: { mhz: 20, guardUs: 0.8 } };
    const { source } = capture(wifiBursts(sent), { sampleRateHz: 25e6, durationS: 0.004, snrDb: 12, startS: 0 });
    const finding = detectWifi(context(source))!;
    expect(finding.air.cyclicPrefix.value).toBe('short');
    expect(finding.announced.guardInterval).toBeCloseTo(0.8e-6, 12);
    expect(finding.tried.map(({ result }) => result)).toContain('announced 0.8 µs, measured 0.4 µs');
  });

  it('error vector and signal-to-noise ratio follow EVM = 1/√SNR in white noise (20 dB: 10 %)', () => {
    const { source } = capture(wifiBursts({ ...SPEC, gapUs: [10, 20] }), { sampleRateHz: 20e6, durationS: 0.006, snrDb: 20, startS: 0 });
    const { air } = detectWifi(context(source))!;
    // Some 20 frames of 48 tones: 2 % of scatter; L-SIG has 52 of the 56 tones that the power is spread over.
    expect(Math.abs((air.evmPercent.value as number) - 10)).toBeLessThan(1.2);
    expect(Math.abs((air.snrDb.value as number) - 20)).toBeLessThan(1);
  });
});

describe('what is not 802.11 OFDM is not claimed', () => {
  it('noise', () => {
    for (const [i, rate] of [20e6, 12.5e6, 30.72e6].entries()) {
      for (let seed = 0; seed < 3; seed++) expect(surveyWifi(context(memory(noise(Math.round(0.01 * rate), 10 * i + seed), rate))).finding).toBeNull();
    }
  });

  it('LTE, wide and narrow', () => {
    for (const resourceBlocks of [6, 75] as const) {
      const emission = lteCarrier({
        carrierHz: 2.35e9, resourceBlocks, prefix: 'normal', duplex: 'tdd', cellId: 5, ports: 1, systemFrameNumber: 3, phichDuration: 'normal', phichResource: 2,
        controlSymbols: 1, load: { subframes: 0.5, blocks: 0.5, modulations: ['64qam'] }, seed: 2,
      });
      const { source } = capture(emission, { sampleRateHz: 20e6, durationS: 0.012, snrDb: 25 });
      expect(surveyWifi(context(source)).finding).toBeNull();
    }
  });

  it('another OFDM with Wi-Fi\'s own spacing and guard', () => {
    const { source } = capture(ownOfdm(OWN), { sampleRateHz: 20e6, durationS: 0.01, snrDb: 25 });
    expect(surveyWifi(context(source)).finding).toBeNull();
  });

  it('spread frames at 11 Mchip/s are named, not claimed', () => {
    // IEEE 802.11-2016 clause 15: differential BPSK, each bit spread by Barker's eleven chips.
    const rate = 22e6;
    const random = new Random(8, 'spread');
    const iq = new Float32Array(2 * Math.round(0.003 * rate));
    const chips = [1, -1, 1, 1, -1, 1, 1, 1, -1, -1, -1];
    let sign = 1;
    for (let bit = 0; bit < 400; bit++) {
      if (random.chance(0.5)) sign = -sign;
      for (let n = 0; n < 22; n++) iq[2 * (11_000 + 22 * bit + n)] = 0.2 * sign * chips[n >> 1];
    }
    addNoise(iq, 0.002, random);
    const { finding, tried } = surveyWifi(context(memory(iq, rate)));
    expect(finding).toBeNull();
    expect(tried.map(({ result }) => result).join('; ')).toMatch(/not OFDM.*11 Mchip\/s/);
  });
});
