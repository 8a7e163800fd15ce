import type { SampleSource, Window } from '../types.js';
import { meanPower } from '../vector/power.js';

export interface WindowPlan {
  /** Length of a window, s; default 20 ms, the longest period of a synchronisation block by default. */
  readonly windowS?: number;
  /** How many windows beyond the first; default 3. */
  readonly further?: number;
}

const PROBES = 128;
const PROBE_SAMPLES = 2048;

/** Mean powers this near are one level. */
const SAME_LEVEL = 0.03;

/** True where a window's power is another's: of what never pauses it then shows no more. */
export function isSameLevel(power: number, other: number): boolean {
  return Math.abs(other - power) < SAME_LEVEL * power;
}

/**
 * Where to look, in order: the first 20 ms, then the places further on where the level is
 * highest. Reads at most 128 probes beside them, whatever the capture's length. Starts in samples.
 */
export function chooseWindows(source: SampleSource, plan: WindowPlan = {}): number[] {
  const { windowS = 0.02, further = 3 } = plan;
  const length = Math.round(windowS * source.sampleRateHz);
  const places = Math.floor(source.samples / length);
  if (places <= 1 || further === 0) return [0];
  const step = Math.max(1, Math.ceil((places - 1) / PROBES));
  const levels: { start: number; power: number }[] = [];
  for (let p = 1; p < places; p += step) {
    levels.push({ start: p * length, power: probe(source, p * length, length) });
  }
  levels.sort((a, b) => b.power - a.power);
  return [0, ...levels.slice(0, further).map((l) => l.start)];
}

/** Four short looks spread over a window: a pause or a single burst does not decide alone. */
function probe(source: SampleSource, start: number, length: number): number {
  let sum = 0;
  for (let i = 0; i < 4; i++) {
    const count = Math.min(PROBE_SAMPLES / 4, length);
    sum += meanPower(source.read(start + Math.floor((i * length) / 4), count));
  }
  return sum / 4;
}

export function readWindow(source: SampleSource, startSample: number, windowS = 0.02): Window {
  const iq = source.read(startSample, Math.round(windowS * source.sampleRateHz));
  return { iq, startSample, sampleRateHz: source.sampleRateHz };
}
