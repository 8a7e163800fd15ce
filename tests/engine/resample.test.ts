import { describe, expect, it } from 'vitest';
import { mix } from '#engine/vector/mix';
import { meanPower } from '#engine/vector/power';
import { resample } from '#engine/vector/resample';

/** A band-limited signal is its own definition at any rate: exp(j2πft) read at other times. */
function tone(hz: number, rateHz: number, samples: number): Float32Array {
  const iq = new Float32Array(2 * samples);
  for (let n = 0; n < samples; n++) {
    iq[2 * n] = Math.cos((2 * Math.PI * hz * n) / rateHz);
    iq[2 * n + 1] = Math.sin((2 * Math.PI * hz * n) / rateHz);
  }
  return iq;
}

function errorDb(got: Float32Array, want: Float32Array, margin: number): number {
  let sum = 0;
  for (let i = 2 * margin; i < got.length - 2 * margin; i++) sum += (got[i] - want[i]) ** 2;
  return 10 * Math.log10(sum / (got.length / 2 - 2 * margin));
}

const RATIOS: [number, number][] = [
  [30.72e6, 1.92e6], [25e6, 30.72e6], [122.88e6, 15.36e6], [20e6, 19.7654321e6], [61.44e6, 20e6], [1.92e6, 30.72e6],
];

describe('resampling', () => {
  it.each(RATIOS)('reads a tone at the times of the new rate, %d to %d', (fromHz, toHz) => {
    const samples = Math.ceil(400 * Math.max(1, fromHz / toHz));
    for (const part of [-0.45, -0.2, 0.01, 0.3, 0.455]) {
      const hz = part * Math.min(fromHz, toHz);
      const got = resample(tone(hz, fromHz, samples), fromHz, toHz);
      expect(got.length).toBe(2 * Math.floor((samples * toHz) / fromHz));
      const margin = Math.ceil(50 * Math.max(1, toHz / fromHz));
      expect(errorDb(got, tone(hz, toHz, got.length / 2), margin)).toBeLessThan(-60);
    }
  });

  it('stops what would fold back by 65 dB', () => {
    for (const part of [0.56, 0.8, 1.1, 2.3, 5.9]) {
      const got = resample(tone(part * 2e6, 25e6, 9000), 25e6, 2e6);
      expect(10 * Math.log10(meanPower(got, 100, got.length / 2 - 100))).toBeLessThan(-65);
    }
  });

  it('moves the signal up first, in phase across windows', () => {
    const whole = resample(tone(1e6, 20e6, 4000), 20e6, 5e6, { shiftHz: -1.5e6 });
    expect(errorDb(whole, tone(-0.5e6, 5e6, 1000), 100)).toBeLessThan(-60);
    const part = resample(tone(1e6, 20e6, 4000).subarray(2 * 2000), 20e6, 5e6, { shiftHz: -1.5e6, startSample: 2000 });
    expect(errorDb(part, whole.subarray(2 * 500), 100)).toBeLessThan(-60);
  });

  it('refuses a rate that is none', () => {
    expect(() => resample(new Float32Array(8), 0, 1)).toThrow(RangeError);
  });
});

describe('mixing', () => {
  it('multiplies by exp(j2πft), exactly enough after ten million samples', () => {
    const start = 10_000_000;
    const got = mix(tone(0, 1, 3000), 1_234_567.8, 30.72e6, start);
    let worst = 0;
    for (const n of [0, 1, 1023, 1024, 2999]) {
      const cycles = (BigInt(start + n) * 12_345_678n) % 307_200_000n;
      const angle = (2 * Math.PI * Number(cycles)) / 307_200_000;
      worst = Math.max(worst, Math.abs(got[2 * n] - Math.cos(angle)), Math.abs(got[2 * n + 1] - Math.sin(angle)));
    }
    expect(worst).toBeLessThan(1e-6);
  });
});
