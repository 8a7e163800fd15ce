import { describe, expect, it } from 'vitest';
import { transformOf } from '#engine/fourier/fft';

/** The definition of the discrete Fourier transform, summed term by term. */
function naive(input: Float64Array): Float64Array {
  const size = input.length / 2;
  const out = new Float64Array(input.length);
  for (let k = 0; k < size; k++) {
    for (let n = 0; n < size; n++) {
      const angle = (-2 * Math.PI * ((k * n) % size)) / size;
      out[2 * k] += input[2 * n] * Math.cos(angle) - input[2 * n + 1] * Math.sin(angle);
      out[2 * k + 1] += input[2 * n] * Math.sin(angle) + input[2 * n + 1] * Math.cos(angle);
    }
  }
  return out;
}

describe('transform', () => {
  for (const size of [2, 6, 10, 12, 64, 90, 97, 100, 192, 384, 625, 640, 768, 1536, 3072]) {
    it(`of ${size} equals the definition and inverts`, () => {
      const input = Float64Array.from({ length: 2 * size }, (_, i) => Math.sin(1.7 * i * i + 0.3));
      const spectrum = new Float64Array(2 * size);
      transformOf(size).forward(input, spectrum);
      const expected = naive(input);
      // Double precision: rounding grows with the square root of the length, 1e-9 leaves four orders.
      for (let i = 0; i < expected.length; i++) expect(Math.abs(spectrum[i] - expected[i])).toBeLessThan(1e-9 * size);
      const back = new Float64Array(2 * size);
      transformOf(size).inverse(spectrum, back);
      for (let i = 0; i < back.length; i++) expect(Math.abs(back[i] - input[i])).toBeLessThan(1e-10 * size);
    });
  }
});
