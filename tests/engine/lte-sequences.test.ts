import { describe, expect, it } from 'vitest';
import { goldSequence } from '#backend/generator/gold';
import { mibTransportBits, rateMatch, tailBiting } from '#backend/generator/lte/pbch';
import { bitsPerFrame, broadcastScrambling, circularBuffer, crc16, decodeBroadcast } from '#engine/lte/broadcast-code';
import { prefixSamples, slotSamples, symbolStart, symbolsPerSlot, syncSymbols } from '#engine/lte/numerology';
import { primarySequence } from '#engine/lte/primary';
import { combOffset, ReferenceSymbols } from '#engine/lte/reference';
import { secondarySequence } from '#engine/lte/secondary';
import { Random } from '#backend/generator/random';

describe('frame structure (TS 36.211 Table 6.12-1, TS 36.104 Table 5.6-1)', () => {
  // First and other prefixes and samples a slot at the usual rates, as open LTE stacks carry them.
  it.each([[128, 10, 9, 32, 960], [512, 40, 36, 128, 3840], [2048, 160, 144, 512, 15360]])('transform of %i', (size, first, other, extended, slot) => {
    expect([prefixSamples('normal', 0, size), prefixSamples('normal', 3, size), prefixSamples('extended', 0, size)]).toEqual([first, other, extended]);
    expect(slotSamples(size)).toBe(slot);
    for (const prefix of ['normal', 'extended'] as const) expect(symbolStart(prefix, symbolsPerSlot(prefix), size)).toBe(slot);
  });

  it('synchronisation symbols: FDD in the last two of slot 0, TDD in the third of slot 2 and the last of slot 1', () => {
    expect(syncSymbols('normal', 'fdd')).toEqual({ primary: 6, secondary: 5 });
    expect(syncSymbols('extended', 'fdd')).toEqual({ primary: 5, secondary: 4 });
    expect(syncSymbols('normal', 'tdd')).toEqual({ primary: 16, secondary: 13 });
    expect(syncSymbols('extended', 'tdd')).toEqual({ primary: 14, secondary: 11 });
  });
});

describe('primary synchronisation signal (TS 36.211 clause 6.11.1)', () => {
  const value = (d: Float64Array, k: number): [number, number] => [d[2 * (k + 31)], d[2 * (k + 31) + 1]];

  it('is a Zadoff-Chu sequence of length 63 with its middle left out', () => {
    for (const root of [25, 29, 34]) {
      const d = primarySequence(root);
      expect(value(d, 0)).toEqual([0, 0]);
      for (let k = -31; k <= 31; k++) {
        if (k === 0) continue;
        const n = k + 31;
        const angle = (-Math.PI * root * n * (n + 1)) / 63;
        expect(value(d, k)[0]).toBeCloseTo(Math.cos(angle), 9);
        expect(value(d, k)[1]).toBeCloseTo(Math.sin(angle), 9);
      }
    }
  });

  it('roots 29 and 34 are each other\'s conjugates, 25 is nobody\'s', () => {
    const conjugate = (d: Float64Array) => d.map((v, i) => (i % 2 === 1 ? -v : v));
    const distance = (a: Float64Array, b: Float64Array) => Math.max(...a.map((v, i) => Math.abs(v - b[i])));
    expect(distance(conjugate(primarySequence(29)), primarySequence(34))).toBeLessThan(1e-9);
    for (const root of [25, 29, 34]) expect(distance(conjugate(primarySequence(25)), primarySequence(root))).toBeGreaterThan(0.5);
  });
});

describe('secondary synchronisation signal (TS 36.211 clause 6.11.2)', () => {
  /** s̃ as open LTE stacks tabulate it. */
  const S = [1, 1, 1, 1, -1, 1, 1, -1, 1, -1, -1, 1, 1, -1, -1, -1, -1, -1, 1, 1, 1, -1, -1, 1, -1, -1, -1, 1, -1, 1, -1];
  /** m₀ and m₁ of some rows of Table 6.11.2.1-1 (from memory). */
  const ROWS: readonly [number, number, number][] = [[0, 0, 1], [29, 29, 30], [30, 0, 2], [58, 28, 30], [59, 0, 3], [87, 0, 4], [114, 0, 5], [140, 0, 6], [165, 0, 7], [167, 2, 9]];

  it('has the shifts of the table on its even places', () => {
    for (const [group, m0, m1] of ROWS) {
      // The scrambling c₀ depends on the cell within its group alone: the product of two groups' even places cancels it.
      const a = secondarySequence(3 * group, 0);
      const b = secondarySequence(0, 0);
      const c = secondarySequence(3 * group, 1);
      for (let n = 0; n < 31; n++) {
        expect(a[2 * n] * b[2 * n]).toBe(S[(n + m0) % 31] * S[n]);
        expect(c[2 * n] * b[2 * n]).toBe(S[(n + m1) % 31] * S[n]);
      }
    }
  });

  it('tells all cells and both halves of the frame apart', () => {
    const seen = new Set<string>();
    for (let cell = 0; cell < 504; cell++) for (const half of [0, 1] as const) seen.add(secondarySequence(cell, half).join(''));
    expect(seen.size).toBe(1008);
  });
});

describe('cell-specific reference symbols (TS 36.211 clause 6.10.1)', () => {
  it('lie where Figure 6.10.1.2-1 shows them for cell 0', () => {
    const at = (port: number, slot: number, l: number) => combOffset({ port, slot, l, prefix: 'normal', cellId: 0 });
    expect([at(0, 0, 0), at(0, 0, 4), at(1, 0, 0), at(1, 0, 4)]).toEqual([0, 3, 3, 0]);
    expect([at(2, 0, 1), at(2, 1, 1), at(3, 0, 1), at(3, 1, 1)]).toEqual([0, 3, 3, 0]);
    expect([at(0, 0, 1), at(2, 0, 0), at(0, 0, 3)]).toEqual([null, null, null]);
    expect(combOffset({ port: 0, slot: 0, l: 3, prefix: 'extended', cellId: 8 })).toBe(5);
  });

  it('have the values of the clause with an independent Gold sequence, whatever the carrier\'s width', () => {
    const comb = new ReferenceSymbols(271, 'normal').comb({ port: 0, slot: 7, l: 4, half: 36 })!;
    const c = goldSequence(1024 * (7 * 8 + 5) * (2 * 271 + 1) + 2 * 271 + 1, 440);
    // Six blocks: m' = m + 110 − 6, twelve values from subcarrier 0 of 72.
    expect(comb.subcarriers).toHaveLength(12);
    comb.subcarriers.forEach((k, m) => {
      expect(k < 0 ? k + 36 : k + 35).toBe(6 * m + ((3 + (271 % 6)) % 6));
      expect(comb.values[2 * m]).toBeCloseTo((1 - 2 * c[2 * (m + 104)]) / Math.SQRT2, 12);
      expect(comb.values[2 * m + 1]).toBeCloseTo((1 - 2 * c[2 * (m + 104) + 1]) / Math.SQRT2, 12);
    });
  });
});

describe('broadcast channel (TS 36.212 clause 5.3.1)', () => {
  it('has the CRC whose check value is 0x31C3 (CRC-16/XMODEM, the catalogue of parametrised CRC algorithms)', () => {
    const digits = [...'123456789'].flatMap((c) => Array.from({ length: 8 }, (_, i) => (c.charCodeAt(0) >> (7 - i)) & 1));
    expect(crc16(digits)).toBe(0x31c3);
  });

  it('fills its circular buffer with every coded bit once', () => {
    expect([...circularBuffer(40)].sort((a, b) => a - b)).toEqual(Array.from({ length: 120 }, (_, i) => i));
  });

  for (const prefix of ['normal', 'extended'] as const) {
    it(`reads what an independent coder wrote, ${prefix} prefix, from one frame of four`, () => {
      const mib = { resourceBlocks: 75, phichDuration: 'extended', phichResource: 2, systemFrameNumber: 803 } as const;
      const size = bitsPerFrame(prefix);
      const coded = rateMatch(tailBiting(mibTransportBits(mib, 2)), 4 * size);
      const scrambled = goldSequence(77, 4 * size).map((c, i) => c ^ coded[i]);
      const random = new Random(4, prefix);
      for (let place = 0; place < 4; place++) {
        const soft = new Float64Array(4 * size);
        for (let i = place * size; i < (place + 1) * size; i++) soft[i] = 1 - 2 * scrambled[i] + random.normal();
        expect(decodeBroadcast(soft, broadcastScrambling(77, prefix), 1)).toBeNull();
        const word = decodeBroadcast(soft, broadcastScrambling(77, prefix), 2)!;
        expect(word.information).toEqual({ resourceBlocks: 75, dlBandwidth: 'n75', phichDuration: 'extended', phichResource: 'one', frameNumberUpper: 803 >> 2 });
        expect([...word.transmitted]).toEqual([...scrambled]);
      }
    });
  }

  it('passes noise about once in 65,536 tries and a port number, and then without agreement', () => {
    const random = new Random(5, 'noise');
    const scrambling = broadcastScrambling(9, 'normal');
    let passed = 0, most = 0;
    for (let trial = 0; trial < 300; trial++) {
      const soft = Float64Array.from({ length: 1920 }, (_, i) => (i < 480 ? random.normal() : 0));
      const word = decodeBroadcast(soft, scrambling, 1);
      if (word) {
        passed++;
        most = Math.max(most, word.agreement);
      }
    }
    expect(passed).toBeLessThanOrEqual(1);
    expect(most).toBeLessThan(0.5);
  });
});
