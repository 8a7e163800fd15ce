import { describe, expect, it } from 'vitest';
import { nrCarrier } from '#backend/generator/nr/carrier';
import { nrNumerology, TC_PER_SUBFRAME } from '#backend/generator/nr/numerology';
import { gscnHz, nrArfcn, nrArfcnHz } from '#backend/generator/nr/raster';
import type { NrSpec } from '#backend/generator/nr/spec';
import { receive } from '#backend/generator/receive';
import { meanPower } from '#backend/generator/signal';
import { inverseTransform } from '#backend/generator/transform';

const SPEC: NrSpec = {
  carrierHz: 3_451_200_000, spacingHz: 30000, prefix: 'normal', resourceBlocks: 51, cellId: 233,
  blocks: { blockCase: 'C', frequencyHz: 3_450_720_000, sent: [0], maxBlocks: 8, periodMs: 10, halfFrame: 0 },
  mib: { systemFrameNumber: 130, subCarrierSpacingCommon: 'scs30or120', kSsb: 4, dmrsTypeAPosition: 'pos2', pdcchConfigSib1: 6, cellBarred: false, intraFreqReselection: true, spare: 0 },
  tdd: null, load: { slots: 1, blocks: 1, modulations: ['16qam'], controlSymbols: 0, dmrs: false },
  phaseCompensation: true, seed: 1,
};

describe('numerology of TS 38.211 clause 5.3.1', () => {
  it.each([15, 30, 60, 120, 240, 480, 960])('fills exactly 1 ms at %i kHz, half of it in the first half of the symbols', (kHz) => {
    const n = nrNumerology(kHz * 1000);
    const length = (l: number) => n.prefixTc[l] + n.usefulTc;
    const sum = (from: number, to: number) => Array.from({ length: to - from }, (_, i) => length(from + i)).reduce((a, b) => a + b, 0);
    expect(sum(0, n.symbolsPerSubframe)).toBe(TC_PER_SUBFRAME);
    expect(sum(0, n.symbolsPerSubframe / 2)).toBe(TC_PER_SUBFRAME / 2);
  });

  it('fills exactly 1 ms with 48 symbols of the extended prefix', () => {
    const n = nrNumerology(60000, 'extended');
    expect(n.startTc[47] + n.prefixTc[47] + n.usefulTc).toBe(TC_PER_SUBFRAME);
    expect(n.symbolsPerSubframe).toBe(48);
  });

  it('has the prefixes that the tables of open stacks give at 30.72 Msps', () => {
    const samples = (kHz: number, l: number) => (nrNumerology(kHz * 1000).prefixTc[l] * 30_720_000) / TC_PER_SUBFRAME / 1000;
    expect([samples(15, 0), samples(15, 1), samples(30, 0), samples(30, 1), samples(60, 0), samples(120, 1)]).toEqual([160, 144, 88, 72, 52, 18]);
  });
});

describe('rasters of TS 38.104, examples of TS 38.508-1 and worked by hand', () => {
  it.each([[422000, 2110e6], [632628, 3489.42e6], [636667, 3550.005e6], [2016667, 24250.08e6], [653333, 3799.995e6]])('NR-ARFCN %i', (n, hz) => {
    expect(nrArfcnHz(n)).toBe(hz);
    expect(nrArfcn(hz)).toBe(n);
  });
  it.each([[5279, 2112.05e6], [2183, 873.65e6], [6252, 2500.95e6], [7498, 2999.05e6], [7711, 3305.28e6], [7884, 3554.4e6], [22388, 26531.04e6]])('GSCN %i', (g, hz) => {
    expect(gscnHz(g)).toBe(hz);
  });
});

describe('one inverse transform and a bank of oscillators', () => {
  // Common practice: cosine on I and minus sine on Q for each tone's real and imaginary part.
  it.each([12, 64, 60, 98, 1536])('give the same waveform with %i tones', (size) => {
    const bins = Float64Array.from({ length: 2 * size }, (_, i) => Math.sin(3 * i + 1));
    const out = new Float64Array(2 * size);
    inverseTransform(size).run(bins, out);
    for (let n = 0; n < size; n += Math.ceil(size / 16)) {
      let i = 0;
      let q = 0;
      for (let k = 0; k < size; k++) {
        const angle = (2 * Math.PI * ((k * n) % size)) / size;
        i += bins[2 * k] * Math.cos(angle) - bins[2 * k + 1] * Math.sin(angle);
        q += bins[2 * k] * Math.sin(angle) + bins[2 * k + 1] * Math.cos(angle);
      }
      expect(out[2 * n]).toBeCloseTo(i, 9);
      expect(out[2 * n + 1]).toBeCloseTo(q, 9);
    }
  });
});

/** One subcarrier of one symbol by the definition of the transform, against the tuner's zero. */
function tone(iq: Float32Array, { start, size, bin }: { start: number; size: number; bin: number }): { re: number; im: number } {
  let re = 0;
  let im = 0;
  for (let n = 0; n < size; n++) {
    const angle = (-2 * Math.PI * bin * n) / size;
    const [i, q] = [iq[2 * (start + n)], iq[2 * (start + n) + 1]];
    re += i * Math.cos(angle) - q * Math.sin(angle);
    im += i * Math.sin(angle) + q * Math.cos(angle);
  }
  return { re: re / size, im: im / size };
}

/** Phase of the secondary synchronisation signal's first chip pair in block 0, turns. */
function sssPhases(spec: NrSpec, centreHz: number): number[] {
  const { iq } = receive(nrCarrier(spec), { centreHz, sampleRateHz: 30.72e6, startS: 0, durationS: 0.001 });
  const n = nrNumerology(30000);
  const other = receive(nrCarrier({ ...spec, phaseCompensation: !spec.phaseCompensation }), { centreHz, sampleRateHz: 30.72e6, startS: 0, durationS: 0.001 }).iq;
  return [2, 3, 4, 5].map((l) => {
    const start = ((n.startTc[l] + n.prefixTc[l]) * 30.72) / 1966.08;
    const at = { start, size: 1024, bin: Math.round((spec.blocks!.frequencyHz - centreHz) / 30000) + (l === 4 ? 5 : 1) };
    const a = tone(iq, at);
    const b = tone(other, at);
    const turns = (Math.atan2(a.im, a.re) - Math.atan2(b.im, b.re)) / (2 * Math.PI);
    return ((turns % 1) + 1) % 1;
  });
}

describe('an NR carrier on the air', () => {
  it('has power 1 under full load and none outside its resource blocks', () => {
    const { iq } = receive(nrCarrier({ ...SPEC, blocks: null }), { centreHz: SPEC.carrierHz, sampleRateHz: 30.72e6, startS: 0, durationS: 0.001 });
    expect(meanPower(iq)).toBeCloseTo(1, 1);
    // Symbol 1 starts after symbol 0 (88 + 1024 samples) and its own prefix of 72.
    const at = (bin: number) => Math.hypot(...Object.values(tone(iq, { start: 1184, size: 1024, bin })));
    expect(at(-306)).toBeGreaterThan(0.01);
    expect(at(305)).toBeGreaterThan(0.01);
    expect(at(306)).toBeLessThan(1e-6);
    expect(at(-307)).toBeLessThan(1e-6);
  });

  it('repeats the end of each symbol in its prefix', () => {
    const { iq } = receive(nrCarrier(SPEC), { centreHz: SPEC.carrierHz, sampleRateHz: 30.72e6, startS: 0, durationS: 0.0005 });
    for (const [start, prefix] of [[0, 88], [1112, 72], [1112 + 5 * 1096, 72]]) {
      for (let n = 0; n < 2 * prefix; n++) expect(iq[2 * start + n]).toBeCloseTo(iq[2 * (start + 1024) + n], 5);
    }
  });

  it('compensates each symbol by the phase of clause 5.4, worked example for 3489.42 MHz', () => {
    const spec = { ...SPEC, carrierHz: 3_489_420_000, blocks: { ...SPEC.blocks!, frequencyHz: 3_489_420_000 } };
    // Worked by hand: 95.62, 337.5, 219.4, 101.2, 343.1 degrees for symbols 0 to 4, then a step of 0.671875 turns.
    const step = 0.671875;
    const symbol0 = 95.625 / 360;
    sssPhases(spec, spec.carrierHz).forEach((turns, i) => {
      expect(Math.cos(2 * Math.PI * (turns - symbol0 - step * (i + 2)))).toBeCloseTo(1, 3);
    });
  });

  it('is the same through the interpolator as at a native rate', () => {
    const emission = nrCarrier(SPEC);
    const centreHz = SPEC.carrierHz + 1_200_000;
    const native = receive(emission, { centreHz, sampleRateHz: 61.44e6, startS: 0.001, durationS: 0.0005 }).iq;
    // 92.16 Msps is native too, but asked with a hair of clock error it goes through the filter.
    const other = receive(emission, { centreHz, sampleRateHz: 30.72e6, startS: 0.001, durationS: 0.0005, clockPpm: 1e-9 }).iq;
    let error = 0;
    for (let n = 200; n < 15000; n++) error += (native[4 * n] - other[2 * n]) ** 2 + (native[4 * n + 1] - other[2 * n + 1]) ** 2;
    // Sidelobes of the sharp symbol edges beyond the filter's 14 MHz remain: some −45 dB.
    expect(error / 14800).toBeLessThan(1e-3);
  });

  it('makes 20 ms at 30.72 Msps in less than two seconds', () => {
    const before = performance.now();
    receive(nrCarrier(SPEC), { centreHz: SPEC.carrierHz, sampleRateHz: 30.72e6, startS: 0, durationS: 0.02 });
    expect(performance.now() - before).toBeLessThan(2000);
  });
});
