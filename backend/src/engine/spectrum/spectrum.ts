import type { Curve } from '#shared/decode';
import { decibels } from '../vector/power.js';
import { occupancy, type Occupancy } from './occupied.js';
import { welch, type Density, type WelchOptions } from './welch.js';

export interface SpectrumResult extends Occupancy {
  readonly density: Density;
  /** Signal to noise within the occupied band, averaged over the window; null where either cannot be told. */
  readonly snrDb: number | null;
}

/** The spectrum of one window: density, floor, and what stands out. */
export function spectrumOf(iq: Float32Array, sampleRateHz: number, options: WelchOptions = {}): SpectrumResult {
  const density = welch(iq, sampleRateHz, options);
  const found = occupancy(density);
  const snrDb = found.occupied && found.noisePower > 0 ? decibels(found.signalPower / found.noisePower) : null;
  return { ...found, density, snrDb };
}

/** Level in dB of full scale per bin against MHz, at most `points` of them, each the mean of the bins that it stands for. */
export function spectrumCurve({ density, occupied }: SpectrumResult, points = 512): Curve {
  const { power, startHz, binHz } = density;
  const group = Math.max(1, Math.ceil(power.length / points));
  const x: number[] = [];
  const y: number[] = [];
  for (let from = 0; from < power.length; from += group) {
    const to = Math.min(power.length, from + group);
    let sum = 0;
    for (let i = from; i < to; i++) sum += power[i];
    x.push(round((startHz + ((from + to - 1) / 2) * binHz) / 1e6, 6));
    y.push(round(decibels(Math.max(1e-20, sum / (to - from))), 2));
  }
  const markers = occupied
    ? [{ x: round(occupied.lowHz / 1e6, 4), label: 'lower edge' }, { x: round(occupied.highHz / 1e6, 4), label: 'upper edge' }]
    : undefined;
  return { title: 'Spectrum', xLabel: 'Frequency', xUnit: 'MHz', yLabel: 'Level', yUnit: 'dBFS per bin', x, y, markers };
}

function round(value: number, digits: number): number {
  return Number(value.toFixed(digits));
}
