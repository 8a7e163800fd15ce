import { describe, expect, it } from 'vitest';
import { lteUplink, type UplinkSpec } from '#backend/generator/lte/uplink';
import { spreadDemodulation } from '#engine/ofdm/spread-demodulation';
import { surveyLte } from '#engine/lte/detect';
import { capture, context, type Reception } from './air-capture.js';

const SPEC: UplinkSpec = {
  carrierHz: 847e6, resourceBlocks: 50, prefix: 'normal', cellId: 131, allocatedBlocks: 25, firstBlock: 9, subframes: 0.8, modulation: '16qam', halfSubcarrierShift: true, seed: 5,
};
const AIR: Reception = { sampleRateHz: 15.36e6, durationS: 0.012, snrDb: 12 };

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
        // Group N_ID mod 30 without hopping (TS 36.211 clause 5.5.1.3); turned over, root q is N − q and the group 29 less it.
        expect(air.technology.method).toContain(`group ${prefix === 'extended' ? 29 - (SPEC.cellId % 30) : SPEC.cellId % 30}`);
        expect(air.cyclicPrefix.value).toBe(prefix);
        expect(air.halfSubcarrierShift.value).toBe(halfSubcarrierShift);
        expect(air.physicalCellId.value).toBeNull();
        expect(air.mib.value).toBeNull();
        expect(air.evmRandomPercent.value as number).toBeGreaterThan(2 * (air.evmPercent.value as number));
      });
    }
  }

  it.each(['qpsk', '16qam'] as const)('closes on %s after the transform back over the allocation (TS 36.211 clause 5.3.3)', (modulation) => {
    const { source } = capture(lteUplink({ ...SPEC, modulation }), { ...AIR, snrDb: 22 });
    const { spreadPoints } = surveyLte(context(source)).finding!;
    const { evmPercent, evmRandomPercent, order, closes } = spreadDemodulation(spreadPoints!, { subcarrierSpacingHz: 15e3, cyclicPrefix: 'normal' });
    expect(order).toBe(modulation);
    expect(closes).toBe(true);
    // 22 dB are 8 %; the channel estimate adds a seventh of that power.
    expect(evmPercent!).toBeLessThan(11);
    expect(evmRandomPercent!).toBeGreaterThan(2 * evmPercent!);
  });

  it('leaves the shift open where two clocks\' error may explain it, and where the centre is not stated', () => {
    const high = value({ ...SPEC, carrierHz: 3.7e9 }, AIR, 3.7e9)!;
    expect(high.halfSubcarrierShift.value).toBeNull();
    expect(high.halfSubcarrierShift.reason).toMatch(/an offset explains it as well/);
    const unknown = value(SPEC, AIR, null)!;
    expect(unknown.halfSubcarrierShift).toMatchObject({ value: null, reason: 'the capture\'s centre is not stated' });
  });
});
