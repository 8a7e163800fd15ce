import { nextFast, transformOf } from '../fourier/fft.js';
import { symbolsPerSlot } from './numerology.js';
import type { Rows } from './rows.js';
import { allocated, type UplinkFit } from './uplink-search.js';

const BLOCK = 12;
/** Subcarriers on each side that share one channel estimate. */
const NEIGHBOURS = 3;
const MOST_SLOTS = 8;
const GLANCE = 3;
/** Noise against the mean channel power in the equaliser: a faded subcarrier would else spread over all points. */
const LOADING = 0.02;

/**
 * Points of a single-carrier uplink, interleaved, unit mean power: each data symbol equalised by
 * its slot's reference symbol, then transformed back over the allocation (TS 36.211 clause 5.3.3).
 * Empty where the allocation's width is none of the standard's.
 */
export function spreadPoints(rows: Rows, uplink: UplinkFit): Float64Array {
  const width = BLOCK * Math.round((uplink.high - uplink.low + 1) / BLOCK);
  // Precoding knows only factors 2, 3 and 5, as the transform does (clause 5.3.3).
  if (width < BLOCK || nextFast(width) !== width) return new Float64Array(0);
  const readings = [0, -1, 1].map((off) => {
    const at = { low: uplink.low + off, high: uplink.low + off + width - 1 };
    return { at, reference: smoothest(rows, uplink, at, width) };
  });
  const points = (reading: (typeof readings)[number], slots: number) => uplink.symbols.slice(0, slots).flatMap((s) => slotPoints(rows, { s, ...reading }));
  // An edge that is a subcarrier off, by a fade or a leak, blurs the points and nothing else.
  const best = readings.map((reading) => ({ reading, square: squareness(points(reading, GLANCE)) })).reduce((a, b) => (b.square > a.square ? b : a));
  return normalised(Float64Array.from(points(best.reading, MOST_SLOTS)));
}

/** Size of the fourth powers' mean over the mean of their sizes: 1 for QPSK, 0 for points that mean nothing. */
function squareness(points: readonly number[]): number {
  let re = 0, im = 0, size = 1e-30;
  for (let i = 0; i + 1 < points.length; i += 2) {
    const a = points[i]! ** 2 - points[i + 1]! ** 2, b = 2 * points[i]! * points[i + 1]!;
    re += a * a - b * b;
    im += 2 * a * b;
    size += a * a + b * b;
  }
  return Math.hypot(re, im) / size;
}

interface Range { readonly low: number; readonly high: number }

/** Of a group's two base sequences (clause 5.5.1.1) the one that leaves the evener channel. */
function smoothest(rows: Rows, uplink: UplinkFit, at: Range, width: number): Float64Array {
  const row = allocated(rows, uplink.symbols[0]!, at)!;
  return [0, 1].map((v) => baseSequence(width, uplink.group, v))
    .map((reference) => ({ reference, even: evenness(channelOf(row, reference)) }))
    .reduce((a, b) => (b.even > a.even ? b : a)).reference;
}

/** x_q(n mod N) with q = ⌊q̄ + ½⌋ + v·(−1)^⌊2q̄⌋, q̄ = N·(u + 1)/31, N the largest prime below the width. */
function baseSequence(width: number, group: number, v: number): Float64Array {
  const prime = primeBelow(width);
  const mean = (prime * (group + 1)) / 31;
  const q = Math.floor(mean + 0.5) + v * (-1) ** Math.floor(2 * mean);
  const out = new Float64Array(2 * width);
  for (let n = 0; n < width; n++) {
    const m = n % prime;
    const angle = (-Math.PI * ((q * m * (m + 1)) % (2 * prime))) / prime;
    out[2 * n] = Math.cos(angle);
    out[2 * n + 1] = Math.sin(angle);
  }
  return out;
}

function primeBelow(n: number): number {
  for (let p = n - 1; p > 2; p--) {
    let prime = p % 2 === 1;
    for (let d = 3; prime && d * d <= p; d += 2) prime = p % d !== 0;
    if (prime) return p;
  }
  return 2;
}

function channelOf(row: Float64Array, reference: Float64Array): Float64Array {
  return row.map((_, i) => (i % 2 === 0
    ? row[i]! * reference[i]! + row[i + 1]! * reference[i + 1]!
    : row[i]! * reference[i - 1]! - row[i - 1]! * reference[i]!));
}

/** Turn from one subcarrier to the next, and how much of the power follows it. */
function slope(h: Float64Array): { re: number; im: number; power: number } {
  let re = 0, im = 0, power = 1e-30;
  for (let i = 0; i + 2 < h.length; i += 2) {
    re += h[i + 2]! * h[i]! + h[i + 3]! * h[i + 1]!;
    im += h[i + 3]! * h[i]! - h[i + 2]! * h[i + 1]!;
    power += h[i]! ** 2 + h[i + 1]! ** 2;
  }
  return { re, im, power };
}

function evenness(h: Float64Array): number {
  const { re, im, power } = slope(h);
  return Math.hypot(re, im) / power;
}

/** Means over neighbours, the common slope taken out and put back. */
function smoothedChannel(h: Float64Array): Float64Array {
  const { re, im } = slope(h);
  const angle = Math.atan2(im, re);
  const width = h.length / 2;
  const out = new Float64Array(h.length);
  for (let k = 0; k < width; k++) {
    const from = Math.max(0, k - NEIGHBOURS), to = Math.min(width - 1, k + NEIGHBOURS);
    for (let j = from; j <= to; j++) {
      const c = Math.cos(angle * (k - j)) / (to - from + 1), s = Math.sin(angle * (k - j)) / (to - from + 1);
      out[2 * k] += h[2 * j]! * c - h[2 * j + 1]! * s;
      out[2 * k + 1] += h[2 * j + 1]! * c + h[2 * j]! * s;
    }
  }
  return out;
}

function slotPoints(rows: Rows, { s, at, reference }: { s: number; at: Range; reference: Float64Array }): number[] {
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  const place = perSlot === 7 ? 3 : 2;
  const row = allocated(rows, s, at);
  if (!row) return [];
  const channel = smoothedChannel(channelOf(row, reference));
  const mean = channel.reduce((sum, v) => sum + v * v, 0) / (channel.length / 2);
  const others = Array.from({ length: perSlot }, (_, l) => s - place + l).filter((l) => l !== s);
  return others.flatMap((l) => {
    const data = allocated(rows, l, at);
    return data ? [...upright(despreadSymbol(data, channel, LOADING * mean))] : [];
  });
}

function despreadSymbol(data: Float64Array, h: Float64Array, loading: number): Float64Array {
  const equal = new Float64Array(data.length);
  for (let i = 0; i < data.length; i += 2) {
    const weight = 1 / (h[i]! ** 2 + h[i + 1]! ** 2 + loading);
    equal[i] = weight * (data[i]! * h[i]! + data[i + 1]! * h[i + 1]!);
    equal[i + 1] = weight * (data[i + 1]! * h[i]! - data[i]! * h[i + 1]!);
  }
  const out = new Float64Array(data.length);
  transformOf(data.length / 2).inverse(equal, out);
  return out;
}

/**
 * The symbol turned so that its points stand square. Each symbol's phase counts from its own start
 * (TS 36.211 clause 5.6), so that beside the carrier, whose place is not known, symbols are turned
 * against each other. The fourth power of points on a square lattice has a mean on the negative axis.
 */
function upright(points: Float64Array): Float64Array {
  let re = 0, im = 0;
  for (let i = 0; i < points.length; i += 2) {
    const a = points[i]! ** 2 - points[i + 1]! ** 2, b = 2 * points[i]! * points[i + 1]!;
    re -= a * a - b * b;
    im -= 2 * a * b;
  }
  const c = Math.cos(Math.atan2(im, re) / 4), s = Math.sin(Math.atan2(im, re) / 4);
  return points.map((v, i) => (i % 2 === 0 ? v * c + points[i + 1]! * s : v * c - points[i - 1]! * s));
}

function normalised(points: Float64Array): Float64Array {
  const power = points.reduce((sum, v) => sum + v * v, 0) / Math.max(1, points.length / 2);
  return power > 0 ? points.map((v) => v / Math.sqrt(power)) : points;
}
