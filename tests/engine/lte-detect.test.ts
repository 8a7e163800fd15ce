import { describe, expect, it } from 'vitest';
import { lteCarrier } from '#backend/generator/lte/carrier';
import type { LteSpec } from '#backend/generator/lte/spec';
import { nrCarrier } from '#backend/generator/nr/carrier';
import type { NrSpec } from '#backend/generator/nr/spec';
import { surveyLte } from '#engine/lte/detect';
import { searchPrefix } from '#engine/lte/prefix-search';
import { capture, context, memory, noise, type Reception } from './air-capture.js';

const SPEC: LteSpec = {
  carrierHz: 1.8425e9, resourceBlocks: 25, prefix: 'normal', duplex: 'fdd', cellId: 301, ports: 2, systemFrameNumber: 1021,
  phichDuration: 'normal', phichResource: 1, controlSymbols: 2, load: { subframes: 0.8, blocks: 0.6, modulations: ['qpsk', '16qam'] }, seed: 11,
};

const NR: NrSpec = {
  carrierHz: 1.8425e9, spacingHz: 15_000, prefix: 'normal', resourceBlocks: 25, cellId: 90,
  blocks: { blockCase: 'A', frequencyHz: 1_842_650_000, sent: [0, 1], maxBlocks: 4, periodMs: 10, halfFrame: 0 },
  mib: { systemFrameNumber: 4, subCarrierSpacingCommon: 'scs15or60', kSsb: 10, dmrsTypeAPosition: 'pos2', pdcchConfigSib1: 6, cellBarred: false, intraFreqReselection: true, spare: 0 },
  tdd: null, load: { slots: 1, blocks: 1, modulations: ['16qam'], controlSymbols: 0, dmrs: false }, phaseCompensation: true, seed: 1,
};

interface Case { readonly name: string; readonly spec: Partial<LteSpec>; readonly air: Reception }

const CASES: readonly Case[] = [
  { name: 'FDD, normal prefix, native rate', spec: {}, air: { sampleRateHz: 7.68e6, durationS: 0.0215, snrDb: 20 } },
  { name: 'TDD, extended prefix, three-quarter rate, clock 15 ppm slow', spec: { duplex: 'tdd', prefix: 'extended', cellId: 57 }, air: { sampleRateHz: 5.76e6, durationS: 0.0215, snrDb: 10, clockPpm: -15 } },
  { name: '0 dB, six blocks, four broadcasts', spec: { resourceBlocks: 6, ports: 1, cellId: 0 }, air: { sampleRateHz: 1.92e6, durationS: 0.0435, snrDb: 0 } },
  { name: 'beside the centre at an odd rate, inverted', spec: { resourceBlocks: 15, cellId: 344 }, air: { sampleRateHz: 10e6, durationS: 0.0215, snrDb: 8, offsetHz: 2.313e6, inverted: true, clockPpm: 7 } },
  { name: 'root 25 inverted', spec: { resourceBlocks: 6, cellId: 303, duplex: 'tdd' }, air: { sampleRateHz: 3.84e6, durationS: 0.0215, snrDb: 15, inverted: true } },
  { name: 'vehicular channel, 50 blocks, little load', spec: { resourceBlocks: 50, cellId: 503, load: { subframes: 0.1, blocks: 0.2, modulations: ['qpsk'] } }, air: { sampleRateHz: 11.52e6, durationS: 0.0215, snrDb: 15, profile: 'vehicular', dopplerHz: 30 } },
];

describe('LTE downlink from the project\'s own generator, which shares no table with the engine', () => {
  for (const { name, spec, air } of CASES) {
    it(name, () => {
      const sent = { ...SPEC, ...spec };
      const { source, trueOffsetHz } = capture(lteCarrier(sent), air);
      const finding = surveyLte(context(source)).finding!;
      const value = (key: string) => finding.air[key]?.value;
      expect(value('physicalCellId')).toBe(sent.cellId);
      expect(value('cyclicPrefix')).toBe(sent.prefix);
      expect(value('duplexMode')).toBe(sent.duplex);
      expect(value('spectrumInverted')).toBe(air.inverted ?? false);
      expect(value('resourceBlocks')).toBe(sent.resourceBlocks);
      expect(value('antennaPorts')).toBe(sent.ports);
      // One per cent of the spacing, as the contract asks.
      expect(Math.abs((value('carrierOffsetHz') as number) - trueOffsetHz)).toBeLessThan(150);
      expect(value('mib')).toMatchObject({ resourceBlocks: sent.resourceBlocks, dlBandwidth: `n${sent.resourceBlocks}`, phichDuration: 'normal', phichResource: 'half' });
      const frames = ((value('systemFrameNumber') as number) - sent.systemFrameNumber + 1024) % 1024;
      expect(frames).toBeLessThanOrEqual(3);
      expect(finding.confidence).toBeGreaterThan(0.99);
      expect(value('evmRandomPercent')).toBeGreaterThan(80);
    });
  }

  it('error vector and signal-to-noise ratio follow EVM = 1/√SNR in white noise (20 dB: 10 %)', () => {
    const spec = { ...SPEC, ports: 1 as const, load: { subframes: 1, blocks: 1, modulations: ['qpsk' as const] } };
    const { source } = capture(lteCarrier(spec), { sampleRateHz: 7.68e6, durationS: 0.0215, snrDb: 20 });
    const { air } = surveyLte(context(source)).finding!;
    // Some 20,000 reference symbols: 1 % of scatter; the rest is the generator's filter and unused elements.
    expect(air.evmPercent.value as number).toBeGreaterThan(9);
    expect(air.evmPercent.value as number).toBeLessThan(11);
    expect(Math.abs((air.snrDb.value as number) - 20)).toBeLessThan(1);
  });

  it('sees the transmitter\'s clock in a wide carrier', () => {
    const { source } = capture(lteCarrier({ ...SPEC, resourceBlocks: 50, ports: 1 }), { sampleRateHz: 15.36e6, durationS: 0.0215, snrDb: 25, clockPpm: 12 });
    const clock = surveyLte(context(source)).finding!.air.sampleClockOffsetPpm;
    expect(Math.abs((clock.value as number) - 12)).toBeLessThan(3 * (clock.sigmaPpm as number) + 0.1);
  });
});

describe('what is not LTE is not claimed', () => {
  it('noise, at rates native and not', () => {
    for (const [i, rate] of [1.92e6, 5.76e6, 7.68e6, 10e6].entries()) {
      for (let seed = 0; seed < 4; seed++) expect(surveyLte(context(memory(noise(Math.round(rate * 0.022), 100 * i + seed), rate))).finding).toBeNull();
    }
  });

  it('NR at 15 kHz, which has the same symbols', () => {
    const emission = nrCarrier(NR);
    const { source } = capture(emission, { sampleRateHz: 7.68e6, durationS: 0.022, snrDb: 20 });
    const survey = surveyLte(context(source));
    expect(survey.finding).toBeNull();
    expect(survey.tried.map(({ what }) => what)).toContain('LTE, normal prefix');
  });
});

describe('offset from the cyclic prefix', () => {
  it('scatters as the argument of a correlation does: σ² = (1/ρ² − 1)/(2N) (Kay, Estimation Theory, 1993)', () => {
    const emission = lteCarrier({ ...SPEC, resourceBlocks: 6, ports: 1, load: { subframes: 1, blocks: 1, modulations: ['qpsk'] } });
    const errors: number[] = [];
    let coherence = 0;
    for (let seed = 0; seed < 40; seed++) {
      const { source } = capture(emission, { sampleRateHz: 1.92e6, durationS: 0.0105, snrDb: 3, seed });
      const window = { iq: source.read(0, source.samples), size: 128, startSample: 0, shiftHz: 0, passHz: 960e3 };
      const [fit] = searchPrefix(window);
      errors.push(fit.fractionHz);
      coherence += fit.coherence / 40;
    }
    const variance = errors.reduce((sum, e) => sum + e * e, 0) / errors.length;
    const pairs = 20 * 7 * 9;
    const theory = ((1 / coherence ** 2 - 1) / (2 * pairs)) * (15_000 / (2 * Math.PI)) ** 2;
    // 40 trials leave 23 % of scatter in a variance; the noise is white only over the band's 56 % in use.
    expect(variance / theory).toBeGreaterThan(0.4);
    expect(variance / theory).toBeLessThan(2);
  });
});
