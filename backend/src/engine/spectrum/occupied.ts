import type { Density } from './welch.js';

export interface Band {
  readonly lowHz: number;
  readonly highHz: number;
}

export interface Occupancy {
  /** Noise in one bin; null where no flat floor can be told from the signal. */
  readonly floor: number | null;
  /** From the lowest to the highest edge of all that stands out; null where nothing does. */
  readonly occupied: Band | null;
  /** What stands out, band by band, strongest first. */
  readonly bands: readonly (Band & { readonly power: number })[];
  /** Bandwidth that holds 99 % of the power above the floor, 0.5 % left out on either side. */
  readonly occupiedBandwidthHz: number | null;
  /** Power above the floor, and the floor's power within the occupied band; full scale 1. */
  readonly signalPower: number;
  readonly noisePower: number;
}

/** Two stretches nearer than this (as a part of the capture's band) are one band: unused resource blocks lie within a carrier. */
const BRIDGE = 0.03;

/**
 * What stands out of the floor. The floor is the lowest level at which a fair part of the
 * spectrum lies flat: a receive filter's slope towards the band's edges is not flat and does not
 * count. Where the signal fills the capture, or only noise is there, the whole is one level and
 * nothing stands out.
 */
export function occupancy(density: Density): Occupancy {
  const smooth = smoothed(density.power, Math.max(1, Math.round(density.power.length / 256)));
  const floor = flatFloor(smooth);
  if (floor === null) return nothing(null);
  const scatter = 1 / Math.sqrt(density.averages * Math.max(1, density.power.length / 256));
  const threshold = floor * (1 + Math.max(0.2, 6 * scatter));
  const runs = bridged(runsAbove(density.power, smooth, Math.max(threshold, skirtLevel(smooth, floor))), BRIDGE * smooth.length);
  const bands = runs.map((run) => toBand(run, { density, floor })).filter((b) => b.power > 0);
  if (bands.length === 0) return nothing(floor);
  const total = bands.reduce((sum, b) => sum + b.power, 0);
  const strong = bands.filter((b) => b.power > 0.004 * total).sort((a, b) => b.power - a.power);
  const occupied = { lowHz: Math.min(...strong.map((b) => b.lowHz)), highHz: Math.max(...strong.map((b) => b.highHz)) };
  return {
    floor, occupied, bands: strong,
    occupiedBandwidthHz: ninetyNinePercent({ density, floor }, occupied),
    signalPower: total,
    noisePower: (floor * (occupied.highHz - occupied.lowHz)) / density.binHz,
  };
}

function nothing(floor: number | null): Occupancy {
  return { floor, occupied: null, bands: [], occupiedBandwidthHz: null, signalPower: 0, noisePower: 0 };
}

/** Moving average over 2·reach + 1 bins, circular: the spectrum of a sampled signal is. */
export function smoothed(values: Float64Array, reach: number): Float64Array {
  const n = values.length;
  const out = new Float64Array(n);
  let sum = 0;
  for (let i = -reach; i <= reach; i++) sum += values[(i + n) % n];
  for (let i = 0; i < n; i++) {
    out[i] = sum / (2 * reach + 1);
    sum += values[(i + reach + 1) % n] - values[(i - reach + n) % n];
  }
  return out;
}

/** The mean of the lowest 1 dB step of level that holds at least a 25th of all bins and has no wide step just above. */
function flatFloor(smooth: Float64Array): number | null {
  const sorted = Float64Array.from(smooth).filter((v) => v > 0).sort();
  const need = Math.ceil(sorted.length / 25);
  for (let i = 0; i + need <= sorted.length; i++) {
    if (sorted[i + need - 1] > sorted[i] * 1.26) continue;
    let end = i + need;
    while (end < sorted.length && sorted[end] <= sorted[i] * 1.35) end++;
    return sorted[i + ((end - i) >> 1)];
  }
  return null;
}

/** Symbols end abruptly, so that a strong carrier has skirts above the noise: what lies 15 dB below it is not the carrier. */
const SKIRT = 0.03;

function skirtLevel(smooth: Float64Array, floor: number): number {
  const top = Float64Array.from(smooth).sort()[Math.floor(0.98 * smooth.length)];
  return floor + SKIRT * Math.max(0, top - floor);
}

interface Run { from: number; to: number }

function runsAbove(raw: Float64Array, smooth: Float64Array, threshold: number): Run[] {
  const runs: Run[] = [];
  let from = -1;
  for (let i = 0; i <= smooth.length; i++) {
    const above = i < smooth.length && smooth[i] > threshold;
    if (above && from < 0) from = i;
    if (!above && from >= 0) {
      runs.push(sharpened({ from, to: i }, raw, smooth));
      from = -1;
    }
  }
  return runs;
}

/** The smoothing widens a band by its reach: the edge lies where the unsmoothed level crosses half of the level inside. */
function sharpened(run: Run, raw: Float64Array, smooth: Float64Array): Run {
  const reach = Math.max(1, Math.round(raw.length / 256));
  const edge = (from: number, step: 1 | -1) => {
    const inside = smooth[Math.min(run.to - 1, Math.max(run.from, from + step * 2 * reach))];
    let at = from;
    const stop = 3 * reach;
    for (let i = 0; i < stop && at >= run.from && at < run.to && raw[at] < inside / 2; i++) at += step;
    return Math.min(run.to - 1, Math.max(run.from, at));
  };
  return { from: edge(run.from, 1), to: edge(run.to - 1, -1) + 1 };
}

function bridged(runs: Run[], gap: number): Run[] {
  const out: Run[] = [];
  for (const run of runs) {
    const last = out.at(-1);
    if (last && run.from - last.to <= gap) last.to = run.to;
    else out.push({ ...run });
  }
  return out;
}

interface Levelled { density: Density; floor: number }

function toBand(run: Run, { density, floor }: Levelled): Band & { power: number } {
  let power = 0;
  for (let i = run.from; i < run.to; i++) power += density.power[i] - floor;
  const { startHz, binHz } = density;
  return { lowHz: startHz + (run.from - 0.5) * binHz, highHz: startHz + (run.to - 0.5) * binHz, power };
}

function ninetyNinePercent({ density, floor }: Levelled, band: Band): number {
  const { startHz, binHz, power } = density;
  const at = (hz: number) => Math.min(power.length - 1, Math.max(0, Math.round((hz - startHz) / binHz)));
  const low = at(band.lowHz);
  const high = at(band.highHz);
  let total = 0;
  for (let i = low; i <= high; i++) total += power[i] - floor;
  const edge = (from: number, step: 1 | -1) => {
    let left = 0.005 * total;
    let i = from;
    for (; i >= low && i <= high; i += step) {
      const here = power[i] - floor;
      if (here >= left) return i - step * (0.5 - Math.max(0, left) / Math.max(here, 1e-300));
      left -= here;
    }
    return i;
  };
  return (edge(high, -1) - edge(low, 1)) * binHz;
}
