import { describe, expect, it } from 'vitest';
import { transformOf } from '#engine/fourier/fft';
import { CELLULAR, WIFI } from '#engine/sync/hypotheses';
import { estimateOfdm } from '#engine/sync/estimate';
import { channelBandwidths, maxResourceBlocks } from '#backend/snapshots/standards/bandwidths';
import { earfcnToHz, lteBand } from '#backend/snapshots/standards/lteBands';
import { nrBand } from '#backend/snapshots/standards/nrBands';
import { frequencyRange } from '#backend/snapshots/standards/nrRaster';
import { mulberry, smallOfdm } from '../support/small-ofdm.js';

/** Facts of the trade (common practice), held against the engine and the tables that it reads by. */

const TURN = 2 * Math.PI;

describe('the spacing', () => {
  it('is the reciprocal of the useful symbol in every list', () => {
    expect(CELLULAR.length + WIFI.length).toBeGreaterThan(10);
    for (const { subcarrierSpacingHz, usefulS, label } of [...CELLULAR, ...WIFI]) expect(subcarrierSpacingHz * usefulS, label).toBeCloseTo(1, 12);
  });

  it('is the reciprocal of the useful symbol of what was found, too: tones are sent 40 kHz apart, and symbols are 25 us long', () => {
    const plan = { spacingHz: 40e3, prefixS: () => 2.5e-6, subcarriers: 64, rateHz: 5e6, durationS: 12e-3, snrDb: 20 };
    const found = estimateOfdm({ sampleRateHz: 5e6, centreFrequencyHz: null, samples: 60_000, read: reader(smallOfdm(plan)) })!;
    expect(found.subcarrierSpacingHz).toBeCloseTo(40e3, -1);
    expect(found.grid.usefulSamples / 5e6).toBeCloseTo(25e-6, 8);
  });
});

function reader(iq: Float32Array) {
  return (start: number, count: number): Float32Array => iq.slice(2 * start, 2 * (start + count));
}

describe('neighbouring subcarriers', () => {
  it('differ by one whole cycle in the useful symbol, so that correlating with one cancels all the others', () => {
    const size = 240;
    const cycles = (k: number): Float64Array => Float64Array.from({ length: 2 * size }, (_, i) => (i % 2 ? Math.sin : Math.cos)((TURN * k * (i >> 1)) / size));
    const correlation = (a: Float64Array, b: Float64Array): number => {
      let re = 0;
      let im = 0;
      for (let i = 0; i < a.length; i += 2) {
        re += a[i] * b[i] + a[i + 1] * b[i + 1];
        im += a[i + 1] * b[i] - a[i] * b[i + 1];
      }
      return Math.hypot(re, im) / size;
    };
    for (let k = 0; k < size; k += 17) for (let other = 0; other < size; other += 1) expect(correlation(cycles(k), cycles(other))).toBeCloseTo(k === other ? 1 : 0, 10);
    // Half a cycle off, half-way between two, nothing cancels: 1 / sin(pi / 2N) / N, near 2 / pi.
    expect(correlation(cycles(3.5), cycles(3))).toBeCloseTo(2 / Math.PI, 3);
  });

  it('come apart in the engine’s transform as they were sent by oscillators of their own', () => {
    const size = 128;
    const random = mulberry(5);
    const sent = Float64Array.from({ length: 2 * size }, () => random() - 0.5);
    const waveform = new Float64Array(2 * size);
    for (let n = 0; n < size; n++) {
      for (let k = 0; k < size; k++) {
        const [cos, sin] = [Math.cos((TURN * k * n) / size), Math.sin((TURN * k * n) / size)];
        waveform[2 * n] += sent[2 * k] * cos - sent[2 * k + 1] * sin;
        waveform[2 * n + 1] += sent[2 * k] * sin + sent[2 * k + 1] * cos;
      }
    }
    const received = new Float64Array(2 * size);
    transformOf(size).forward(waveform, received);
    for (let i = 0; i < 2 * size; i++) expect(received[i] / size).toBeCloseTo(sent[i], 10);
  });
});

describe('one inverse transform with I and Q on a common oscillator', () => {
  it('is the waveform of a bank of oscillators at radio frequency, cosine on I and minus sine on Q', () => {
    const size = 64;
    const random = mulberry(9);
    // Subcarriers −20 to 20 about the carrier; the carrier turns 200 times in a useful symbol.
    const points = new Map(Array.from({ length: 41 }, (_, i) => [i - 20, [random() - 0.5, random() - 0.5]] as const));
    const bins = new Float64Array(2 * size);
    for (const [k, [a, b]] of points) bins.set([a, b], 2 * ((k + size) % size));
    const iq = new Float64Array(2 * size);
    transformOf(size).inverse(bins, iq);
    // Some inverse transforms divide by their size: the ratio is one number for all samples.
    const scale = [...points.values()].reduce((sum, [a]) => sum + a, 0) / iq[0];
    for (let n = 0; n < size; n++) {
      const carrier = (TURN * 200.25 * n) / size;
      const common = scale * (iq[2 * n] * Math.cos(carrier) - iq[2 * n + 1] * Math.sin(carrier));
      let bank = 0;
      for (const [k, [a, b]] of points) bank += a * Math.cos(carrier + (TURN * k * n) / size) - b * Math.sin(carrier + (TURN * k * n) / size);
      expect(common).toBeCloseTo(bank, 9);
    }
  });
});

describe('cellular OFDM', () => {
  it('is sent between 0.4 and 71 GHz', () => {
    const inHz = (numbers: readonly [number, number] | null | undefined) => numbers && ([earfcnToHz(numbers[0])!, earfcnToHz(numbers[1])!] as const);
    const spans = Array.from({ length: 300 }, (_, band) => [nrBand(band)?.downlinkHz, nrBand(band)?.uplinkHz, inHz(lteBand(band)?.downlink), inHz(lteBand(band)?.uplink)]).flat().filter((span) => span != null);
    expect(spans.length).toBeGreaterThan(100);
    for (const [low, high] of spans) {
      expect(low).toBeGreaterThanOrEqual(400e6);
      expect(high).toBeLessThanOrEqual(71e9);
      expect(high).toBeGreaterThan(low);
    }
    expect([0.39e9, 8e9, 71.1e9].map(frequencyRange)).toEqual([null, null, null]);
    expect([0.45e9, 28e9, 60e9].map(frequencyRange)).toEqual(['FR1', 'FR2-1', 'FR2-2']);
  });

  it('fits transforms of up to 4096 points', () => {
    const blocks = (['FR1', 'FR2', 'lte'] as const).flatMap((table) => [15e3, 30e3, 60e3, 120e3, 480e3, 960e3].flatMap((spacing) => channelBandwidths(table).map((width) => maxResourceBlocks(table, spacing, width) ?? 0)));
    const most = 12 * Math.max(...blocks);
    expect(most).toBeGreaterThan(2048);
    expect(most).toBeLessThan(4096);
    // The longest one is a transform still: one tone in, one line out.
    const tone = Float64Array.from({ length: 8192 }, (_, i) => (i % 2 ? Math.sin : Math.cos)((TURN * 1234 * (i >> 1)) / 4096));
    const lines = new Float64Array(8192);
    transformOf(4096).forward(tone, lines);
    for (let k = 0; k < 4096; k++) expect(Math.hypot(lines[2 * k], lines[2 * k + 1]) / 4096).toBeCloseTo(k === 1234 ? 1 : 0, 8);
  });
});
