import { describe, expect, it } from 'vitest';
import { activity } from '#engine/level/activity';
import { clippedFraction } from '#engine/level/clipping';
import { plausible } from '#engine/evidence/plausible';
import { dcOffsetDb, iqImbalanceDb, levelFacts } from '#engine/level/front-end';
import { chooseWindows } from '#engine/level/windows';
import { mulberry, noisy, smallOfdm, white } from '../support/small-ofdm.js';

function tone(samples: number, amplitude = 1): Float32Array {
  return Float32Array.from({ length: 2 * samples }, (_, i) => amplitude * (i % 2 ? Math.sin : Math.cos)(2 * Math.PI * 0.0813 * (i >> 1)));
}

describe('level', () => {
  it('calls a complex tone at full scale 0 dBFS', () => {
    expect(levelFacts(tone(10_000)).rmsDbfs).toBeCloseTo(0, 5);
    expect(levelFacts(tone(10_000, 0.1)).rmsDbfs).toBeCloseTo(-20, 5);
  });

  it('counts the samples that Gaussian theory puts beyond the rail', () => {
    const iq = white(200_000, 1);
    const rail = 1.2;
    const clipped = iq.map((v) => Math.max(-rail, Math.min(rail, v)));
    // Each axis is normal with variance ½: P(|I| ≥ r or |Q| ≥ r) = 1 − erf(r)², and erf(1.2) = 0.910314 (Abramowitz and Stegun, Table 7.1).
    expect(Math.abs(clippedFraction(clipped) - (1 - 0.910314 ** 2))).toBeLessThan(0.003);
    expect(clippedFraction(iq)).toBe(0);
    expect(clippedFraction(iq.map((v) => Math.round(v * 40) / 128))).toBe(0);
  });

  it('counts both rails of signed integers, of which the lower lies one step further out', () => {
    const iq = white(100_000, 2);
    const codes = iq.map((v) => Math.max(-128, Math.min(127, Math.round(v * 128))) / 128);
    const railed = iq.filter((_, i) => i % 2 === 0).filter((_, n) => [iq[2 * n], iq[2 * n + 1]].some((v) => Math.round(v * 128) >= 127 || Math.round(v * 128) <= -128)).length;
    expect(clippedFraction(codes)).toBeCloseTo(railed / 100_000, 6);
    // Of a standard complex Gaussian, P(|I| ≥ 1 or |Q| ≥ 1) = 1 − erf(1)², and erf(1) = 0.842701 (Abramowitz and Stegun, Table 7.1); the rounding moves the rail half a step.
    expect(Math.abs(railed / 100_000 - (1 - 0.842701 ** 2))).toBeLessThan(0.01);
  });

  it('tells a received signal from its bytes read in another order', () => {
    const iq = white(40_000, 3).map((v) => 0.1 * v);
    const swapped = new Float32Array(Buffer.from(iq.slice().buffer).swap32().buffer);
    const asSource = (values: Float32Array) => ({ sampleRateHz: 1e6, centreFrequencyHz: null, samples: values.length / 2, read: (start: number, count: number) => values.slice(2 * start, 2 * (start + count)) });
    expect(plausible(asSource(iq))).toBe(true);
    // IEEE 754: the exponent then stands in mantissa bits, so that magnitudes run over all decades.
    expect(plausible(asSource(swapped.map((v) => (Number.isFinite(v) ? v : 0))))).toBe(false);
    // Overdriven by 9 dB: two rails, and a signal all the same.
    expect(plausible(asSource(iq.map((v) => Math.max(-0.025, Math.min(0.025, v)))))).toBe(true);
    // A pause of four fifths of the time, 60 dB down, is a signal all the same.
    expect(plausible(asSource(iq.map((v, i) => (i % 10_000 < 2000 ? v : 1e-3 * v))))).toBe(true);
  });

  it('measures a DC term and an image that were put in, and claims neither of a clean signal', () => {
    const clean = smallOfdm({ spacingHz: 60e3, prefixS: () => 1e-6, subcarriers: 120, rateHz: 15.36e6, durationS: 6e-3, snrDb: 25, offsetHz: 30e3 });
    const withDc = clean.map((v, i) => v + (i % 2 ? -0.06 : 0.08));
    const power = clean.reduce((a, v) => a + v * v, 0) / (clean.length / 2);
    expect(Math.abs(dcOffsetDb(withDc)! - 10 * Math.log10(0.01 / power))).toBeLessThan(0.5);
    const image = 0.05;
    const withImage = Float32Array.from(clean, (v, i) => (i % 2 ? v * (1 - image) : v * (1 + image)));
    expect(Math.abs(iqImbalanceDb(withImage)! - 20 * Math.log10(image))).toBeLessThan(0.7);
    expect(dcOffsetDb(clean) ?? -99).toBeLessThan(-35);
    expect(iqImbalanceDb(clean) ?? -99).toBeLessThan(-40);
  });
});

describe('activity', () => {
  it('finds bursts and pauses by level, at 3 dB too', () => {
    const rate = 20e6;
    const edges = [[4000, 14_000], [17_000, 40_000], [52_000, 61_000]];
    for (const snr of [100, 2]) {
      const iq = new Float32Array(2 * 70_000);
      for (const [from, to] of edges) iq.set(white(to - from, from).map((v) => v * Math.sqrt(snr)), 2 * from);
      const { segments, offPower } = activity(noisy(iq, 1, mulberry(9)), rate);
      expect(segments.length).toBe(3);
      segments.forEach((s, i) => {
        expect(Math.abs(s.start - edges[i][0])).toBeLessThan(120);
        expect(Math.abs(s.end - edges[i][1])).toBeLessThan(120);
      });
      expect(Math.abs(offPower! - 1)).toBeLessThan(0.25);
    }
  });

  it('takes steady noise as one stretch', () => {
    for (const seed of [1, 2, 3]) expect(activity(white(100_000, seed), 20e6).segments.length).toBe(1);
  });
});

describe('windows', () => {
  it('looks first at the first 20 ms, then where the level is highest, and reads little to know', () => {
    let read = 0;
    const source = {
      sampleRateHz: 1e6, centreFrequencyHz: null, samples: 50_000_000,
      read: (start: number, count: number) => {
        read += count;
        return new Float32Array(2 * count).fill(start >= 20_000_000 && start < 24_000_000 ? 1 : 0.01);
      },
    };
    const [first, ...further] = chooseWindows(source);
    expect(first).toBe(0);
    expect(further.length).toBe(3);
    for (const start of further) expect(start >= 20_000_000 && start < 24_000_000).toBe(true);
    expect(read).toBeLessThan(300_000);
  });
});
