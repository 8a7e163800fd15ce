import { describe, expect, it } from 'vitest';
import { spectrumCurve, spectrumOf } from '#engine/spectrum/spectrum';
import { welch } from '#engine/spectrum/welch';
import { meanPower } from '#engine/vector/power';
import { numpy } from '../support/numpy.js';
import { smallOfdm, white } from '../support/small-ofdm.js';

const RATE = 15.36e6;
const flat = { spacingHz: 60e3, prefixS: () => 0, subcarriers: 120, rateHz: RATE, durationS: 4e-3 };

describe('power spectral density', () => {
  it('equals numpy on the same windows (Welch 1967: Hann, half overlap)', () => {
    const iq = white(8192, 3);
    const { power } = welch(iq, 1, { size: 512, most: 1e6 });
    const expected = numpy(iq, `w = 0.5 - 0.5 * np.cos(2 * np.pi * np.arange(512) / 512)
f = [np.abs(np.fft.fft(w * x[s:s + 512])) ** 2 for s in range(0, len(x) - 511, 256)]
y = np.fft.fftshift(np.mean(f, axis=0)) / np.sum(w ** 2) / 512`);
    for (let k = 0; k < 512; k++) expect(Math.abs(power[k] / expected[k] - 1)).toBeLessThan(1e-9);
  });

  it('adds up to the mean power (Parseval)', () => {
    const iq = white(200_000, 4);
    const total = welch(iq, RATE).power.reduce((a, b) => a + b, 0);
    expect(Math.abs(total / meanPower(iq) - 1)).toBeLessThan(0.01);
  });
});

describe('what stands out', () => {
  it.each([[0, 20], [2.1e6, 20], [-3.2e6, 5], [0, 0]])('finds the edges of a carrier at %d Hz, %d dB', (offsetHz, snrDb) => {
    const { occupied, snrDb: measured, occupiedBandwidthHz } = spectrumOf(smallOfdm({ ...flat, offsetHz, snrDb }), RATE);
    // Subcarriers −60 … 59: the outermost lie 3.6 MHz below and 3.54 MHz above.
    expect(Math.abs(occupied!.lowHz - (offsetHz - 3.6e6))).toBeLessThan(120e3);
    expect(Math.abs(occupied!.highHz - (offsetHz + 3.54e6))).toBeLessThan(120e3);
    expect(Math.abs(measured! - snrDb)).toBeLessThan(1);
    // 99 % of a flat band, and its skirts.
    if (snrDb > 10) expect(Math.abs(occupiedBandwidthHz! / (0.99 * 7.2e6) - 1)).toBeLessThan(0.03);
  });

  it('says nothing of white noise, whose spectrum has one level', () => {
    for (const seed of [1, 2, 3, 4, 5]) expect(spectrumOf(white(150_000, seed), RATE).occupied).toBeNull();
  });

  it('draws the level of a tone at full scale as 0 dBFS spread over its bins', () => {
    const iq = new Float32Array(2 * 65_536);
    for (let n = 0; n < 65_536; n++) {
      iq[2 * n] = Math.cos(2 * Math.PI * 0.125 * n);
      iq[2 * n + 1] = Math.sin(2 * Math.PI * 0.125 * n);
    }
    const { x, y } = spectrumCurve(spectrumOf(iq, 8e6), 2048);
    const top = y.indexOf(Math.max(...y));
    expect(x[top]).toBeCloseTo(1, 5);
    // A Hann window spreads a tone over three bins, the middle one with 2/3 of the power: −1.76 dB.
    expect(y[top]).toBeCloseTo(10 * Math.log10(2 / 3), 1);
  });
});
