import { transformOf } from '../fourier/fft.js';
import { shifted, turned } from './piece.js';
import type { Piece } from './piece.js';
import { LAYOUT, LONG_TRAINING, SHORT_TRAINING, TONE_SPACING_HZ } from './training.js';
import { tonePlace, toneSpectrum } from './tones.js';

/** A frame's legacy preamble, located. */
export interface Preamble {
  /** Upright, with the DC tone of the strongest 20 MHz subchannel at zero. */
  readonly piece: Piece;
  /** Start of the frame in the piece, nominal µs. */
  readonly startUs: number;
  /** Subchannels that carry the preamble, relative to the strongest (which is 0), rising. */
  readonly channels: readonly number[];
  /** How the long training fits on every subchannel that the band holds, likewise relative: squares of scores. */
  readonly fits: ReadonlyMap<number, number>;
  /** Of the long training, and of the short one through the same channel: each square is exponential with mean 1 for other signals. */
  readonly score: number;
  readonly shortScore: number;
}

/** The transform begins this early, so that paths before the centre of gravity stay inside the guard. */
export const EARLY_US = 0.25;
/** Chance: some 150 places for two senses, 10⁻³ a candidate at 3.4. */
const LEAST_LONG_SCORE = 3.4;

/**
 * Finds the long training field after a short one that starts near `nearUs`: by its
 * repetition, then by the products of neighbouring tones (blind to timing and to slow fading)
 * at every place in the band and in both senses.
 */
export function synchronise(piece: Piece, nearUs: number): Preamble | null {
  const rough = roughLongTraining(piece, nearUs);
  if (!rough) return null;
  const centred = shifted(piece, rough.fractionHz);
  const spectrum = longSpectrum(centred, rough.atUs);
  if (!spectrum) return null;
  const best = strongest([false, true].flatMap((inverted) => searchTones(spectrum, inverted)));
  if (!best) return null;
  const upright = best.inverted ? turned(centred) : centred;
  const bin = best.inverted ? -best.bin : best.bin;
  const settled = shifted(upright, bin * (TONE_SPACING_HZ / piece.clock));
  const startUs = rough.atUs + best.delayUs - LAYOUT.longTrainingUs;
  const fits = channelFits(settled, startUs);
  const channels = occupiedChannels(fits);
  return {
    piece: settled, startUs, channels, fits: new Map([...fits].map(([channel, { score }]) => [channel, score ** 2])),
    score: best.score, shortScore: shortTrainingScore(settled, startUs, channels),
  };
}

/** The twelve known tones of the short training against the channel that the long one shows. */
function shortTrainingScore(piece: Piece, startUs: number, channels: readonly number[]): number {
  const long = longSpectrum(piece, startUs + LAYOUT.longTrainingUs);
  // Two stretches of four periods each, whole periods after the field's start.
  const parts = [0.8, 4].map((us) => toneSpectrum(piece, startUs + us - EARLY_US));
  const [first, second] = parts;
  if (!long || !first || !second) return 0;
  let re = 0, im = 0, energy = 1e-30;
  for (const channel of channels) {
    for (const [k, sign] of SHORT_TRAINING) {
      const at = tonePlace(k, channel, long.length >> 1);
      const known = sign * LONG_TRAINING[k + 26];
      const yr = first[at] + second[at], yi = first[at + 1] + second[at + 1];
      const pr = known * (yr * long[at] + yi * long[at + 1]);
      const pi = known * (yi * long[at] - yr * long[at + 1]);
      re += pr;
      im += pi;
      energy += pr * pr + pi * pi;
    }
  }
  return Math.hypot(re, im) / Math.sqrt(energy);
}

/** Where 3.2 µs repeat: the field's guard and two symbols make a plateau of 1.6 µs. */
function roughLongTraining(piece: Piece, nearUs: number): { atUs: number; fractionHz: number } | null {
  const us = piece.samplesPerUs;
  const lag = LAYOUT.usefulUs * us;
  const from = Math.max(0, Math.round((nearUs + 6.4) * us));
  const places = Math.round(6.4 * us);
  if (from + places + 2 * lag > piece.iq.length >> 1) return null;
  const re = new Float64Array(places), im = new Float64Array(places), level = new Float64Array(places);
  for (let p = 0; p < places; p++) {
    const sum = p === 0 ? lagSum(piece.iq, from, { lag, from: 0, to: lag }) : null;
    const [dr, di, de] = sum ?? difference(piece.iq, from + p - 1, lag);
    re[p] = sum ? dr : re[p - 1] + dr;
    im[p] = sum ? di : im[p - 1] + di;
    level[p] = sum ? de : level[p - 1] + de;
  }
  const wide = Math.round(1.6 * us);
  let best = 0, bestValue = -1, phase = [0, 0];
  for (let p = 0; p + wide < places; p++) {
    let value = 0, r = 0, i = 0;
    for (let k = p; k <= p + wide; k += Math.max(1, wide >> 4)) {
      value += Math.hypot(re[k], im[k]) / Math.max(level[k], 1e-30);
      r += re[k];
      i += im[k];
    }
    if (value > bestValue) [best, bestValue, phase] = [p, value, [r, i]];
  }
  const spacing = TONE_SPACING_HZ / piece.clock;
  return { atUs: (from + best + wide) / us, fractionHz: (-Math.atan2(phase[1], phase[0]) / (2 * Math.PI)) * spacing };
}

type Sums = [number, number, number];

function lagSum(iq: Float32Array, at: number, { lag, from, to }: { lag: number; from: number; to: number }): Sums {
  let re = 0, im = 0, energy = 0;
  for (let n = at + from; n < at + to; n++) {
    const a = 2 * n, b = a + 2 * lag;
    re += iq[a] * iq[b] + iq[a + 1] * iq[b + 1];
    im += iq[a + 1] * iq[b] - iq[a] * iq[b + 1];
    energy += 0.5 * (iq[a] ** 2 + iq[a + 1] ** 2 + iq[b] ** 2 + iq[b + 1] ** 2);
  }
  return [re, im, energy];
}

/** What the sum over one lag gains when it moves on by a sample. */
function difference(iq: Float32Array, at: number, lag: number): Sums {
  const enter = lagSum(iq, at, { lag, from: lag, to: lag + 1 });
  const leave = lagSum(iq, at, { lag, from: 0, to: 1 });
  return [enter[0] - leave[0], enter[1] - leave[1], enter[2] - leave[2]];
}

/** Both long symbols, added. */
function longSpectrum(piece: Piece, atUs: number): Float64Array | null {
  const first = toneSpectrum(piece, atUs - EARLY_US);
  const second = toneSpectrum(piece, atUs + LAYOUT.usefulUs - EARLY_US);
  if (!first || !second) return null;
  return first.map((v, i) => v + second[i]);
}

interface ToneMatch { readonly bin: number; readonly score: number; readonly amplitude: number; readonly inverted: boolean; readonly delayUs: number }

/** In a wide frame every subchannel fits, and so may a faint image: of those that fit about as well as the best, the loudest. */
function strongest(matches: readonly ToneMatch[]): ToneMatch | null {
  const top = Math.max(0, ...matches.map((m) => m.score));
  if (top < LEAST_LONG_SCORE) return null;
  return matches.filter((m) => m.score >= 0.75 * top).reduce((a, b) => (b.amplitude > a.amplitude ? b : a));
}

/** Products of neighbouring tones of the training, placed for a circular correlation. */
function trainingProducts(size: number, inverted: boolean): Float64Array {
  const out = new Float64Array(2 * size);
  for (let k = -26; k < 26; k++) {
    const product = LONG_TRAINING[k + 26] * LONG_TRAINING[k + 27];
    // Turned over, the pair (k, k + 1) lies at (−k − 1, −k).
    if (product !== 0) out[tonePlace(inverted ? -k - 1 : k, 0, size)] = product;
  }
  return out;
}

/** Every place in the band where the sequence fits beyond chance. */
function searchTones(spectrum: Float64Array, inverted: boolean): ToneMatch[] {
  const size = spectrum.length >> 1;
  const transform = transformOf(size);
  const products = new Float64Array(2 * size);
  const squares = new Float64Array(size);
  for (let k = 0; k < size; k++) {
    const a = 2 * k, b = 2 * ((k + 1) % size);
    products[a] = spectrum[b] * spectrum[a] + spectrum[b + 1] * spectrum[a + 1];
    products[a + 1] = spectrum[b + 1] * spectrum[a] - spectrum[b] * spectrum[a + 1];
    squares[k] = products[a] ** 2 + products[a + 1] ** 2;
  }
  const x = new Float64Array(2 * size), t = new Float64Array(2 * size);
  transform.forward(products, x);
  const pattern = trainingProducts(size, inverted);
  transform.forward(pattern, t);
  for (let k = 0; k < 2 * size; k += 2) {
    const re = x[k] * t[k] + x[k + 1] * t[k + 1];
    x[k + 1] = x[k + 1] * t[k] - x[k] * t[k + 1];
    x[k] = re;
  }
  transform.inverse(x, t);
  const out: ToneMatch[] = [];
  for (let bin = 0; bin < size; bin++) {
    const delayUs = (-Math.atan2(t[2 * bin + 1], t[2 * bin]) / (2 * Math.PI)) * LAYOUT.usefulUs - EARLY_US;
    if (delayUs < -1.2 || delayUs > 1) continue;
    let energy = 1e-30;
    for (let k = -26; k < 26; k++) if (pattern[tonePlace(k, 0, size)] !== 0) energy += squares[(bin + k + size) % size];
    const amplitude = Math.hypot(t[2 * bin], t[2 * bin + 1]);
    const score = amplitude / Math.sqrt(energy);
    if (score >= LEAST_LONG_SCORE) out.push({ bin: bin < size / 2 ? bin : bin - size, score, amplitude, inverted, delayUs });
  }
  return out;
}

interface ChannelFit { readonly score: number; readonly power: number }

/** Every subchannel 20 MHz apart that the band holds; beyond its edge the bins are those of the other side. */
function channelFits(piece: Piece, startUs: number): Map<number, ChannelFit> {
  const spectrum = longSpectrum(piece, startUs + LAYOUT.longTrainingUs);
  const width = 20e6 / piece.clock;
  const out = new Map<number, ChannelFit>();
  for (let c = -7; c <= 7; c++) {
    if (spectrum && Math.abs(piece.offsetHz + c * width) + 0.41 * width <= piece.rateHz / 2) out.set(c, channelFit(spectrum, c));
  }
  return out;
}

/** Those that hold the sequence coherently, joined to the strongest without a gap. */
function occupiedChannels(all: ReadonlyMap<number, ChannelFit>): number[] {
  const least = 0.05 * (all.get(0)?.power ?? 0);
  const fits = (channel: number) => {
    const fit = all.get(channel);
    return fit !== undefined && fit.score > 3 && fit.power > least;
  };
  const out = [0];
  for (let c = 1; fits(c); c++) out.push(c);
  for (let c = -1; fits(c); c--) out.unshift(c);
  return out;
}

function channelFit(spectrum: Float64Array, channel: number): ChannelFit {
  const size = spectrum.length >> 1;
  let re = 0, im = 0, squares = 1e-30, power = 0;
  for (let k = -26; k < 26; k++) {
    const sign = LONG_TRAINING[k + 26] * LONG_TRAINING[k + 27];
    if (sign === 0) continue;
    const a = tonePlace(k, channel, size), b = tonePlace(k + 1, channel, size);
    const pr = spectrum[b] * spectrum[a] + spectrum[b + 1] * spectrum[a + 1];
    const pi = spectrum[b + 1] * spectrum[a] - spectrum[b] * spectrum[a + 1];
    re += sign * pr;
    im += sign * pi;
    squares += pr * pr + pi * pi;
    power += spectrum[a] ** 2 + spectrum[a + 1] ** 2;
  }
  return { score: Math.hypot(re, im) / Math.sqrt(squares), power };
}
