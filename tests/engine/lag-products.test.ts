import { describe, expect, it } from 'vitest';
import { transformOf } from '#engine/fourier/fft';
import { fold } from '#engine/sync/fold';
import { extendedPrefix, normalPrefix, periodOf } from '#engine/sync/hypotheses';
import { lagPeaks, lagSpectrum } from '#engine/sync/lag-spectrum';
import { lagSums } from '#engine/sync/lag-sums';
import { match, template } from '#engine/sync/match';
import { productSpectrum } from '#engine/sync/product-spectrum';
import { numpy } from '../support/numpy.js';
import { smallOfdm, white } from '../support/small-ofdm.js';

describe('lag products', () => {
  it('equal numpy, block by block', () => {
    const iq = white(20_000, 5);
    const { re, im } = lagSums({ iq, rateHz: 1, bandHz: 1 }, 256, 16);
    const expected = numpy(iq, `c = x[256:] * np.conj(x[:-256])
s = c[:len(c) // 16 * 16].reshape(-1, 16).sum(axis=1)
y = np.column_stack([s.real, s.imag]).ravel()`);
    for (let b = 0; b < re.length; b++) {
      expect(Math.abs(re[b] - expected[2 * b])).toBeLessThan(1e-9);
      expect(Math.abs(im[b] - expected[2 * b + 1])).toBeLessThan(1e-9);
    }
  });

  it('keep the correlation at lags between samples', () => {
    // A periodic signal of period 64.37 samples, band 0.8 of the rate: its product at that lag is its power.
    const period = 64.37;
    const samples = 6000;
    const iq = new Float32Array(2 * samples);
    for (let k = -25; k <= 25; k++) {
      for (let n = 0; n < samples; n++) {
        const angle = 2 * Math.PI * ((k * n) / period + 0.137 * k * k);
        iq[2 * n] += Math.cos(angle) / Math.sqrt(51);
        iq[2 * n + 1] += Math.sin(angle) / Math.sqrt(51);
      }
    }
    const { re, power } = lagSums({ iq, rateHz: 1, bandHz: 0.8 }, period, 100);
    const ratio = re.slice(1, -1).reduce((a, b) => a + b, 0) / power.slice(1, -1).reduce((a, b) => a + b, 0);
    expect(Math.abs(ratio - 1)).toBeLessThan(0.01);
  });
});

describe('symbol patterns', () => {
  it('fill half a millisecond as TS 38.211 clause 5.3.1 and TS 36.211 Table 6.12-1 say', () => {
    for (const mu of [0, 1, 2, 3, 4, 5, 6]) expect(periodOf(normalPrefix(mu))).toBeCloseTo(0.5e-3, 12);
    for (const hz of [7500, 15_000, 60_000]) expect(periodOf(extendedPrefix(hz))).toBeCloseTo(0.5e-3, 12);
    // Samples at 30.72 Msps of µ = 1: 88 and 72; of 15 kHz extended: 512.
    expect(normalPrefix(1).prefixesS[0] * 30.72e6).toBeCloseTo(88, 9);
    expect(normalPrefix(1).prefixesS[1] * 30.72e6).toBeCloseTo(72, 9);
    expect(extendedPrefix(15_000).prefixesS[0] * 30.72e6).toBeCloseTo(512, 9);
  });

  it('cover as much of a template as the prefixes have of the period', () => {
    const shape = template(normalPrefix(1), 1920);
    // (88 + 13·72) of 15360 samples.
    expect(shape.reduce((a, b) => a + b, 0) / 1920).toBeCloseTo((88 + 13 * 72) / 15_360, 9);
  });
});

describe('evidence', () => {
  it('scores noise as the theory of exponential maxima says', () => {
    // The maximum of n independent exponentials has the mean ln n + 0.577; neighbouring placings are not independent, so n is less than the bins.
    const hypothesis = normalPrefix(1);
    let sum = 0;
    let most = 0;
    const trials = 120;
    for (let seed = 1; seed <= trials; seed++) {
      const iq = white(40_000, seed);
      const sums = lagSums({ iq, rateHz: 3.84e6, bandHz: 3.84e6 }, 128, 2);
      const spans = [{ from: 0, to: sums.re.length }];
      const folded = fold(sums, { period: 960, spans, spectrum: productSpectrum(sums, spans) })!;
      const { score, placings } = match(folded, hypothesis);
      sum += score - Math.log(placings);
      most = Math.max(most, score - Math.log(placings));
    }
    expect(sum / trials).toBeGreaterThan(-1.6);
    expect(sum / trials).toBeLessThan(0.9);
    // P(score − ln n > 10) ≈ exp(−10): 0.005 in 120 trials.
    expect(most).toBeLessThan(10);
  });
});

describe('correlation against lag', () => {
  it('peaks at the useful symbol of an OFDM signal of no list', () => {
    const iq = smallOfdm({ spacingHz: 43e3, prefixS: () => 2.4e-6, subcarriers: 96, rateHz: 6.2e6, durationS: 6e-3, snrDb: 8 });
    const [peak] = lagPeaks(lagSpectrum({ iq, rateHz: 6.2e6, bandHz: 4.2e6 }, 1000), { from: 20, least: 21, count: 3 });
    expect(Math.abs(peak.lag - 6.2e6 / 43e3)).toBeLessThan(0.3);
  });

  it('is flat for white noise', () => {
    for (const seed of [1, 2, 3]) {
      expect(lagPeaks(lagSpectrum({ iq: white(60_000, seed), rateHz: 1, bandHz: 1 }, 4000), { from: 16, least: 21, count: 3 })).toEqual([]);
    }
  });

  it('rests on a transform whose power is that of the samples (Parseval)', () => {
    const iq = white(1536, 2);
    const out = new Float64Array(2 * 1536);
    transformOf(1536).forward(Float64Array.from(iq), out);
    const time = iq.reduce((a, v) => a + v * v, 0);
    expect(Math.abs(out.reduce((a, v) => a + v * v, 0) / 1536 / time - 1)).toBeLessThan(1e-9);
  });
});
