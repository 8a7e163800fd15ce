import { describe, expect, it } from 'vitest';
import { nrCarrier } from '#backend/generator/nr/carrier';
import type { NrSpec } from '#backend/generator/nr/spec';
import { detectNr } from '#engine/nr/detect';
import { capture, context } from './air-capture.js';

interface Mixed { readonly name: string; readonly spacingHz: number; readonly blockHz: number; readonly commonHz: number; readonly blockCase: 'C' | 'D' | 'E' | 'F' | 'G'; readonly carrierHz: number; readonly resourceBlocks: number; readonly rateHz: number }

/** Block and data spacings that TS 38.331 allows on one carrier: FR1, FR2-1 and FR2-2. */
const MIXED: readonly Mixed[] = [
  { name: '60 kHz beside a block of 30 kHz', spacingHz: 60_000, blockHz: 30_000, commonHz: 30_000, blockCase: 'C', carrierHz: 3_499_680_000, resourceBlocks: 24, rateHz: 30.72e6 },
  { name: '60 kHz beside a block of 120 kHz', spacingHz: 60_000, blockHz: 120_000, commonHz: 60_000, blockCase: 'D', carrierHz: 27_014_880_000, resourceBlocks: 66, rateHz: 61.44e6 },
  { name: '120 kHz beside a block of 240 kHz', spacingHz: 120_000, blockHz: 240_000, commonHz: 120_000, blockCase: 'E', carrierHz: 27_014_880_000, resourceBlocks: 66, rateHz: 122.88e6 },
  { name: '480 kHz beside a block of 120 kHz', spacingHz: 480_000, blockHz: 120_000, commonHz: 120_000, blockCase: 'D', carrierHz: 60_001_920_000, resourceBlocks: 24, rateHz: 245.76e6 },
  { name: '480 kHz', spacingHz: 480_000, blockHz: 480_000, commonHz: 480_000, blockCase: 'F', carrierHz: 60_001_920_000, resourceBlocks: 24, rateHz: 245.76e6 },
  { name: '960 kHz', spacingHz: 960_000, blockHz: 960_000, commonHz: 960_000, blockCase: 'G', carrierHz: 60_001_920_000, resourceBlocks: 24, rateHz: 491.52e6 },
];

describe('NR carriers of the project\'s own generator, block and data of every spacing', () => {
  for (const { name, spacingHz, blockHz, commonHz, blockCase, carrierHz, resourceBlocks, rateHz } of MIXED) {
    it(name, () => {
      const unitHz = blockHz <= 30_000 ? 15_000 : commonHz;
      // The block in the middle of the carrier: from point A to its lowest subcarrier, in k_SSB's units (TS 38.211 clause 7.4.3.1).
      const kSsb = ((6 * resourceBlocks * spacingHz - 120 * blockHz) / unitHz) % ((12 * commonHz) / unitHz);
      const high = carrierHz > 7.125e9;
      const spec: NrSpec = {
        carrierHz, spacingHz, prefix: 'normal', resourceBlocks, cellId: 930,
        blocks: { blockCase, frequencyHz: carrierHz, sent: [0, 2], maxBlocks: high ? 64 : 8, periodMs: 5, halfFrame: 0 },
        mib: { systemFrameNumber: 77, subCarrierSpacingCommon: commonHz === 60_000 ? 'scs15or60' : 'scs30or120', kSsb, dmrsTypeAPosition: 'pos3', pdcchConfigSib1: 60, cellBarred: false, intraFreqReselection: true, spare: 0 },
        tdd: null, load: { slots: 1, blocks: 1, modulations: ['qpsk'], controlSymbols: 1, dmrs: true }, phaseCompensation: false, seed: 3,
      };
      const { source } = capture(nrCarrier(spec), { sampleRateHz: rateHz, durationS: 0.0017, startS: 0.0045, snrDb: 12 });
      const finding = detectNr(context({ ...source, centreFrequencyHz: carrierHz }))!;
      const value = (key: string) => finding.air[key].value;
      expect(value('physicalCellId')).toBe(930);
      expect(value('ssbSubcarrierSpacingHz')).toBe(blockHz);
      expect(value('kSsb')).toBe(kSsb);
      expect(value('systemFrameNumber')).toBe(77);
      expect(value('mib')).toMatchObject({ dmrsTypeAPosition: 'pos3', pdcchConfigSIB1: 60, halfFrame: 1 });
      expect(finding.grid!.subcarrierSpacingHz).toBe(spacingHz);
      expect(value('resourceBlocks')).toBe(resourceBlocks);
      // One per cent of the data's spacing, as the contract asks.
      expect(Math.abs(value('carrierOffsetHz') as number)).toBeLessThan(0.01 * spacingHz);
    });
  }
});
