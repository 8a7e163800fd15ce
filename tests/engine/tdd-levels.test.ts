import { describe, expect, it } from 'vitest';
import { patternLikelihood, symbolLevels, type TddPattern } from '#engine/evidence/tdd-levels';
import { noise } from './air-capture.js';

const RATE_HZ = 7.68e6;

/** Noise that is 20 dB up in the downlink symbols of a pattern: `on` of `period` symbols, each of `symbolS`, from `startS` on. */
function keyed({ on, period, symbolS, startS }: { on: number; period: number; symbolS: number; startS: number }) {
  const samples = Math.round(0.012 * RATE_HZ);
  const iq = noise(samples, 8);
  for (let n = 0; n < samples; n++) {
    const symbol = Math.floor((n / RATE_HZ - startS) / symbolS);
    const quiet = ((symbol % period) + period) % period >= on;
    if (quiet) { iq[2 * n] *= 0.1; iq[2 * n + 1] *= 0.1; }
  }
  return { iq, startSample: 0, sampleRateHz: RATE_HZ };
}

const EXTENDED: TddPattern = { periodS: 1.25e-3, downlinkSlots: 3, downlinkSymbols: 10, uplinkSlots: 1, uplinkSymbols: 2, referenceSpacingHz: 60e3 };
const NORMAL: TddPattern = { periodS: 2.5e-3, downlinkSlots: 3, downlinkSymbols: 6, uplinkSlots: 1, uplinkSymbols: 4, referenceSpacingHz: 30e3 };

describe('a declared downlink-uplink pattern against the level of each symbol', () => {
  // 60 kHz with the extended prefix has 12 symbols a slot and 48 a subframe (TS 38.211 Table 4.3.2-2); 30 kHz has 14 and 28.
  const cases = [
    { name: '12 symbols a slot', pattern: EXTENDED, on: 3 * 12 + 10, period: 60, symbolS: 1e-3 / 48, spacingHz: 60e3, symbolsPerSlot: 12 },
    { name: '14 symbols a slot', pattern: NORMAL, on: 3 * 14 + 6, period: 70, symbolS: 1e-3 / 28, spacingHz: 30e3, symbolsPerSlot: 14 },
    { name: 'a pattern counted at 30 kHz, a carrier at 60 kHz', pattern: NORMAL, on: 2 * (3 * 14 + 6), period: 140, symbolS: 1e-3 / 56, spacingHz: 60e3, symbolsPerSlot: 14 },
  ];
  for (const { name, pattern, on, period, symbolS, spacingHz, symbolsPerSlot } of cases) {
    it(name, () => {
      const window = keyed({ on, period, symbolS, startS: 0.0007 });
      const levels = symbolLevels(window, { startSample: 0.0007 * RATE_HZ, spacingHz, symbolsPerSlot, noisePower: null });
      expect(levels.decided).toBe(true);
      expect(patternLikelihood(levels, pattern).logLikelihood).toBe(0);
      // One slot less of downlink, the uplink right after it: energy where the transmitter should be silent.
      const shorter = { ...pattern, downlinkSlots: pattern.downlinkSlots - 1, uplinkSlots: pattern.uplinkSlots + 1 };
      expect(patternLikelihood(levels, shorter).logLikelihood).toBeLessThan(-8);
      // A slot more of it: silence at the edge of the declared downlink in every period.
      const longer = { ...pattern, downlinkSlots: pattern.downlinkSlots + 1, uplinkSlots: 0, uplinkSymbols: 0 };
      expect(patternLikelihood(levels, longer).logLikelihood).toBeLessThan(-5);
    });
  }
});
