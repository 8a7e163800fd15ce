import { describe, expect, it } from 'vitest';
import { pbchPoints, type NrMib } from '#backend/generator/nr/pbch';
import { Random } from '#backend/generator/random';
import { codewordRatios, decodeBroadcast, encodeBroadcast } from '#engine/nr/broadcast-channel';
import { interleavePayload, payloadAt, readPayload, scramblePayload, type MaxBlocks } from '#engine/nr/broadcast-payload';

/** A broadcast of the project's own generator, which shares no table or function with the engine. */
function sent(random: Random, maxBlocks: MaxBlocks) {
  const mib: NrMib = {
    systemFrameNumber: random.integer(0, 1023), subCarrierSpacingCommon: random.pick(['scs15or60', 'scs30or120'] as const),
    kSsb: random.integer(0, maxBlocks === 64 ? 15 : 31), dmrsTypeAPosition: random.pick(['pos2', 'pos3'] as const), pdcchConfigSib1: random.integer(0, 255),
    cellBarred: random.chance(0.5), intraFreqReselection: random.chance(0.5), spare: 0,
  };
  const block = { cellId: random.integer(0, 1007), blockIndex: random.integer(0, maxBlocks - 1), halfFrame: random.pick([0, 1] as const), maxBlocks };
  return { mib, block, points: pbchPoints(mib, block), key: { cellId: block.cellId, v: block.blockIndex % (maxBlocks === 4 ? 4 : 8), maxBlocks } };
}

describe('broadcast channel', () => {
  for (const maxBlocks of [4, 8, 64] as const) {
    it(`of ${maxBlocks} blocks is read as sent, at −6 dB`, () => {
      const random = new Random('broadcast', maxBlocks);
      for (let trial = 0; trial < 12; trial++) {
        const { mib, block, points, key } = sent(random, maxBlocks);
        const sigma = Math.sqrt(0.5) * 10 ** (6 / 20);
        const payload = decodeBroadcast(codewordRatios(points.map((p) => p + sigma * random.normal()), key), key)!;
        expect(readPayload(payload, maxBlocks)).toEqual({
          systemFrameNumber: mib.systemFrameNumber, subCarrierSpacingCommon: mib.subCarrierSpacingCommon,
          ssbSubcarrierOffset: mib.kSsb % 16, kSsb: mib.kSsb, dmrsTypeAPosition: mib.dmrsTypeAPosition, pdcchConfigSIB1: mib.pdcchConfigSib1,
          cellBarred: mib.cellBarred ? 'barred' : 'notBarred', intraFreqReselection: mib.intraFreqReselection ? 'allowed' : 'notAllowed',
          halfFrame: block.halfFrame, blockIndexHigh: maxBlocks === 64 ? block.blockIndex >> 3 : 0,
        });
        expect(Math.max(...encodeBroadcast(payload, key).map((p, i) => Math.abs(p - points[i])))).toBeLessThan(1e-12);
      }
    });
  }

  it('of another block is foreseen from one that was read', () => {
    const random = new Random('foreseen');
    const { mib, block, points, key } = sent(random, 64);
    const payload = decodeBroadcast(codewordRatios(points, key), key)!;
    const other = { ...block, blockIndex: (block.blockIndex + 21) % 64, halfFrame: 1 as const };
    const later = { ...mib, systemFrameNumber: (mib.systemFrameNumber + 5) % 1024 };
    const foreseen = encodeBroadcast(payloadAt(payload, { ...other, systemFrameNumber: later.systemFrameNumber }), { ...key, v: other.blockIndex % 8 });
    expect(Math.max(...pbchPoints(later, other).map((p, i) => Math.abs(p - foreseen[i])))).toBeLessThan(1e-12);
  });

  it('does not pass its CRC on noise', () => {
    const random = new Random('noise');
    const key = { cellId: 77, v: 1, maxBlocks: 8 as const };
    // Eight paths against 24 bits: by chance once in two million.
    for (let trial = 0; trial < 60; trial++) expect(decodeBroadcast(Float64Array.from({ length: 512 }, () => random.normal()), key)).toBeNull();
  });
});

describe('payload', () => {
  it('leaves clear what the receiver must know first: TS 38.212 clause 7.1.2', () => {
    // Places of the half frame and of frame-number bits 2 and 1, and for 64 blocks of the index: masks known from an open stack.
    for (const [maxBlocks, clear] of [[8, [0, 6, 24]], [64, [0, 2, 3, 5, 6, 24]]] as const) {
      const seen = new Set<number>();
      for (let cell = 1; cell < 200; cell++) {
        for (const [bit2, bit1] of [[0, 0], [0, 1], [1, 0], [1, 1]]) {
          const bits = new Uint8Array(32);
          bits[6] = bit2;
          bits[24] = bit1;
          scramblePayload(bits, cell, maxBlocks).forEach((bit, i) => { if (bit !== bits[i]) seen.add(i); });
        }
      }
      expect(Array.from({ length: 32 }, (_, i) => i).filter((i) => !seen.has(i))).toEqual(clear);
    }
  });

  it('interleaves by TS 38.212 Table 7.1.1-1', () => {
    // The message's choice bit lands on 1, the half frame on 0, the frame number's highest bit on 16 and lowest on 7, the spare bit on 31.
    for (const [from, to] of [[0, 1], [28, 0], [1, 16], [27, 7], [23, 31], [29, 5], [31, 2]]) {
      const payload = Array.from({ length: 32 }, (_, i) => (i === from ? 1 : 0));
      expect(interleavePayload(payload).indexOf(1)).toBe(to);
    }
  });
});
