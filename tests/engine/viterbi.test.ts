import { describe, expect, it } from 'vitest';
import { Random } from '#backend/generator/random';
import { decodeFromZero, decodeTailBiting, encode, LTE_CODE, tailState, WIFI_CODE, wordMetric } from '#engine/coding/viterbi';

const bits = (text: string) => [...text.replaceAll(' ', '')].map(Number);
const word = (value: number, length: number) => Uint8Array.from({ length }, (_, i) => (value >> i) & 1);
/** Soft values of a coded word at an amplitude of 1 and the given noise. */
const noisy = (coded: Uint8Array, sigma: number, random: Random) => Float64Array.from(coded, (bit) => 1 - 2 * bit + sigma * random.normal());

/** The code by its definition: each output the sum of the taps of its octal generator over the last seven bits. */
function byDefinition(input: ArrayLike<number>, octal: readonly string[]): number[] {
  return Array.from({ length: input.length }, (_, i) => octal.map((g) => {
    const taps = [...Number.parseInt(g, 8).toString(2).padStart(7, '0')].map(Number);
    return taps.reduce((sum, tap, back) => (sum + tap * (input[i - back] ?? 0)) % 2, 0);
  })).flat();
}

describe('convolutional code', () => {
  it('codes the SIGNAL field of the annex example of IEEE 802.11-2016 (36 Mb/s, 100 octets, Table I-8; from memory)', () => {
    const coded = encode(bits('1011 0 001001100000 0 000000'), WIFI_CODE);
    expect([...coded]).toEqual(bits('1101 0001 1010 0001 0000 0010 0011 1110 0111 0000 0000 0000'));
  });

  it('equals its definition for both codes', () => {
    const random = new Random(1, 'code');
    const input = Uint8Array.from({ length: 60 }, () => random.bits() & 1);
    expect([...encode(input, WIFI_CODE)]).toEqual(byDefinition(input, ['133', '171']));
    expect([...encode(input, LTE_CODE)]).toEqual(byDefinition(input, ['133', '171', '165']));
  });

  it('bites its tail: the state after the word is the one before it', () => {
    const input = bits('1 0 1 1 0 0 1 1 1 0 1 0');
    const twice = byDefinition([...input, ...input], ['133', '171', '165']);
    expect([...encode(input, LTE_CODE, tailState(input))]).toEqual(twice.slice(36));
  });
});

describe('decoding finds the likeliest word, as trying every word does', () => {
  const LENGTH = 8;

  it('from state zero with known zeros at the end', () => {
    const random = new Random(2, 'terminated');
    for (let trial = 0; trial < 60; trial++) {
      const sent = new Uint8Array([...word(random.bits() & 255, LENGTH), 0, 0, 0, 0, 0, 0]);
      const soft = noisy(encode(sent, WIFI_CODE), 1.2, random);
      const all = Array.from({ length: 256 }, (_, v) => wordMetric(soft, encode([...word(v, LENGTH), 0, 0, 0, 0, 0, 0], WIFI_CODE)));
      const found = decodeFromZero(soft, WIFI_CODE, true);
      expect(found.metric).toBeCloseTo(Math.max(...all), 9);
    }
  });

  it('round a circle', () => {
    const random = new Random(3, 'circle');
    for (let trial = 0; trial < 40; trial++) {
      const sent = word(random.bits() & 255, LENGTH);
      const soft = noisy(encode(sent, LTE_CODE, tailState(sent)), 1, random);
      const all = Array.from({ length: 256 }, (_, v) => wordMetric(soft, encode(word(v, LENGTH), LTE_CODE, tailState(word(v, LENGTH)))));
      const found = decodeTailBiting(soft, LTE_CODE);
      expect(found.metric).toBeCloseTo(Math.max(...all), 9);
      expect(wordMetric(soft, encode(found.bits, LTE_CODE, tailState(found.bits)))).toBeCloseTo(found.metric, 9);
    }
  });
});
