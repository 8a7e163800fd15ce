import { crc32 } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { bitsOf, crcBits } from '#backend/generator/crc';
import { goldSequence } from '#backend/generator/gold';
import { polarEncode } from '#backend/generator/nr/polar';
import { SUB_BLOCK_INTERLEAVER } from '#backend/generator/nr/polar-tables';
import { nrPss, nrSss, pbchReference } from '#backend/generator/nr/sync-signals';

const chips = (values: Int8Array) => [...values].map((v) => (v > 0 ? '0' : '1')).join('');
const checksum = (text: string) => crc32(text).toString(16).padStart(8, '0');

describe('sequences of TS 38.211 against an independent open implementation (py3gpp, commit e440590)', () => {
  it.each([[0, 'd3747e01'], [1, '9f2e9a9a'], [2, '62d75c94']])('primary synchronisation signal of %i', (id, expected) => {
    expect(checksum(chips(nrPss(id)))).toBe(expected);
  });

  it.each([[0, '39bcf51b'], [1, 'f6e65408'], [500, 'd7736106'], [1007, 'd7a823c1']])('secondary synchronisation signal of %i', (id, expected) => {
    expect(checksum(chips(nrSss(id)))).toBe(expected);
  });

  it.each([
    [0, '00000010000110100001001001111010'],
    [1, '00000010100000110000001101110100'],
    [500, '00011111101101001001100001000011'],
    [1007, '01001100111010110001001100100101'],
    [2112, '00001110111001101110110101111000'],
  ])('pseudo-random sequence from %i', (start, expected) => {
    expect(goldSequence(start, 32).join('')).toBe(expected);
  });

  it('starts the broadcast reference of cell 0, block 0 from 2112', () => {
    const bits = [...goldSequence(2112, 288)];
    expect([...pbchReference({ cellId: 0, blockIndex: 0, halfFrame: 0, maxBlocks: 8 })].map((v) => (v < 0 ? 1 : 0))).toEqual(bits);
  });
});

describe('coding of TS 38.212', () => {
  // Words computed by hand from the polynomial of clause 5.1; 0x12345678 also by py3gpp.
  it.each([[0, 0], [1, 0xb2b117], [0x80000000, 0xe318c2], [0xffffffff, 0xd38071], [0x12345678, 0x321556]])('CRC24C of %i', (word, expected) => {
    expect([...crcBits(bitsOf(word, 32), 0xb2b117, 24)]).toEqual(bitsOf(expected, 24));
  });

  it('gives the polar code word that py3gpp (commit 0ae28c0) tabulates for 10 zeros and 90 ones', () => {
    const expected = '5c62cd729e1e11ef4b1c4c65e009f99187d08f5910f906916f51f1b1911111104d73dc638f0f00fe5a0d5d74f118e88096c19e4801e817807e40e0a080000001';
    const rate = polarEncode(Uint8Array.from({ length: 100 }, (_, i) => (i < 10 ? 0 : 1)), 512);
    const word = new Uint8Array(512);
    for (let n = 0; n < 512; n++) word[SUB_BLOCK_INTERLEAVER[n >> 4] * 16 + (n % 16)] = rate[n];
    const hex = Array.from({ length: 128 }, (_, i) => Number.parseInt(word.slice(4 * i, 4 * i + 4).join(''), 2).toString(16)).join('');
    expect(hex).toBe(expected);
  });

  it('repeats the first 352 coded bits to reach 864', () => {
    const word = polarEncode(Uint8Array.from({ length: 56 }, (_, i) => (i * 7) % 3 === 0 ? 1 : 0), 864);
    expect(word.slice(512)).toEqual(word.slice(0, 352));
  });
});
