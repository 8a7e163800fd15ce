import { describe, expect, it } from 'vitest';
import { nrCarrier } from '#backend/generator/nr/carrier';
import type { NrSpec } from '#backend/generator/nr/spec';
import { look } from '#engine/evidence/look';
import { detectNr } from '#engine/nr/detect';
import { estimateOfdm } from '#engine/sync/estimate';
import { withoutDc } from '#engine/level/without-dc';
import { capture, context, memory, noise, type Reception } from './air-capture.js';

/** 30 kHz, 38 blocks at 3.5 GHz; GSCN 7846 lies 480 kHz above the carrier's centre. */
const CELL: NrSpec = {
  carrierHz: 3_499_200_000, spacingHz: 30_000, prefix: 'normal', resourceBlocks: 38, cellId: 322,
  blocks: { blockCase: 'C', frequencyHz: 3_499_680_000, sent: [0, 1, 2], maxBlocks: 8, periodMs: 10, halfFrame: 0 },
  mib: { systemFrameNumber: 51, subCarrierSpacingCommon: 'scs30or120', kSsb: 8, dmrsTypeAPosition: 'pos2', pdcchConfigSib1: 4, cellBarred: false, intraFreqReselection: true, spare: 0 },
  tdd: null, load: { slots: 0.8, blocks: 1, modulations: ['qpsk', '64qam'], controlSymbols: 1, dmrs: true }, phaseCompensation: true, seed: 9,
};
const AIR: Reception = { sampleRateHz: 23.04e6, durationS: 0.0125, startS: 0.0095, snrDb: 15 };

function heard(spec: NrSpec, air: Reception, spoil: (iq: Float32Array) => Float32Array = (iq) => iq) {
  const { source, trueOffsetHz } = capture(nrCarrier(spec), air);
  const spoilt = { ...memory(spoil(source.read(0, source.samples)), air.sampleRateHz), centreFrequencyHz: spec.carrierHz - (air.offsetHz ?? 0) };
  return { air: look(spoilt, { ...context(spoilt).facts, centreFrequencyHz: spoilt.centreFrequencyHz }, {}).choice.finding?.air ?? {}, trueOffsetHz };
}

describe('a cell of the project\'s own generator', () => {
  for (const dcDb of [0, -10]) {
    it(`beside a DC of ${dcDb} dB against its power, off the subcarriers`, () => {
      const { air, trueOffsetHz } = heard(CELL, { ...AIR, offsetHz: -1.013e6 }, (iq) => {
        const power = iq.reduce((sum, part) => sum + part * part, 0) / (iq.length / 2);
        const level = Math.sqrt((power * 10 ** (dcDb / 10)) / 2);
        return iq.map((part) => part + level);
      });
      expect(air.physicalCellId.value).toBe(322);
      expect(air.mib.value).toMatchObject({ dmrsTypeAPosition: 'pos2', pdcchConfigSIB1: 4 });
      expect(air.phaseCompensation.value).toBe('present');
      expect(air.resourceBlocks.value).toBe(38);
      expect(Math.abs((air.carrierOffsetHz.value as number) - trueOffsetHz)).toBeLessThan(300);
    });
  }

  for (const [clockPpm, compensated] of [[14, true], [-18, false], [9, false]] as const) {
    it(`${compensated ? 'with' : 'without'} phase compensation, its reference ${clockPpm} ppm off`, () => {
      const { air } = heard({ ...CELL, phaseCompensation: compensated }, { ...AIR, clockPpm });
      expect(air.phaseCompensation.value).toBe(compensated ? 'present' : 'absent');
      expect(Math.abs((air.sampleClockOffsetPpm.value as number) - clockPpm)).toBeLessThan(0.5);
    });
  }

  it('whose block lies outside what stands out, as behind a fade', () => {
    const { source } = capture(nrCarrier(CELL), { ...AIR, durationS: 0.004 });
    const tuned = { ...source, centreFrequencyHz: CELL.carrierHz };
    const finding = detectNr({ ...context(tuned), blind: estimateOfdm(tuned), occupied: { lowHz: -6.8e6, highHz: -2.5e6 } });
    expect(finding?.air.physicalCellId.value).toBe(322);
  });

  it('whose first block lost samples within a symbol', () => {
    const blockS = (2 * 4384 + 208) / 61.44e6;
    const { air } = heard({ ...CELL, blocks: { ...CELL.blocks!, sent: [0] } }, AIR, (iq) => {
      const at = Math.round((0.0005 + blockS + 65e-6) * AIR.sampleRateHz);
      const out = new Float32Array(iq.length - 2 * 300);
      out.set(iq.subarray(0, 2 * at));
      out.set(iq.subarray(2 * (at + 300)), 2 * at);
      return out;
    });
    expect(air.physicalCellId.value).toBe(322);
    expect(air.mib.value).toMatchObject({ pdcchConfigSIB1: 4, ssbIndex: 0 });
    // The frame of the block that was whole.
    expect([52, 53]).toContain(air.systemFrameNumber.value);
  });
});

describe('DC of the receiver', () => {
  it('is taken out where it is strong, and left where it is weak', () => {
    const iq = noise(40_000, 3);
    const shifted = (level: number) => memory(iq.map((part, i) => part + (i % 2 === 0 ? level : -level)), 1e6);
    // Noise of 0.01: −10 dB and −43 dB against it.
    const strong = shifted(0.0224);
    const flat = withoutDc(strong, strong.read(0, 40_000)).read(100, 1000);
    const left = flat.reduce((sum, part, i) => sum + (i % 2 === 0 ? part : -part), 0) / 2000;
    // What remains is the noise's own mean over 1,000 samples: 0.1/√2000.
    expect(Math.abs(left)).toBeLessThan(4 * 0.0023);
    const weak = shifted(0.0005);
    expect(withoutDc(weak, weak.read(0, 40_000))).toBe(weak);
  });
});
