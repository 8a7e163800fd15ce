import { describe, expect, it } from 'vitest';
import { findGap } from '#engine/evidence/sample-gaps';
import { nrPrefix, smallOfdm } from '../support/small-ofdm.js';

const RATE = 7.68e6;
const SIZE = 256;
const PLAN = { spacingHz: 30e3, prefixS: nrPrefix(1), subcarriers: 180, rateHz: RATE, durationS: 20e-3, snrDb: 12 };
// 30 kHz, normal prefix (TS 38.211 clause 5.3.1): 18 samples, 22 in the first of 14 symbols.
const GRID = { startSample: 0, usefulSamples: SIZE, prefixSamples: Array.from({ length: 14 }, (_, l) => (l === 0 ? 22 : 18)), subcarrierSpacingHz: 30e3, referenceHz: 0, placed: false };

function without(iq: Float32Array, losses: readonly { at: number; count: number }[]): Float32Array {
  const kept = Array.from({ length: iq.length / 2 }, (_, n) => n).filter((n) => losses.every(({ at, count }) => n < at || n >= at + count));
  return Float32Array.from(kept.flatMap((n) => [iq[2 * n]!, iq[2 * n + 1]!]));
}

/** Two equally strong echoes whose weights change from one half millisecond to the next. */
function flutter(iq: Float32Array): Float32Array {
  const late = 10;
  return iq.map((v, i) => (Math.floor(i / 2 / 3840) % 2 === 0 ? v + 0.9 * (iq[i - 2 * late] ?? 0) : 0.9 * v + (iq[i - 2 * late] ?? 0)));
}

describe('lost samples', () => {
  it('finds none where none are lost, though echoes come and go', () => {
    const iq = smallOfdm(PLAN);
    expect(findGap({ iq, startSample: 0, sampleRateHz: RATE }, GRID)).toBeNull();
    expect(findGap({ iq: flutter(iq), startSample: 0, sampleRateHz: RATE }, GRID)).toBeNull();
  });

  it('counts every loss and places each to a stretch', () => {
    const losses = [{ at: 30_000, count: 91 }, { at: 71_000, count: 500 }, { at: 110_000, count: 37 }];
    const gap = findGap({ iq: without(smallOfdm(PLAN), losses), startSample: 0, sampleRateHz: RATE }, GRID)!;
    expect(gap.count).toBe(3);
    // 91 samples of 274 in a symbol.
    expect(Math.abs(gap.lostSamples - 91)).toBeLessThanOrEqual(2);
    const seen = [30_000, 71_000 - 91, 110_000 - 591];
    gap.places.forEach((place, i) => expect(Math.abs(place - seen[i]!)).toBeLessThanOrEqual(3840));
  });
});
