import { describe, expect, it } from 'vitest';
import { Random } from '#backend/generator/random';
import { convolve } from '#backend/generator/wifi/coding';
import { heSignalBits, htSignalBits, vhtSignalBits } from '#backend/generator/wifi/signal-fields';
import { encodedTones, interleaved } from '#engine/wifi/field';
import { crc8, decodeHeSignal, decodeHtSignal, decodeLegacySignal, decodeVhtSignal } from '#engine/wifi/signal-codes';
import { LEGACY_TONES, LONG_TRAINING, SHORT_TRAINING, WIDE_TONES } from '#engine/wifi/training';

const bits = (text: string) => [...text.replaceAll(' ', '')].map(Number);
/** Soft values (positive for 0) of bits coded by the generator's coder, with noise. */
function soft(word: ArrayLike<number>, sigma = 0, seed = 1): Float64Array {
  const random = new Random(seed, 'soft');
  return Float64Array.from(convolve(Uint8Array.from(word)), (bit) => 1 - 2 * bit + sigma * random.normal());
}

describe('training (IEEE 802.11-2016 clause 17.3.3)', () => {
  const inTime = (tone: (k: number) => number) => Array.from({ length: 64 }, (_, n) => {
    let re = 0, im = 0;
    for (let k = -26; k <= 26; k++) {
      re += tone(k) * Math.cos((2 * Math.PI * k * n) / 64);
      im += tone(k) * Math.sin((2 * Math.PI * k * n) / 64);
    }
    return [re, im];
  });

  it('short training repeats after 16 samples at 20 Msps and turns over after 8', () => {
    const x = inTime((k) => SHORT_TRAINING.get(k) ?? 0);
    let product = 0, energy = 0;
    for (let n = 0; n < 64; n++) {
      expect(x[n][0]).toBeCloseTo(x[(n + 16) % 64][0], 9);
      expect(x[n][1]).toBeCloseTo(x[(n + 16) % 64][1], 9);
      product += x[n][0] * x[(n + 8) % 64][0] + x[n][1] * x[(n + 8) % 64][1];
      energy += x[n][0] ** 2 + x[n][1] ** 2;
    }
    // Tones ±4, ±12, ±20 against ±8, ±16, ±24: as many of each, so nothing is left at half the period.
    expect(Math.abs(product / energy)).toBeLessThan(1e-9);
  });

  it('the short training\'s first samples are those of the annex example: 0.046, 0.046j first (Table I-3; from memory)', () => {
    // Scaled by √(13/6) and 1/64 and turned by 1 + j, as the annex has it.
    const [re, im] = inTime((k) => SHORT_TRAINING.get(k) ?? 0)[0].map((v) => (v * Math.sqrt(13 / 6)) / 64);
    expect(re - im).toBeCloseTo(0.046, 3);
    expect(re + im).toBeCloseTo(0.046, 3);
  });

  it('the long training\'s first sample is 0.156 (Table I-6; from memory), its mean power that of 52 tones', () => {
    const x = inTime((k) => LONG_TRAINING[k + 26]);
    expect(x[0][0] / 64).toBeCloseTo(0.156, 3);
    expect(x.reduce((sum, [re, im]) => sum + re * re + im * im, 0) / 64).toBeCloseTo(52, 6);
  });

  it('has 48 and 52 data tones', () => {
    expect([LEGACY_TONES.length, WIDE_TONES.length]).toEqual([48, 52]);
    expect(LEGACY_TONES.some((k) => [0, 7, 21].includes(Math.abs(k)))).toBe(false);
  });
});

describe('L-SIG (IEEE 802.11-2016 clause 17.3.4)', () => {
  // Words worked out by two open receivers' rules.
  it.each([['110100010011000000000000', 6, 100], ['110100111000000000000000', 6, 14], ['001100011101110101000000', 54, 1500], ['010101111111111110000000', 12, 4095]])('%s is %i Mb/s, %i octets', (word, rateMbps, length) => {
    expect(decodeLegacySignal(soft(bits(word), 0.6))).toMatchObject({ rateMbps, length });
  });

  it('interleaves the annex example (36 Mb/s, 100 octets; Tables I-8 and I-9; from memory)', () => {
    const [tones] = encodedTones(bits('1011 0 001001100000 0 000000'), 48);
    expect([...tones].map((v) => (v > 0 ? 1 : 0))).toEqual(bits('1001 0100 1101 0000 0001 0100 1000 0011 0010 0100 1001 0100'));
  });

  it('refuses a wrong parity, a set reserved bit and a rate that does not exist', () => {
    const good = bits('110100010011000000000000');
    const flipped = (...places: number[]) => good.map((bit, i) => (places.includes(i) ? 1 - bit : bit));
    expect(decodeLegacySignal(soft(good))).not.toBeNull();
    expect(decodeLegacySignal(soft(flipped(17)))).toBeNull();
    expect(decodeLegacySignal(soft(flipped(4, 17)))).toBeNull();
    expect(decodeLegacySignal(soft(flipped(3, 17)))).toBeNull();
  });

  it('finds every column of the interleavers once', () => {
    for (const size of [48, 52]) expect(new Set(Array.from({ length: size }, (_, k) => interleaved(k, size))).size).toBe(size);
  });
});

describe('SIG fields of newer formats', () => {
  it('CRC of the example in IEEE 802.11-2016 clause 19.3.9.4.4 (from memory)', () => {
    expect(crc8(bits('1111 0001 0010 0110 0000 0000 1110 0000 00'))).toBe(0b10101000);
  });

  it('HT-SIG from an independent coder', () => {
    for (const shortGuard of [false, true]) {
      const word = htSignalBits({ mcs: 5, mhz: 40, length: 777, shortGuard });
      expect(decodeHtSignal(soft(word, 0.7))).toMatchObject({ mcs: 5, channels: 2, guardIntervalUs: shortGuard ? 0.4 : 0.8, length: 777, longTrainings: 1 });
      expect(decodeHtSignal(soft(word.map((bit, i) => (i === 31 ? 1 - bit : bit))))).toBeNull();
    }
  });

  it('VHT-SIG-A from an independent coder', () => {
    for (const mhz of [20, 40, 80, 160] as const) {
      const word = vhtSignalBits({ mcs: 8, mhz, shortGuard: true, symbols: 9 });
      expect(decodeVhtSignal(soft(word, 0.7))).toMatchObject({ mcs: 8, channels: mhz / 20, guardIntervalUs: 0.4, longTrainings: 1 });
    }
  });

  // Guard and training by their code: drivers of three makers agree (code 3 without DCM and STBC).
  it.each([[0, 0.8, 1], [1, 0.8, 2], [2, 1.6, 2], [3, 3.2, 4]] as const)('HE-SIG-A, code %i: guard %f µs, %ix training', (code, guardIntervalUs, ltfType) => {
    const word = heSignalBits({ mcs: 7, mhz: 80, guardAndTraining: code });
    expect(decodeHeSignal(soft(word, 0.7), 1, false)).toMatchObject({ kind: 'single user', mcs: 7, channels: 4, guardIntervalUs, ltfType, longTrainings: 1 });
  });

  it('random words pass the eight-bit CRC about once in 256', () => {
    const random = new Random(3, 'words');
    let passed = 0;
    for (let trial = 0; trial < 2000; trial++) {
      const word = Uint8Array.from({ length: 48 }, (_, i) => (i < 42 ? random.bits() & 1 : 0));
      word[26] = 1;
      if (decodeHtSignal(soft(word))) passed++;
    }
    // 2000/256 = 7.8 before the checks of MCS and STBC; three standard deviations above is 16.
    expect(passed).toBeLessThanOrEqual(16);
  });
});
