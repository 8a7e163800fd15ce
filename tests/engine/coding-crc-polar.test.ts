import { describe, expect, it } from 'vitest';
import { CRC24C, crcRemainder } from '#engine/coding/crc';
import { inputInterleaver, polarCode, polarEncode, subBlockOrder } from '#engine/coding/polar';
import { polarListDecode } from '#engine/coding/polar-list';

/** Numbers that repeat from run to run: a 32-bit linear congruence (Numerical Recipes' constants). */
function draws(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

const bitsOf = (value: number, width: number) => Array.from({ length: width }, (_, i) => (value >>> (width - 1 - i)) & 1);

describe('CRC24C', () => {
  // Check words computed from the polynomial of TS 38.212 clause 5.1; 0x12345678 also by an independent open library.
  for (const [input, word] of [[0x00000000, 0x000000], [0x00000001, 0xb2b117], [0x80000000, 0xe318c2], [0xffffffff, 0xd38071], [0x12345678, 0x321556]]) {
    it(`of 0x${input.toString(16)} is 0x${word.toString(16)}`, () => {
      const bits = bitsOf(input, 32);
      expect(crcRemainder(bits, CRC24C)).toBe(word);
      expect(crcRemainder([...bits, ...bitsOf(word, 24)], CRC24C)).toBe(0);
    });
  }
});

describe('polar code', () => {
  it('has the generator matrix of TS 38.212 clause 5.3.1.2: the Kronecker power of [1 0; 1 1]', () => {
    const kernel = [[1, 0], [1, 1]];
    let matrix = [[1]];
    for (let n = 0; n < 6; n++) matrix = kernel.flatMap((k) => matrix.map((row) => k.flatMap((bit) => row.map((entry) => entry & bit))));
    const code = polarCode(64, 64);
    for (let row = 0; row < 64; row++) {
      const unit = Array.from({ length: 64 }, (_, i) => (i === row ? 1 : 0));
      expect([...polarEncode(code, unit)]).toEqual(matrix[row]);
    }
  });

  it('sends 56 bits over the most reliable sub-channels of 512', () => {
    const { information, frozen } = polarCode(512, 56);
    expect(information).toHaveLength(56);
    expect(frozen.reduce((sum, f) => sum + f, 0)).toBe(456);
    // The end of TS 38.212 Table 5.3.1.2-1 without its entries from 512 on; the best 56 of them are sent.
    const tail = [
      438, 251, 462, 442, 441, 469, 247, 367, 253, 375, 444, 470, 483, 415, 485, 473, 474, 254, 379, 431, 489, 486, 476, 439, 490,
      463, 381, 497, 492, 443, 382, 498, 445, 471, 500, 446, 475, 487, 504, 255, 477, 491, 478, 383, 493, 499, 502, 494, 501, 447,
      505, 506, 479, 508, 495, 503, 507, 509, 510, 511,
    ];
    expect(information).toEqual(tail.slice(-56).sort((x, y) => x - y));
  });

  it('interleaves 56 bits by the tail of the table of 164', () => {
    // TS 38.212 Table 5.3.1.1-1: the entries from 108 on, less 108, begin 108 110 111 113 115 118 119 120 122 123 126 127.
    const order = inputInterleaver(56);
    expect(order.slice(0, 12)).toEqual([0, 2, 3, 5, 7, 10, 11, 12, 14, 15, 18, 19]);
    expect([...order].sort((a, b) => a - b)).toEqual(Array.from({ length: 56 }, (_, i) => i));
  });

  it('orders 32 sub-blocks by TS 38.212 Table 5.4.1.1-1', () => {
    const order = subBlockOrder(512);
    // P(3) = 4, P(9) = 16, P(31) = 31, in blocks of 16.
    expect(order[3 * 16]).toBe(4 * 16);
    expect(order[9 * 16 + 5]).toBe(16 * 16 + 5);
    expect(order[511]).toBe(511);
    expect([...order].sort((a, b) => a - b)).toEqual(Array.from({ length: 512 }, (_, i) => i));
  });
});

describe('list decoding', () => {
  it('returns the message of a clean codeword first', () => {
    const code = polarCode(128, 40);
    const draw = draws(3);
    for (let trial = 0; trial < 20; trial++) {
      const message = Array.from({ length: 40 }, () => (draw() < 0.5 ? 0 : 1));
      const word = polarEncode(code, message);
      const [best] = polarListDecode(code, Array.from(word, (bit) => 4 * (1 - 2 * bit)), 8);
      expect([...best.message]).toEqual(message);
      expect(best.metric).toBe(0);
    }
  });

  it('finds the likeliest codeword of a small code, as an exhaustive search does', () => {
    // With a list as long as the code book no path is ever dropped: maximum likelihood.
    const code = polarCode(16, 5);
    const draw = draws(11);
    for (let trial = 0; trial < 50; trial++) {
      const llr = Array.from({ length: 16 }, () => 6 * (draw() - 0.5));
      const agreement = Array.from({ length: 32 }, (_, m) => {
        const word = polarEncode(code, bitsOf(m, 5));
        return llr.reduce((sum, value, i) => sum + (word[i] ? -value : value), 0);
      });
      const likeliest = agreement.indexOf(Math.max(...agreement));
      const [best] = polarListDecode(code, llr, 32);
      expect([...best.message]).toEqual(bitsOf(likeliest, 5));
    }
  });

  it('carries 56 bits in 512 through noise of −3 dB per coded bit', () => {
    // Rate 0.109 needs about −8.6 dB by the Shannon limit of the binary-input channel; a list of 8 loses some 2 dB.
    const code = polarCode(512, 56);
    const draw = draws(5);
    const gauss = () => Math.sqrt(-2 * Math.log(1 - draw())) * Math.cos(2 * Math.PI * draw());
    const sigma = 10 ** (3 / 20);
    let right = 0;
    for (let trial = 0; trial < 40; trial++) {
      const message = Array.from({ length: 56 }, () => (draw() < 0.5 ? 0 : 1));
      const word = polarEncode(code, message);
      const llr = Array.from(word, (bit) => (2 * (1 - 2 * bit + sigma * gauss())) / sigma ** 2);
      if (polarListDecode(code, llr, 8).some((path) => path.message.every((bit, i) => bit === message[i]))) right++;
    }
    expect(right).toBeGreaterThanOrEqual(39);
  });
});
