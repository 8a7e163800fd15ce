import { describe, expect, it } from 'vitest';
import { lteUplink, type UplinkSpec } from '#backend/generator/lte/uplink';
import { isAllocation, uplinkBaseSequence } from '#engine/lte/uplink-reference';
import { surveyLte } from '#engine/lte/detect';
import { capture, context, type Reception } from './air-capture.js';

const SPEC: UplinkSpec = {
  carrierHz: 847e6, resourceBlocks: 50, prefix: 'normal', cellId: 131, allocatedBlocks: 25, firstBlock: 9, subframes: 0.8, modulation: '16qam', halfSubcarrierShift: true, seed: 5,
};
const AIR: Reception = { sampleRateHz: 15.36e6, durationS: 0.012, snrDb: 12 };

describe('uplink base sequences (TS 36.211 clause 5.5.1.1)', () => {
  it('have a flat spectrum and the prime\'s cyclic continuation', () => {
    const r = uplinkBaseSequence(7, 36);
    for (let n = 0; n < 36; n++) expect(Math.hypot(r[2 * n], r[2 * n + 1])).toBeCloseTo(1, 12);
    // The largest prime below 36 is 31: value 31 is value 0 again.
    for (let n = 31; n < 36; n++) expect([r[2 * n], r[2 * n + 1]]).toEqual([r[2 * (n - 31)], r[2 * (n - 31) + 1]]);
  });

  it('are uncorrelated with their own cyclic shifts over the prime\'s length', () => {
    const r = uplinkBaseSequence(12, 72);
    for (const shift of [1, 5, 33]) {
      let re = 0, im = 0;
      for (let n = 0; n < 71; n++) {
        const m = (n + shift) % 71;
        re += r[2 * n] * r[2 * m] + r[2 * n + 1] * r[2 * m + 1];
        im += r[2 * n + 1] * r[2 * m] - r[2 * n] * r[2 * m + 1];
      }
      expect(Math.hypot(re, im)).toBeLessThan(1e-9);
    }
  });

  it('belong to allocations of factors 2, 3 and 5', () => {
    expect([3, 7, 25, 28, 50, 99, 100].map(isAllocation)).toEqual([true, false, true, false, true, false, true]);
  });
});

describe('uplink of one terminal from the project\'s own generator', () => {
  const value = (spec: UplinkSpec, air: Reception, centreHz: number | null) => {
    const { source } = capture(lteUplink(spec), air);
    return surveyLte(context({ ...source, centreFrequencyHz: centreHz })).finding?.air;
  };

  for (const halfSubcarrierShift of [true, false]) {
    for (const prefix of ['normal', 'extended'] as const) {
      it(`${halfSubcarrierShift ? 'with' : 'without'} the half-subcarrier shift, ${prefix} prefix`, () => {
        const air = value({ ...SPEC, halfSubcarrierShift, prefix }, { ...AIR, clockPpm: 0.15, inverted: prefix === 'extended' }, SPEC.carrierHz)!;
        expect(air.technology.value).toBe('lte');
        expect(air.direction.value).toBe('uplink');
        expect(air.cyclicPrefix.value).toBe(prefix);
        expect(air.halfSubcarrierShift.value).toBe(halfSubcarrierShift);
        expect(air.physicalCellId.value).toBeNull();
        expect(air.mib.value).toBeNull();
        expect(air.evmRandomPercent.value as number).toBeGreaterThan(2 * (air.evmPercent.value as number));
      });
    }
  }

  it('leaves the shift open where two clocks\' error may explain it, and where the centre is not stated', () => {
    const high = value({ ...SPEC, carrierHz: 3.7e9 }, AIR, 3.7e9)!;
    expect(high.halfSubcarrierShift.value).toBeNull();
    expect(high.halfSubcarrierShift.reason).toMatch(/an offset explains it as well/);
    const unknown = value(SPEC, AIR, null)!;
    expect(unknown.halfSubcarrierShift).toMatchObject({ value: null, reason: 'the capture\'s centre is not stated' });
  });
});
