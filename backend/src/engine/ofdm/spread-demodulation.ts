import type { Demodulation } from '#shared/decode';
import { evmPercent, openness, ORDERS, randomEvmPercent, type Order } from './constellation.js';
import { patternOf, type DemodulationSettings } from './settings.js';

const POINTS = 1500;
/** Below this part of what random points give, the constellation has closed. */
const CLOSED = 0.7;
/** A finer order has to close clearly better: it comes near to any points. */
const CLEARER = 0.93;

/** Points of a single carrier, as they are after its transform back, held against the order on which they close. */
export function spreadDemodulation(points: Float64Array, settings: DemodulationSettings): Demodulation {
  const order = orderOf(points);
  const closes = openness(points, order) < CLOSED;
  return {
    under: 'air',
    settings: {
      subcarrierSpacingHz: settings.subcarrierSpacingHz, cyclicPrefix: settings.cyclicPrefix,
      cyclicPrefixS: settings.cyclicPrefixS ?? patternOf(settings)?.cyclicPrefixS ?? null, fftSize: settings.fftSize ?? null,
    },
    points: thinned(points), order, closes,
    evmPercent: evmPercent(points, order), evmRandomPercent: randomEvmPercent(points, order), evmBySubcarrier: null,
    reason: closes ? null : 'the points do not gather about a constellation',
  };
}

function orderOf(points: Float64Array): Order {
  return ORDERS.filter((order) => order !== 'bpsk').reduce((best, order) => (openness(points, order) < CLEARER * openness(points, best) ? order : best), 'qpsk');
}

function thinned(points: Float64Array): number[] {
  const total = points.length / 2;
  const count = Math.min(POINTS, total);
  return Array.from({ length: 2 * count }, (_, i) => Number(points[2 * Math.floor(((i >> 1) * total) / count) + (i & 1)]!.toFixed(4)));
}
