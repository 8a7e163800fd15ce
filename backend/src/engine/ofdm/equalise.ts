import type { Cells } from './cells.js';
import { nearest, type Order } from './constellation.js';
import type { Symbols } from './symbols.js';

/** Blind equalisation of unknown data: one channel for all symbols, one phase for each symbol. */
export interface Equaliser {
  /** Channel by subcarrier, interleaved. */
  readonly channel: Float64Array;
  /** Phase of each symbol at the middle subcarrier, rad. */
  readonly phase: Float64Array;
  /** Phase by which each subcarrier turns against its lower neighbour from one symbol to the next: the two sample clocks' difference. */
  readonly drift: number;
}

/** Subcarriers on each side over which the fourth-power phase is smoothed. */
const SMOOTH = 3;

/**
 * Magnitude from the mean power of each subcarrier, phase from its fourth power: QPSK and every
 * square QAM have a fourth power of constant sign, so that the data fall out of it (Viterbi and
 * Viterbi, IEEE Trans. Inf. Theory 29 (1983) 543). The channel is the same for all symbols and
 * a symbol has one phase: a wrong symbol length, whose error grows from symbol to symbol, does
 * not fit that, and its points stay random. Quarter turns stay open; they do not matter to a
 * square constellation.
 */
export function blindEqualiser(symbols: Symbols, cells: Cells): Equaliser {
  const magnitude = magnitudes(symbols, cells);
  const fourth = fourthPowers(symbols, cells, magnitude);
  const slope = commonSlope(symbols, fourth);
  turnBySlope(symbols, fourth, -slope);
  const drift = commonDrift(symbols, fourth);
  turnByDrift(symbols, fourth, -drift);
  const phases = symbolPhases(symbols, fourth);
  const reference = withoutPilots(referenceOf(symbols, { fourth, phases }));
  const channel = new Float64Array(2 * symbols.width);
  for (let k = 0; k < symbols.width; k++) {
    const angle = (Math.atan2(-reference[2 * k + 1], -reference[2 * k]) + slope * k) / 4;
    channel[2 * k] = magnitude[k] * Math.cos(angle);
    channel[2 * k + 1] = magnitude[k] * Math.sin(angle);
  }
  return { channel, phase: phases.map((p) => p / 4), drift: drift / 4 };
}

export function isActive({ groups, group, active }: Cells, s: number, k: number): boolean {
  const g = Math.floor(k / group);
  return g < groups && active[s * groups + g] === 1;
}

function magnitudes({ values, width, count }: Symbols, cells: Cells): Float64Array {
  const sum = new Float64Array(width);
  const seen = new Float64Array(width);
  for (let s = 0; s < count; s++) {
    for (let k = 0; k < width; k++) {
      if (!isActive(cells, s, k)) continue;
      const i = 2 * (s * width + k);
      sum[k] += values[i] ** 2 + values[i + 1] ** 2;
      seen[k]++;
    }
  }
  return sum.map((v, k) => Math.sqrt(v / Math.max(1, seen[k])));
}

/** (Y / |H|)⁴, interleaved, 0 where nothing is sent. */
function fourthPowers({ values, width, count }: Symbols, cells: Cells, magnitude: Float64Array): Float64Array {
  const out = new Float64Array(2 * width * count);
  for (let s = 0; s < count; s++) {
    for (let k = 0; k < width; k++) {
      if (!isActive(cells, s, k) || magnitude[k] === 0) continue;
      const i = 2 * (s * width + k);
      const a = values[i] / magnitude[k];
      const b = values[i + 1] / magnitude[k];
      const re = a * a - b * b;
      const im = 2 * a * b;
      out[i] = re * re - im * im;
      out[i + 1] = 2 * re * im;
    }
  }
  return out;
}

/** Phase step of the fourth power from one subcarrier to the next (four times a residual delay), over all symbols. */
function commonSlope({ width, count }: Symbols, fourth: Float64Array): number {
  let re = 0;
  let im = 0;
  for (let s = 0; s < count; s++) {
    for (let k = 0; k + 1 < width; k++) {
      const i = 2 * (s * width + k);
      re += fourth[i + 2] * fourth[i] + fourth[i + 3] * fourth[i + 1];
      im += fourth[i + 3] * fourth[i] - fourth[i + 2] * fourth[i + 1];
    }
  }
  return Math.atan2(im, re);
}

function turnBySlope({ width, count }: Symbols, fourth: Float64Array, slope: number): void {
  for (let k = 0; k < width; k++) {
    const c = Math.cos(slope * k);
    const d = Math.sin(slope * k);
    for (let s = 0; s < count; s++) {
      const i = 2 * (s * width + k);
      const re = fourth[i] * c - fourth[i + 1] * d;
      fourth[i + 1] = fourth[i] * d + fourth[i + 1] * c;
      fourth[i] = re;
    }
  }
}

/** Clocks that differ by more than this part are not of one kind of radio; a wrong prefix is off by a hundred times as much. */
const MOST_DRIFT = 60e-6;

/**
 * The drift that lines up all symbols best: the sum over subcarriers of |sum over symbols|², with
 * the symbols' common phases followed from one to the next.
 */
function commonDrift(symbols: Symbols, fourth: Float64Array): number {
  const { width, count } = symbols;
  const phases = followedPhases(symbols, fourth);
  const most = 4 * 2 * Math.PI * MOST_DRIFT * 1.1;
  const step = 1.4 / (count * width);
  const steps = Math.min(60, Math.ceil(most / step));
  let best = 0;
  let top = -1;
  for (let i = -steps; i <= steps; i++) {
    const aligned = alignment(symbols, { fourth, phases, drift: i * step });
    if (aligned > top) {
      top = aligned;
      best = i;
    }
  }
  return best * step;
}

function alignment({ width, count }: Symbols, { fourth, phases, drift }: { fourth: Float64Array; phases: Float64Array; drift: number }): number {
  let total = 0;
  for (let k = 0; k < width; k++) {
    let re = 0;
    let im = 0;
    for (let s = 0; s < count; s++) {
      const angle = -phases[s] - drift * s * (k - width / 2);
      const c = Math.cos(angle);
      const d = Math.sin(angle);
      const i = 2 * (s * width + k);
      re += fourth[i] * c - fourth[i + 1] * d;
      im += fourth[i] * d + fourth[i + 1] * c;
    }
    total += re * re + im * im;
  }
  return total;
}

/** Four times each symbol's phase against the last few before it. */
function followedPhases({ width, count }: Symbols, fourth: Float64Array): Float64Array {
  const phases = new Float64Array(count);
  const recent = new Float64Array(2 * width);
  for (let s = 0; s < count; s++) {
    phases[s] = phaseAgainst(fourth, s, smoothed(recent, SMOOTH));
    for (let i = 0; i < recent.length; i++) recent[i] *= 0.8;
    addTurned(recent, fourth, { s, phase: phases[s] });
  }
  return phases;
}

function turnByDrift({ width, count }: Symbols, values: Float64Array, drift: number): void {
  if (drift === 0) return;
  for (let s = 1; s < count; s++) {
    for (let k = 0; k < width; k++) {
      const angle = drift * s * (k - width / 2);
      const c = Math.cos(angle);
      const d = Math.sin(angle);
      const i = 2 * (s * width + k);
      const re = values[i] * c - values[i + 1] * d;
      values[i + 1] = values[i] * d + values[i + 1] * c;
      values[i] = re;
    }
  }
}

/** Four times each symbol's phase against those before it, then once more against all of them. */
function symbolPhases({ width, count }: Symbols, fourth: Float64Array): Float64Array {
  const phases = new Float64Array(count);
  let reference = new Float64Array(2 * width);
  for (const pass of [0, 1]) {
    const smooth = pass === 1 ? smoothed(reference, SMOOTH) : null;
    const next = new Float64Array(2 * width);
    for (let s = 0; s < count; s++) {
      const against = smooth ?? smoothed(next, SMOOTH);
      phases[s] = phaseAgainst(fourth, s, against);
      addTurned(next, fourth, { s, phase: phases[s] });
    }
    reference = next;
  }
  return phases;
}

function phaseAgainst(fourth: Float64Array, s: number, reference: Float64Array): number {
  const from = s * reference.length;
  let re = 0;
  let im = 0;
  for (let i = 0; i < reference.length; i += 2) {
    re += fourth[from + i] * reference[i] + fourth[from + i + 1] * reference[i + 1];
    im += fourth[from + i + 1] * reference[i] - fourth[from + i] * reference[i + 1];
  }
  return re === 0 && im === 0 ? 0 : Math.atan2(im, re);
}

function addTurned(sum: Float64Array, fourth: Float64Array, { s, phase }: { s: number; phase: number }): void {
  const c = Math.cos(phase);
  const d = -Math.sin(phase);
  const from = s * sum.length;
  for (let i = 0; i < sum.length; i += 2) {
    sum[i] += fourth[from + i] * c - fourth[from + i + 1] * d;
    sum[i + 1] += fourth[from + i] * d + fourth[from + i + 1] * c;
  }
}

function referenceOf({ width, count }: Symbols, { fourth, phases }: { fourth: Float64Array; phases: Float64Array }): Float64Array {
  const sum = new Float64Array(2 * width);
  for (let s = 0; s < count; s++) addTurned(sum, fourth, { s, phase: phases[s] });
  return sum;
}

function smoothed(values: Float64Array, reach: number): Float64Array {
  const n = values.length / 2;
  const out = new Float64Array(values.length);
  for (let k = 0; k < n; k++) {
    for (let j = Math.max(0, k - reach); j <= Math.min(n - 1, k + reach); j++) {
      out[2 * k] += values[2 * j];
      out[2 * k + 1] += values[2 * j + 1];
    }
  }
  return out;
}

/**
 * Smoothed, without those subcarriers that turn against their neighbourhood: pilots on the axes
 * have a fourth power of the other sign.
 */
function withoutPilots(reference: Float64Array): Float64Array {
  let kept = reference;
  for (let pass = 0; pass < 2; pass++) {
    const about = smoothed(kept, SMOOTH);
    kept = reference.map((v, i) => {
      const k = i - (i & 1);
      return reference[k] * about[k] + reference[k + 1] * about[k + 1] < 0 ? 0 : v;
    });
  }
  return smoothed(kept, SMOOTH);
}

/** The equaliser improved once by decisions on a fixed constellation: least squares by subcarrier, then a phase by symbol. */
export function byDecisions(symbols: Symbols, cells: Cells, { equaliser, order }: { equaliser: Equaliser; order: Order }): Equaliser {
  const { width, count, values } = symbols;
  const cross = new Float64Array(2 * width);
  const power = new Float64Array(width);
  const phase = new Float64Array(count);
  for (let s = 0; s < count; s++) {
    let re = 0;
    let im = 0;
    for (let k = 0; k < width; k++) {
      if (!isActive(cells, s, k)) continue;
      const [x, y] = equalised(symbols, equaliser, { s, k });
      const [a, b] = nearest(x, y, order);
      re += x * a + y * b;
      im += y * a - x * b;
    }
    phase[s] = equaliser.phase[s] + (re === 0 && im === 0 ? 0 : Math.atan2(im, re));
    for (let k = 0; k < width; k++) {
      if (!isActive(cells, s, k)) continue;
      const [x, y] = equalised(symbols, equaliser, { s, k });
      const [a, b] = nearest(x, y, order);
      const i = 2 * (s * width + k);
      const turn = phase[s] + equaliser.drift * s * (k - width / 2);
      const c = Math.cos(turn);
      const d = -Math.sin(turn);
      const yr = values[i] * c - values[i + 1] * d;
      const yi = values[i] * d + values[i + 1] * c;
      cross[2 * k] += yr * a + yi * b;
      cross[2 * k + 1] += yi * a - yr * b;
      power[k] += a * a + b * b;
    }
  }
  return { channel: channelOf(cross, power, equaliser.channel), phase, drift: equaliser.drift };
}

function channelOf(cross: Float64Array, power: Float64Array, before: Float64Array): Float64Array {
  return cross.map((v, i) => (power[i >> 1] > 0 ? v / power[i >> 1] : before[i]));
}

export function equalised({ values, width }: Symbols, { channel, phase, drift }: Equaliser, { s, k }: { s: number; k: number }): [number, number] {
  const i = 2 * (s * width + k);
  const turn = phase[s] + drift * s * (k - width / 2);
  const c = Math.cos(turn);
  const d = Math.sin(turn);
  const hr = channel[2 * k] * c - channel[2 * k + 1] * d;
  const hi = channel[2 * k] * d + channel[2 * k + 1] * c;
  const h2 = hr * hr + hi * hi;
  if (h2 < 1e-30) return [0, 0];
  return [(values[i] * hr + values[i + 1] * hi) / h2, (values[i + 1] * hr - values[i] * hi) / h2];
}
