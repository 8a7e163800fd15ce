import type { SymbolGrid, Window } from '../types.js';

/** Where symbols lie in one stretch of the capture, against the grid. */
interface Timing {
  readonly atSample: number;
  /** Samples by which symbols come later than the grid says. */
  readonly shift: number;
}

export interface Gap {
  readonly atSample: number;
  readonly lostSamples: number;
  readonly count: number;
  /** First samples after each loss, in the capture, a stretch's length uncertain. */
  readonly places: readonly number[];
  readonly confidence: number;
  readonly proof: string;
}

/** Correlation of prefix and symbol's end below which a stretch says nothing of its timing. */
const LEAST_CORRELATION = 0.25;
/** Stretches on each side of a jump that have to agree. */
const WITNESSES = 3;
/** Deviations of the timing that a step has to exceed. */
const CLEAR = 7;
/** Samples: less is the channel's or the clock's doing. */
const LEAST_STEP = 4;
/** Changes from which on the drift of two unlike clocks is read. */
const DRIFT_SPAN = 8;

/**
 * Samples lost while recording: from one place on all symbols come earlier than the grid says.
 * Each stretch of about half a millisecond (at least six symbols) is timed by its prefixes. Null
 * where nothing jumps. A loss of whole symbols is not seen where all symbols are equal. The first
 * loss is described, all of them are counted.
 */
export function findGap(window: Window, grid: SymbolGrid): Gap | null {
  const timings = withoutDrift(timingsOf(window, grid));
  const symbol = grid.usefulSamples + grid.prefixSamples.at(-1)!;
  const steps = stepsIn(timings, symbol).sort((a, b) => a.at - b.at);
  const [first] = steps;
  if (!first) return null;
  return {
    atSample: Math.round(first.at), lostSamples: Math.round(first.step < 0 ? -first.step : symbol - first.step), count: steps.length, places: steps.map((s) => Math.round(s.at)),
    confidence: Math.min(0.97, 0.7 + 0.03 * Math.max(...steps.map((s) => Math.abs(s.step) / s.doubt))),
    proof: `From there on every symbol begins ${Math.abs(first.step).toFixed(1)} samples ${first.step < 0 ? 'earlier' : 'later'} than the grid of the symbols before (scatter ${first.doubt.toFixed(2)} samples)`,
  };
}

interface Step { readonly at: number; readonly step: number; readonly doubt: number; readonly left: number }

/** The clearest step, then those before and after it. */
function stepsIn(timings: readonly Timing[], symbol: number): Step[] {
  let best: (Step & { index: number }) | null = null;
  for (let i = WITNESSES; i + WITNESSES <= timings.length; i += 1) {
    const step = stepAt(timings, i, symbol);
    if (step && (!best || Math.abs(step.step) - 4 * step.doubt > Math.abs(best.step) - 4 * best.doubt)) best = { at: timings[i]!.atSample, index: i, ...step };
  }
  if (!best) return [];
  best = { ...best, index: firstAfter(timings, best, symbol) };
  best = { ...best, at: timings[best.index]!.atSample };
  // The stretch across the loss belongs to neither side.
  return [best, ...stepsIn(timings.slice(0, best.index), symbol), ...stepsIn(timings.slice(best.index + 1), symbol)];
}

/** The first stretch that is timed nearer to those after the step than to those before. */
function firstAfter(timings: readonly Timing[], { index, step, left }: Step & { index: number }, symbol: number): number {
  for (let i = Math.max(1, index - WITNESSES); i < index + WITNESSES; i += 1) {
    const moved = Math.abs(around(timings[i]!.shift - left, 0, symbol));
    if (Math.abs(around(timings[i]!.shift - left - step, 0, symbol)) < moved) return i;
  }
  return index;
}

/**
 * Two clocks drift apart evenly: the rate that leaves the least sum of changes (their median,
 * weighted by the time between), which a few losses do not move, then the mean of those near it.
 */
function withoutDrift(timings: readonly Timing[]): Timing[] {
  const changes = timings.slice(1).map((t, i) => ({ shift: t.shift - timings[i]!.shift, samples: t.atSample - timings[i]!.atSample }));
  if (changes.length < DRIFT_SPAN) return [...timings];
  const usual = weightedMedian(changes);
  const near = changes.filter((c) => Math.abs(c.shift - usual * c.samples) <= NEAR);
  const slope = near.length < changes.length / 3 ? usual : near.reduce((sum, c) => sum + c.shift, 0) / near.reduce((sum, c) => sum + c.samples, 0);
  return timings.map((t) => ({ ...t, shift: t.shift - slope * t.atSample }));
}

/** Timings are whole samples: a change within this of the usual one is no jump. */
const NEAR = 1.5;

function weightedMedian(changes: readonly { shift: number; samples: number }[]): number {
  const sorted = changes.map((c) => ({ rate: c.shift / c.samples, weight: c.samples })).sort((a, b) => a.rate - b.rate);
  let left = sorted.reduce((sum, c) => sum + c.weight, 0) / 2;
  return (sorted.find((c) => (left -= c.weight) <= 0) ?? sorted[0]!).rate;
}

function stepAt(timings: readonly Timing[], i: number, symbol: number): Omit<Step, 'at'> | null {
  const before = timings.slice(Math.max(0, i - 2 * WITNESSES), i).map((t) => t.shift);
  const after = timings.slice(i, i + 2 * WITNESSES).map((t) => around(t.shift, before[0]!, symbol));
  const left = before.map((shift) => around(shift, before[0]!, symbol));
  const step = around(median(after) - median(left), 0, symbol);
  const doubt = Math.max(0.5, spread(left), spread(after));
  return Math.abs(step) > Math.max(LEAST_STEP, CLEAR * doubt) ? { step, doubt, left: median(left) } : null;
}

/** The representative of `value` nearest to `centre`, modulo `period`. */
function around(value: number, centre: number, period: number): number {
  return value - period * Math.round((value - centre) / period);
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

/**
 * Second greatest distance from the median, as a standard deviation (1.2 of them for six normal
 * values): one stretch may lie across the loss, but timings that jump to and fro between two
 * echoes are no steps.
 */
function spread(values: readonly number[]): number {
  const centre = median(values);
  const away = values.map((value) => Math.abs(value - centre)).sort((a, b) => b - a);
  return (away[1] ?? 0) / 1.2;
}

function timingsOf(window: Window, grid: SymbolGrid): Timing[] {
  const products = new PrefixProducts(window.iq, grid.usefulSamples);
  const starts = symbolStarts(window, grid);
  const perStretch = Math.max(6, Math.round((0.5e-3 * window.sampleRateHz) / (grid.usefulSamples + grid.prefixSamples.at(-1)!)));
  const out: Timing[] = [];
  for (let i = 0; i + perStretch <= starts.length; i += perStretch) {
    const timing = timeStretch(products, starts.slice(i, i + perStretch), grid);
    if (timing !== null) out.push({ atSample: window.startSample + starts[i]!.at, shift: timing });
  }
  return out;
}

interface Start { readonly at: number; readonly prefix: number }

/** First samples of the prefixes inside the window, counted from its start. */
function symbolStarts(window: Window, grid: SymbolGrid): Start[] {
  const { prefixSamples: prefixes, usefulSamples } = grid;
  const period = prefixes.reduce((sum, p) => sum + p + usefulSamples, 0);
  const samples = window.iq.length >> 1;
  const first = grid.startSample - window.startSample;
  let at = first - period * Math.floor(first / period);
  const out: Start[] = [];
  for (let i = 0; at + usefulSamples + prefixes[i % prefixes.length]! < samples; i += 1) {
    const prefix = prefixes[i % prefixes.length]!;
    out.push({ at, prefix });
    at += prefix + usefulSamples;
  }
  return out;
}

/** Where the prefixes of these symbols fit best, in samples against their stated starts; null where nothing fits. */
function timeStretch(products: PrefixProducts, starts: readonly Start[], grid: SymbolGrid): number | null {
  const reach = Math.floor((grid.usefulSamples + grid.prefixSamples.at(-1)!) / 2);
  const coarse = Math.max(1, Math.floor(grid.prefixSamples.at(-1)! / 8));
  let best = { shift: 0, fit: -1 };
  const look = (shift: number): void => {
    const fit = products.fit(starts, shift);
    if (fit > best.fit) best = { shift, fit };
  };
  for (let shift = -reach; shift <= reach; shift += coarse) look(shift);
  const centre = best.shift;
  for (let shift = centre - coarse + 1; shift < centre + coarse; shift += 1) look(shift);
  return best.fit < LEAST_CORRELATION ? null : best.shift;
}

/** Running sums of x(n)·x*(n+N) and of the power, so that any prefix is summed in one step. */
class PrefixProducts {
  private readonly re: Float64Array;
  private readonly im: Float64Array;
  private readonly power: Float64Array;

  constructor(iq: Float32Array, usefulSamples: number) {
    const lag = Math.round(usefulSamples);
    const count = Math.max(0, (iq.length >> 1) - lag);
    this.re = new Float64Array(count + 1);
    this.im = new Float64Array(count + 1);
    this.power = new Float64Array(count + 1);
    for (let n = 0; n < count; n += 1) {
      const a = iq[2 * n]!, b = iq[2 * n + 1]!, c = iq[2 * (n + lag)]!, d = iq[2 * (n + lag) + 1]!;
      this.re[n + 1] = this.re[n]! + a * c + b * d;
      this.im[n + 1] = this.im[n]! + b * c - a * d;
      this.power[n + 1] = this.power[n]! + 0.5 * (a * a + b * b + c * c + d * d);
    }
  }

  /** Correlation coefficient over the prefixes moved by `shift`, 0 to 1. */
  fit(starts: readonly Start[], shift: number): number {
    const last = this.re.length - 1;
    let re = 0, im = 0, power = 0;
    for (const { at, prefix } of starts) {
      const from = Math.round(at) + shift;
      const to = from + Math.floor(prefix);
      if (from < 0 || to > last) continue;
      re += this.re[to]! - this.re[from]!;
      im += this.im[to]! - this.im[from]!;
      power += this.power[to]! - this.power[from]!;
    }
    return power > 0 ? Math.hypot(re, im) / power : 0;
  }
}
