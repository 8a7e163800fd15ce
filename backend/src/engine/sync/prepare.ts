import type { Window } from '../types.js';
import { mean } from '../vector/power.js';
import { mix } from '../vector/mix.js';
import { resample } from '../vector/resample.js';
import type { Working } from './lag-sums.js';

export interface Stretch {
  readonly start: number;
  readonly end: number;
}

export interface Prepared extends Working {
  /** The capture's rate over the working rate. */
  readonly decimation: number;
  /** What was zero in the working samples, Hz against the capture's zero. */
  readonly centreHz: number;
  /** Place of the first working sample in the capture. */
  readonly startSample: number;
  /** Signal-on stretches, in working samples. */
  readonly on: readonly Stretch[];
}

export interface PrepareOptions {
  readonly occupied: { readonly lowHz: number; readonly highHz: number } | null;
  /** Signal-on stretches in samples from the window's start; null: all of it. */
  readonly on: readonly Stretch[] | null;
}

/** Multiples and halves of these keep every cellular spacing that fits the band a whole number of samples. */
const LADDER = [1.92e6, 2.88e6];
const HALVINGS = 5;
const DOUBLINGS = 8;
/** A band narrower than this part of the rate is cut out: the noise beside it would only add scatter. */
const NARROW = 0.42;

/** One window ready for lag products: DC out, the band about zero, and no faster than the band needs. */
export function prepare(window: Window, { occupied, on }: PrepareOptions): Prepared {
  const { sampleRateHz, startSample } = window;
  const flat = withoutMean(window.iq);
  const width = occupied ? Math.min(sampleRateHz, occupied.highHz - occupied.lowHz) : sampleRateHz;
  const middle = occupied ? (occupied.lowHz + occupied.highHz) / 2 : 0;
  const rateHz = width < NARROW * sampleRateHz ? workingRate(width, sampleRateHz) : sampleRateHz;
  const centreHz = Math.abs(middle) > 0.01 * rateHz ? middle : 0;
  const iq = rateHz < sampleRateHz
    ? resample(flat, sampleRateHz, rateHz, { shiftHz: -centreHz, startSample })
    : centreHz === 0 ? flat : mix(flat, -centreHz, sampleRateHz, startSample);
  const decimation = sampleRateHz / rateHz;
  const stretches = (on ?? [{ start: 0, end: window.iq.length >> 1 }])
    .map(({ start, end }) => ({ start: Math.ceil(start / decimation), end: Math.floor(end / decimation) }));
  return { iq, rateHz, bandHz: Math.min(rateHz, width), decimation, centreHz, startSample, on: stretches };
}

function workingRate(widthHz: number, sampleRateHz: number): number {
  const rates = LADDER.flatMap((base) => Array.from({ length: HALVINGS + DOUBLINGS + 1 }, (_, k) => base * 2 ** (k - HALVINGS)));
  const fit = rates.filter((rate) => rate >= 1.25 * widthHz && rate < sampleRateHz).sort((a, b) => a - b);
  return fit[0] ?? sampleRateHz;
}

function withoutMean(iq: Float32Array): Float32Array {
  const [re, im] = mean(iq);
  const out = new Float32Array(iq.length);
  for (let i = 0; i < iq.length; i += 2) {
    out[i] = iq[i] - re;
    out[i + 1] = iq[i + 1] - im;
  }
  return out;
}
