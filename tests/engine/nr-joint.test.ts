import { describe, expect, it } from 'vitest';
import { pbchPoints, type NrMib } from '#backend/generator/nr/pbch';
import { Random } from '#backend/generator/random';
import { codewordRatios, decodeBroadcast } from '#engine/nr/broadcast-channel';
import type { MaxBlocks } from '#engine/nr/broadcast-payload';
import { patternsOf } from '#engine/nr/block-pattern';
import { blockStartS } from '#engine/nr/burst';
import { decodeJointly, type SoftBlock } from '#engine/nr/joint-decode';

interface Sent { readonly maxBlocks: MaxBlocks; readonly blockIndex: number; readonly halfFrames: readonly number[]; readonly spacingHz: number; readonly snrDb: number }

const MIB: NrMib = {
  systemFrameNumber: 804, subCarrierSpacingCommon: 'scs30or120', kSsb: 7, dmrsTypeAPosition: 'pos3', pdcchConfigSib1: 178, cellBarred: false, intraFreqReselection: true, spare: 0,
};

/** One block of several half frames from the project's own generator, which shares no function with the engine, in white noise. */
function heard({ maxBlocks, blockIndex, halfFrames, spacingHz, snrDb }: Sent, random: Random): SoftBlock[] {
  const sigma = Math.sqrt(0.5) * 10 ** (-snrDb / 20);
  return halfFrames.map((half) => {
    const halfFrame = (half % 2) as 0 | 1;
    const mib = { ...MIB, systemFrameNumber: (MIB.systemFrameNumber + (half >> 1)) % 1024 };
    const points = pbchPoints(mib, { cellId: 611, blockIndex, halfFrame, maxBlocks });
    const index = maxBlocks === 4 ? blockIndex + 4 * halfFrame : blockIndex % 8;
    const usefulS = 0.005 * half + blockStartS(patternsOf(spacingHz)[0], blockIndex);
    const block = { spacingHz, inverted: false, usefulS, referenceHz: 0, cellId: 611, reference: { index, delay: 0, statistic: 50 }, primaryStatistic: 50, secondaryStatistic: 50, grid: [] };
    return { block, ratios: Float64Array.from(points, (p) => (p + sigma * random.normal()) / sigma ** 2) };
  });
}

const odd = (count: number) => Array.from({ length: count }, (_, i) => 2 * i + 1);

describe('broadcast channel over several half frames', () => {
  const cases: readonly Sent[] = [
    { maxBlocks: 4, blockIndex: 2, halfFrames: odd(11), spacingHz: 15_000, snrDb: -15 },
    { maxBlocks: 8, blockIndex: 5, halfFrames: [0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10], spacingHz: 15_000, snrDb: -15 },
    { maxBlocks: 64, blockIndex: 3, halfFrames: odd(11).map((half) => half - 1), spacingHz: 120_000, snrDb: -15 },
  ];
  for (const sent of cases) {
    it(`is read at ${sent.snrDb} dB, where no block is by itself: ${sent.maxBlocks} blocks`, () => {
      const random = new Random('joint', sent.maxBlocks);
      const key = { cellId: 611, v: sent.blockIndex % 8, maxBlocks: sent.maxBlocks };
      for (let trial = 0; trial < 4; trial++) {
        const soft = heard(sent, random);
        for (const { ratios } of soft) expect(decodeBroadcast(codewordRatios(ratios, key), key)).toBeNull();
        const joint = decodeJointly(soft, { pattern: patternsOf(sent.spacingHz)[0], maxBlocks: sent.maxBlocks, blockIndex: sent.blockIndex })!;
        expect(joint.combined).toBe(11);
        expect(joint.information).toMatchObject({ systemFrameNumber: 804, halfFrame: sent.halfFrames[0] % 2, kSsb: 7, dmrsTypeAPosition: 'pos3', pdcchConfigSIB1: 178 });
      }
    });
  }

  it('leaves out a block that lost samples moved off its place', () => {
    const soft = heard({ ...cases[0], snrDb: -10 }, new Random('moved'));
    const moved = soft.map((each, i) => (i < 5 ? each : { ...each, block: { ...each.block, usefulS: each.block.usefulS - 20e-6 } }));
    const joint = decodeJointly(moved, { pattern: patternsOf(15_000)[0], maxBlocks: 4, blockIndex: 2 });
    expect(joint!.combined).toBe(5);
  });

  it('is not read from noise', () => {
    const random = new Random('nothing');
    const soft = heard({ ...cases[1], snrDb: -200 }, random).map((each) => ({ ...each, ratios: each.ratios.map(() => random.normal()) }));
    expect(decodeJointly(soft, { pattern: patternsOf(15_000)[0], maxBlocks: 8, blockIndex: 5 })).toBeNull();
  });
});
