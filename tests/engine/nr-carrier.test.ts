import { describe, expect, it } from 'vitest';
import { nrCarrier } from '#backend/generator/nr/carrier';
import type { NrSpec } from '#backend/generator/nr/spec';
import { carrierCandidates } from '#engine/nr/carrier-candidates';
import { usedSnrDb, TILE } from '#engine/nr/carrier-level';
import type { CarrierPlacement } from '#engine/nr/carrier-placement';
import { detectNr } from '#engine/nr/detect';
import { capture, context } from './air-capture.js';

/** What was seen of a carrier: `blocks` blocks from `lowHz` on. */
function seen(lowHz: number, blocks: number, spacingHz: number): CarrierPlacement {
  return { resourceBlocks: blocks, lowHz, highHz: lowHz + 12 * blocks * spacingHz, referenceHz: lowHz + 6 * blocks * spacingHz, edgeShare: 0.2, inTable: false, snrDb: null };
}

describe('the carrier behind the blocks that carry power', () => {
  it('is the one on its band\'s channel raster (TS 38.104 Table 5.4.2.3-1: 100 kHz in n3)', () => {
    // 1814.9 MHz with 79 blocks of 15 kHz (Table 5.3.2-1: 15 MHz), tuned 700 kHz beside it; GSCN 4545 is 1818.05 MHz.
    const centreHz = 1_815_600_000;
    const lowHz = 1_814_900_000 - 6 * 79 * 15_000 - centreHz;
    const setting = { spacingHz: 15_000, centreHz, blockHz: 1_818_050_000 + 500 - centreHz, clock: null };
    for (const blocks of [79, 78]) {
      const [best] = carrierCandidates(seen(lowHz + 500, blocks, 15_000), setting);
      expect(best.resourceBlocks).toBe(79);
      expect(best.referenceHz).toBeCloseTo(-700_000 + 500, 3);
      expect(best.weight).toBeGreaterThan(0.9);
    }
  });

  it('is left open where nothing tells one from another: half a carrier above 3 GHz, tuned beside it', () => {
    const candidates = carrierCandidates(seen(-3e6, 20, 30_000), { spacingHz: 30_000, centreHz: 3.5e9, blockHz: 0, clock: null });
    expect(candidates[0].weight).toBeLessThan(0.9);
    expect(candidates.reduce((sum, { weight }) => sum + weight, 0)).toBeCloseTo(1, 2);
  });
});

describe('signal-to-noise ratio of what is used', () => {
  it('counts neither pauses nor blocks left free', () => {
    // Tile 1 always on, tile 2 half of the time, tile 3 never: 10 against a floor of 1.
    const tiles = Array.from({ length: 100 }, (_, l) => Float64Array.of(1, 11, l % 2 === 0 ? 11 : 1, 1, 1));
    expect(usedSnrDb(tiles, { from: TILE, to: 4 * TILE, floor: 1 })).toBeCloseTo(10, 9);
    expect(usedSnrDb(tiles.slice(0, 5), { from: TILE, to: 4 * TILE, floor: 1 })).toBeNull();
  });

  it('is that of the data where the blocks are another spacing\'s and 3 dB stronger', () => {
    const spec: NrSpec = {
      carrierHz: 3_499_200_000, spacingHz: 60_000, prefix: 'normal', resourceBlocks: 24, cellId: 41,
      blocks: { blockCase: 'C', frequencyHz: 3_499_680_000, sent: [0, 1], maxBlocks: 8, periodMs: 5, halfFrame: 0, gainDb: 3 },
      mib: { systemFrameNumber: 300, subCarrierSpacingCommon: 'scs30or120', kSsb: 8, dmrsTypeAPosition: 'pos2', pdcchConfigSib1: 1, cellBarred: false, intraFreqReselection: true, spare: 0 },
      tdd: null, load: { slots: 0.6, blocks: 0.6, modulations: ['qpsk'], controlSymbols: 0, dmrs: true }, phaseCompensation: true, seed: 2,
    };
    for (const snrDb of [5, 15]) {
      const { source } = capture(nrCarrier(spec), { sampleRateHz: 23.04e6, durationS: 0.012, snrDb });
      const { air } = detectNr(context({ ...source, centreFrequencyHz: spec.carrierHz }))!;
      expect(Math.abs((air.snrDb.value as number) - snrDb)).toBeLessThan(1);
      expect(air.resourceBlocks.value).toBe(24);
    }
  });
});
