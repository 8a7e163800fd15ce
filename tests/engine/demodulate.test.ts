import { describe, expect, it } from 'vitest';
import { evmPercent, nearest, openness, ORDERS, randomEvmPercent } from '#engine/ofdm/constellation';
import { demodulateUnder } from '#engine/ofdm/demodulate';
import { patternOf } from '#engine/ofdm/settings';
import { analyseWindow } from '#engine/sync/estimate';
import { mulberry, normalPair, nrPrefix, smallOfdm, type SmallOfdm } from '../support/small-ofdm.js';

function source(iq: Float32Array, sampleRateHz: number) {
  return { sampleRateHz, centreFrequencyHz: null, samples: iq.length / 2, read: (s: number, n: number) => iq.slice(2 * s, 2 * (s + n)) };
}

const NR30: SmallOfdm = { spacingHz: 30e3, prefixS: nrPrefix(1), subcarriers: 180, rateHz: 7.68e6, durationS: 5e-3, snrDb: 25, offsetHz: 4100, lateS: 0.2e-3 };

describe('constellations', () => {
  it('have unit power and leave their own points where they are', () => {
    for (const order of ORDERS) {
      const levels = { bpsk: [2, 1], qpsk: [2, 2], '16qam': [4, 4], '64qam': [8, 8], '256qam': [16, 16] }[order];
      // TS 38.211 clause 5.1: QPSK 1/√2, 16QAM 1/√10, 64QAM 1/√42, 256QAM 1/√170.
      const unit = { bpsk: 1, qpsk: Math.SQRT1_2, '16qam': 1 / Math.sqrt(10), '64qam': 1 / Math.sqrt(42), '256qam': 1 / Math.sqrt(170) }[order];
      const points: number[] = [];
      for (let a = 0; a < levels[0]; a++) for (let b = 0; b < levels[1]; b++) points.push((2 * a - levels[0] + 1) * unit, levels[1] === 1 ? 0 : (2 * b - levels[1] + 1) * unit);
      expect(points.reduce((s, v) => s + v * v, 0) / (points.length / 2)).toBeCloseTo(1, 9);
      expect(evmPercent(points, order)).toBeLessThan(1e-6);
      expect(nearest(points[0] + unit * 0.9, points[1], order)[0]).toBeCloseTo(points[0], 9);
    }
  });

  it('give for Gaussian points of unit power what the normal distribution says', () => {
    // QPSK: (|a| − 1/√2)² for a of variance ½ on both axes, E|a| = 1/√π: 2 − 2·√(2/π) = 0.4042.
    const random = mulberry(4);
    const points = Array.from({ length: 40_000 }, () => normalPair(random).map((v) => v * Math.SQRT1_2)).flat();
    const expected = 100 * Math.sqrt(2 - 2 * Math.sqrt(2 / Math.PI));
    expect(Math.abs(evmPercent(points, 'qpsk') - expected)).toBeLessThan(0.7);
    expect(Math.abs(randomEvmPercent(points, 'qpsk') - expected)).toBeLessThan(0.7);
    for (const order of ORDERS.slice(1)) expect(Math.abs(openness(points, order) - 1)).toBeLessThan(0.02);
  });
});

describe('settings', () => {
  it('name the symbols that the standards give them', () => {
    expect(patternOf({ subcarrierSpacingHz: 60e3, cyclicPrefix: 'extended' })!.cyclicPrefixS).toBeCloseTo(4.1667e-6, 9);
    expect(patternOf({ subcarrierSpacingHz: 312.5e3, cyclicPrefix: 'short' })!.cyclicPrefixS).toBeCloseTo(0.4e-6, 12);
    expect(patternOf({ subcarrierSpacingHz: 78.125e3, cyclicPrefix: 'quadruple' })!.cyclicPrefixS).toBeCloseTo(3.2e-6, 12);
    expect(patternOf({ subcarrierSpacingHz: 25e3, cyclicPrefix: null })).toBeNull();
  });
});

describe('demodulation of unknown data', () => {
  it.each([['qpsk', 2, 25], ['16qam', 4, 25], ['64qam', 8, 28], ['qpsk', 2, 15]] as const)('closes on %s under the right settings, with the EVM that the noise gives', (order, levels, snrDb) => {
    const iq = smallOfdm({ ...NR30, levels, snrDb });
    const { found } = analyseWindow({ iq, startSample: 0, sampleRateHz: NR30.rateHz });
    const air = demodulateUnder(source(iq, NR30.rateHz), { subcarrierSpacingHz: 30e3, cyclicPrefix: 'normal' }, { under: 'air', grid: found!.grid });
    expect(air.order).toBe(order);
    expect(air.closes).toBe(true);
    // Known symbols: EVM = 1/√SNR. The channel, estimated from the data, adds its own error; decisions take a little away.
    const theory = 100 * 10 ** (-snrDb / 20);
    expect(air.evmPercent!).toBeGreaterThan(0.85 * theory);
    expect(air.evmPercent!).toBeLessThan(1.3 * theory);
    expect(air.points.length).toBeLessThanOrEqual(3000);
    expect(air.evmBySubcarrier!.x.length).toBeGreaterThan(100);
  });

  it.each([
    ['half the spacing', 15e3, 'normal'], ['twice the spacing', 60e3, 'normal'], ['the extended prefix', 30e3, 'extended'],
  ])('stays open under %s, near what random points give', (_, subcarrierSpacingHz, cyclicPrefix) => {
    const iq = smallOfdm(NR30);
    const { found } = analyseWindow({ iq, startSample: 0, sampleRateHz: NR30.rateHz });
    const wrong = demodulateUnder(source(iq, NR30.rateHz), { subcarrierSpacingHz, cyclicPrefix }, { under: 'b', grid: found!.grid, order: 'qpsk' });
    expect(wrong.closes).toBe(false);
    if (wrong.evmPercent !== null) expect(wrong.evmPercent / wrong.evmRandomPercent!).toBeGreaterThan(0.85);
  });

  it('finds its own timing where no grid is given, at a rate that is not native', () => {
    const plan = { ...NR30, rateHz: 6.25e6, subcarriers: 156 };
    const iq = smallOfdm(plan);
    const air = demodulateUnder(source(iq, plan.rateHz), { subcarrierSpacingHz: 30e3, cyclicPrefix: 'normal' }, { under: 'a' });
    expect(air.closes).toBe(true);
    expect(air.evmPercent!).toBeLessThan(9);
  });

  it('tells a short guard interval from a long one', () => {
    const plan: SmallOfdm = { spacingHz: 312.5e3, prefixS: () => 0.4e-6, subcarriers: 52, rateHz: 20e6, durationS: 1e-3, snrDb: 25 };
    const iq = smallOfdm(plan);
    const { found } = analyseWindow({ iq, startSample: 0, sampleRateHz: 20e6 });
    const under = (cyclicPrefix: string) => demodulateUnder(source(iq, 20e6), { subcarrierSpacingHz: 312.5e3, cyclicPrefix }, { under: 'a', grid: found!.grid, order: 'qpsk' });
    expect(under('short').closes).toBe(true);
    expect(under('normal').closes).toBe(false);
  });

  it('says why where nothing can be demodulated', () => {
    const iq = smallOfdm({ ...NR30, durationS: 1e-3 });
    const none = demodulateUnder(source(iq, NR30.rateHz), { subcarrierSpacingHz: 25e3, cyclicPrefix: null }, { under: 'a' });
    expect(none.closes).toBe(false);
    expect(none.evmPercent).toBeNull();
    expect(none.reason).toMatch(/name no spacing and prefix/);
  });
});
