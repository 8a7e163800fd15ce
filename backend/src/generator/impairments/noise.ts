import { Random } from '../random.js';

/** Adds white Gaussian noise of a given power per sample, in place. */
export function addNoise(iq: Float32Array, power: number, random: Random): void {
  const sigma = Math.sqrt(power / 2);
  for (let i = 0; i < iq.length; i++) iq[i] += sigma * random.normal();
}

/**
 * Noise power per sample that gives a signal-to-noise ratio in the occupied bandwidth, while the
 * signal is on: noise is white over the sample rate, the signal only fills `occupiedHz` of it.
 */
export function noisePower({ snrDb, onPower, occupiedHz, sampleRateHz }: { snrDb: number; onPower: number; occupiedHz: number; sampleRateHz: number }): number {
  return (onPower / 10 ** (snrDb / 10)) * (sampleRateHz / occupiedHz);
}
