import { crc32 } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { goldBits } from '#engine/coding/gold';
import { broadcastLayout } from '#engine/nr/block-layout';
import { BLOCK_PATTERNS } from '#engine/nr/block-pattern';
import { prefixTs, usefulStartTs, usefulTs } from '#engine/nr/numerology';
import { globalRasterWithin, nearestOnGlobalRaster, syncRasterDistanceHz, syncRasterWithin } from '#engine/nr/raster';
import { broadcastReference, primarySequence, secondarySequence } from '#engine/nr/sequences';

const chips = (sequence: ArrayLike<number>) => Array.from(sequence, (value) => (value > 0 ? '0' : '1')).join('');
const checksum = (text: string) => crc32(text).toString(16).padStart(8, '0');

describe('synchronisation sequences', () => {
  // First 32 chips and the CRC32 of all 127 as 0/1 text; all equal to an independent open toolbox of TS 38.211.
  const primaries = [
    ['01101111001110010101100110000011', 'd3747e01'],
    ['00011001000100000010010011010011', '9f2e9a9a'],
    ['11111100011101100010100101111101', '62d75c94'],
  ];
  primaries.forEach(([start, sum], nId2) => {
    it(`primary ${nId2}`, () => {
      const text = chips(primarySequence(nId2));
      expect(text.slice(0, 32)).toBe(start);
      expect(checksum(text)).toBe(sum);
    });
  });
  const secondaries: [number, string, string][] = [
    [0, '00000000001000001000101010011000', '39bcf51b'],
    [1, '10100101110101011100100001000110', 'f6e65408'],
    [500, '01100010001111000111011100001001', 'd7736106'],
    [1007, '10111100100101101111110001010110', 'd7a823c1'],
  ];
  for (const [cell, start, sum] of secondaries) {
    it(`secondary of cell ${cell}`, () => {
      const text = chips(secondarySequence(cell));
      expect(text.slice(0, 32)).toBe(start);
      expect(checksum(text)).toBe(sum);
    });
  }
  it('autocorrelates to −1 off the peak, as every m-sequence does', () => {
    const x = primarySequence(1);
    for (let shift = 1; shift < 127; shift++) {
      expect(x.reduce((sum, value, n) => sum + value * x[(n + shift) % 127], 0)).toBe(-1);
    }
  });
});

describe('Gold sequence of TS 38.211 clause 5.2.1', () => {
  // Equal to an independent open toolbox.
  const rows: [number, string][] = [
    [0, '00000010000110100001001001111010'],
    [1, '00000010100000110000001101110100'],
    [500, '00011111101101001001100001000011'],
    [1007, '01001100111010110001001100100101'],
    [2112, '00001110111001101110110101111000'],
  ];
  for (const [cInit, bits] of rows) it(`from ${cInit}`, () => expect([...goldBits(cInit, 32)].join('')).toBe(bits));
});

describe('broadcast channel', () => {
  it('holds 432 data and 144 reference elements for every cell (TS 38.211 Table 7.4.3.1-1)', () => {
    for (let cell = 0; cell < 4; cell++) {
      const { data, reference } = broadcastLayout(cell);
      expect([data.length, reference.length]).toEqual([432, 144]);
      expect(reference.every(({ subcarrier }) => subcarrier % 4 === cell)).toBe(true);
    }
  });
  it('seeds its reference signal by clause 7.4.1.4.1', () => {
    // c_init of N_ID 0, ī 0 is 2112; of N_ID 1007, ī 7 it is 4129283.
    for (const [cell, index, cInit] of [[0, 0, 2112], [500, 0, 258112], [1007, 7, 4129283]]) {
      const expected = Array.from(goldBits(cInit, 288), (bit) => (bit ? -1 : 1) / Math.SQRT2);
      broadcastReference(cell, index).forEach((value, i) => expect(value).toBeCloseTo(expected[i], 12));
    }
  });
});

describe('times', () => {
  it('fill a subframe exactly in every numerology (TS 38.211 clause 5.3.1)', () => {
    for (let mu = 0; mu <= 6; mu++) {
      expect(usefulStartTs(mu, 14 * 2 ** mu) - prefixTs(mu, 0)).toBeCloseTo(30720, 9);
      expect(usefulStartTs(mu, 7 * 2 ** mu) - prefixTs(mu, 0)).toBeCloseTo(15360, 9);
    }
    expect(usefulStartTs(2, 48, true) - prefixTs(2, 0, true)).toBeCloseTo(30720, 9);
  });
  it('give the prefixes of 30.72 Msps that TS 38.211 implies: 160 and 144, 88 and 72', () => {
    expect([prefixTs(0, 0), prefixTs(0, 1), prefixTs(0, 7)]).toEqual([160, 144, 160]);
    expect([prefixTs(1, 0), prefixTs(1, 7), prefixTs(1, 14)]).toEqual([88, 72, 88]);
    expect(usefulTs(2)).toBe(512);
  });
  it('start the candidate blocks where TS 38.213 clause 4.1 says', () => {
    const starts = Object.fromEntries(BLOCK_PATTERNS.map((p) => [p.name, p.starts]));
    expect(starts.A).toEqual([2, 8, 16, 22, 30, 36, 44, 50]);
    expect(starts.B).toEqual([4, 8, 16, 20, 32, 36, 44, 48]);
    expect(starts.C).toEqual(starts.A);
    expect([starts.D.length, starts.D[63], starts.D[16]]).toEqual([64, 524, 144]);
    expect([starts.E.length, starts.E[63], starts.E[32]]).toEqual([64, 492, 288]);
    expect([starts.F.length, starts.F[63]]).toEqual([64, 443]);
  });
});

describe('rasters', () => {
  it('know the synchronisation raster (TS 38.104 Table 5.4.3.1-1)', () => {
    // GSCN 5279, 7884, 22257 and 6252.
    for (const hz of [2112.05e6, 3554.4e6, 24267.36e6, 2500.95e6]) expect(syncRasterWithin(hz - 40e3, hz + 40e3)).toEqual([hz]);
    // GSCN 5279 to 5281 are three of one cluster, 100 kHz apart; the next cluster is 1.2 MHz on.
    expect(syncRasterWithin(2111.9e6, 2112.4e6)).toEqual([2112.05e6, 2112.15e6, 2112.25e6]);
    expect(syncRasterWithin(3554.41e6, 3555.83e6)).toEqual([]);
    expect(syncRasterDistanceHz(3554.4e6 + 4321)).toBeCloseTo(4321, 3);
    expect(syncRasterDistanceHz(2112.05e6 + 60e3)).toBeCloseTo(40e3, 3);
  });
  it('know the global raster (Table 5.4.2.1-1)', () => {
    expect(nearestOnGlobalRaster(3489.42e6 + 3000)).toBe(3489.42e6);
    expect(nearestOnGlobalRaster(2112.05e6 - 1000)).toBe(2112.05e6);
    // Steps of 5, 15 and 60 kHz.
    expect(globalRasterWithin(2112.05e6, 2112.06e6)).toEqual([2112.05e6, 2112.055e6, 2112.06e6]);
    expect(globalRasterWithin(3489.42e6 - 1, 3489.45e6 + 1)).toEqual([3489.42e6, 3489.435e6, 3489.45e6]);
    expect(globalRasterWithin(26500.02e6 - 1, 26500.08e6 + 1)).toEqual([26500.02e6, 26500.08e6]);
  });
});
