import { blockPowers } from '../vector/power.js';

export interface Activity {
  /** Stretches with the signal on, in samples from the window's start, in order. */
  readonly segments: readonly { readonly start: number; readonly end: number; readonly power: number }[];
  /** Mean power while on and while off; `off` is null where the signal never pauses. */
  readonly onPower: number;
  readonly offPower: number | null;
}

export interface ActivityOptions {
  /** Bandwidth of what is on the air; the level is averaged over some 100 of its independent samples. Default: the rate. */
  readonly bandwidthHz?: number;
}

/**
 * When the signal is on, by level alone. A window without pauses (or without a signal) is one
 * segment. Edges are good to about 50/bandwidth seconds.
 */
export function activity(iq: Float32Array, sampleRateHz: number, options: ActivityOptions = {}): Activity {
  const bandwidth = Math.min(sampleRateHz, options.bandwidthHz ?? sampleRateHz);
  const block = Math.max(4, Math.round((25 * sampleRateHz) / bandwidth));
  const raw = blockPowers(iq, block);
  const samples = iq.length >> 1;
  const whole = { start: 0, end: samples, power: average(raw) };
  if (raw.length < 12) return { segments: [whole], onPower: whole.power, offPower: null };
  const level = raw.map((_, i) => average(raw.subarray(Math.max(0, i - 2), i + 2)));
  const split = twoLevels(level);
  if (!split) return { segments: [whole], onPower: whole.power, offPower: null };
  const runs = runsOf(raw, level, split).filter((r) => r.to - r.from >= 3);
  const segments = runs.map(({ from, to }) => ({
    start: from * block, end: Math.min(samples, to * block), power: average(raw.subarray(from, to)),
  }));
  return { segments, onPower: split.on, offPower: split.off };
}

function average(values: Float64Array): number {
  let sum = 0;
  for (const v of values) sum += v;
  return sum / Math.max(1, values.length);
}

interface Split { on: number; off: number; threshold: number }

/**
 * Two levels, if there are two: the mean square of the log level about two means against about
 * one (Otsu 1979), then a gap of at least 1.5 dB that most blocks keep clear of.
 */
function twoLevels(level: Float64Array): Split | null {
  const sorted = Float64Array.from(level, (v) => Math.log(Math.max(v, 1e-30))).sort();
  const cut = otsu(sorted);
  if (cut === null) return null;
  const low = sorted.subarray(0, cut);
  const high = sorted.subarray(cut);
  const off = average(low);
  const on = average(high);
  const spread = Math.sqrt((variance(low) * low.length + variance(high) * high.length) / sorted.length);
  if (on - off < Math.max(0.35, 3 * spread)) return null;
  return { on: Math.exp(on), off: Math.exp(off), threshold: Math.log(0.5 * Math.exp(on) + 0.5 * Math.exp(off)) };
}

function otsu(sorted: Float64Array): number | null {
  const n = sorted.length;
  const total = sorted.reduce((a, b) => a + b, 0);
  let best = 0;
  let at: number | null = null;
  let sum = 0;
  const fewest = Math.max(2, Math.round(n / 500));
  for (let i = 1; i < n; i++) {
    sum += sorted[i - 1];
    if (i < fewest || n - i < fewest) continue;
    const between = (i / n) * (1 - i / n) * (sum / i - (total - sum) / (n - i)) ** 2;
    if (between > best) {
      best = between;
      at = i;
    }
  }
  return at;
}

function variance(values: Float64Array): number {
  const m = average(values);
  return values.reduce((a, v) => a + (v - m) ** 2, 0) / Math.max(1, values.length);
}

/** Runs of the averaged level above the threshold, their ends moved to where single blocks cross it. */
function runsOf(raw: Float64Array, level: Float64Array, { threshold }: Split): { from: number; to: number }[] {
  const limit = Math.exp(threshold);
  const runs: { from: number; to: number }[] = [];
  let from = -1;
  for (let i = 0; i <= level.length; i++) {
    const on = i < level.length && level[i] > limit;
    if (on && from < 0) from = i;
    if (!on && from >= 0) {
      runs.push(trimmed(raw, { from, to: i }, limit));
      from = -1;
    }
  }
  return merged(runs);
}

function trimmed(raw: Float64Array, run: { from: number; to: number }, limit: number): { from: number; to: number } {
  let { from, to } = run;
  for (let i = 0; i < 3 && from < to && raw[from] < limit; i++) from++;
  for (let i = 0; i < 3 && to > from && raw[to - 1] < limit; i++) to--;
  return { from, to };
}

/** A pause of fewer than three blocks is a dip of the envelope, not a pause. */
function merged(runs: { from: number; to: number }[]): { from: number; to: number }[] {
  const out: { from: number; to: number }[] = [];
  for (const run of runs) {
    const last = out.at(-1);
    if (last && run.from - last.to < 3) last.to = run.to;
    else out.push(run);
  }
  return out;
}
