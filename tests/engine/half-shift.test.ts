import { describe, expect, it } from 'vitest';
import { halfShiftOf } from '#engine/lte/half-shift';

/**
 * Worked by hand from the standards: carriers on whole 100 kHz (TS 36.104 clause 5.7.2), 15 kHz
 * subcarriers, the uplink's half a subcarrier off (TS 36.211 clause 5.6).
 */
const question = { edgeHz: null, scatterHz: 20 };
const folded = (hz: number) => hz - 15e3 * Math.round(hz / 15e3);

describe('the half subcarrier of an uplink', () => {
  it.each([
    { carrierHz: 847e6, centreHz: 847e6, shift: true },
    { carrierHz: 847e6, centreHz: 847e6, shift: false },
    // A recorder tuned 3.817 MHz beside the carrier: the centre is no carrier, the raster tells.
    { carrierHz: 850.1e6, centreHz: 846_283_211, shift: true },
    { carrierHz: 850.1e6, centreHz: 846_283_211, shift: false },
    { carrierHz: 897.7e6, centreHz: 898.5e6, shift: true },
  ])('$carrierHz Hz seen from $centreHz Hz, shift $shift', ({ carrierHz, centreHz, shift }) => {
    const clock = 0.3e-6 * carrierHz;
    const placeHz = carrierHz - centreHz + (shift ? 7500 : 0) + clock;
    // A carrier of 25 blocks: its lowest subcarrier lies 150 spacings below the middle.
    expect(halfShiftOf({ ...question, centreHz, residueHz: folded(placeHz), edgeHz: placeHz - 150 * 15e3 }).value).toBe(shift);
    expect(halfShiftOf({ ...question, centreHz, residueHz: folded(placeHz) }).value).toBe(shift);
  });

  it('stays open where two clocks may differ by as much, and beside a raster that they blur', () => {
    // 2.1 ppm of 3.7 GHz are 7.8 kHz.
    expect(halfShiftOf({ ...question, centreHz: 3.7e9, residueHz: 7500 }).value).toBeNull();
    // 2.1 ppm of 1.9 GHz are 4 kHz, the raster leaves 2.5 kHz.
    expect(halfShiftOf({ ...question, centreHz: 1_900_033_217, residueHz: folded(1900e6 + 7500 - 1_900_033_217) }).value).toBeNull();
    expect(halfShiftOf({ ...question, centreHz: null, residueHz: 7500 }).value).toBeNull();
  });
});
