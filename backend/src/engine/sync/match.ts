import { transformOf } from '../fourier/fft.js';
import type { Folded } from './fold.js';
import { periodOf, type Hypothesis } from './hypotheses.js';

/** How well a hypothesis's prefixes stand in the folded lag products. */
export interface Match {
  /**
   * Power of the best-placed template over its scatter. Without structure each placing is
   * exponential with mean 1, so that chance gives `score` > u with a probability of about
   * placings · exp(−u).
   */
  readonly score: number;
  /** Where the first prefix begins, in periods from the fold's origin, 0 to 1. */
  readonly phase: number;
  /** Sum of the products inside a prefix's worth of bins less that outside, complex; its angle is 2π · offset · useful symbol. */
  readonly re: number;
  readonly im: number;
  /** How much of what repeats with the period looks like the template, 0 to 1 (scatter taken out). */
  readonly likeness: number;
  /** Part of the score that the strongest harmonic alone brings: near 1 for a tone in the products. */
  readonly peakShare: number;
  /** Power summed in a prefix's worth of bins, at the best placing: what `re` and `im` are to be compared with. */
  readonly power: number;
  readonly placings: number;
}

/** The template (1 in the prefixes, 0 elsewhere) in `bins` bins, each by the part that a prefix covers. */
export function template(hypothesis: Hypothesis, bins: number): Float64Array {
  const out = new Float64Array(bins);
  const scale = bins / periodOf(hypothesis);
  let at = 0;
  for (const prefix of hypothesis.prefixesS) {
    cover(out, at * scale, (at + prefix) * scale);
    at += prefix + hypothesis.usefulS;
  }
  return out;
}

function cover(out: Float64Array, from: number, to: number): void {
  for (let b = Math.floor(from); b < to; b++) {
    out[b % out.length] += Math.min(b + 1, to) - Math.max(b, from);
  }
}

export function match(folded: Folded, hypothesis: Hypothesis): Match {
  const { bins, lines, scatter } = folded;
  const mask = templateLines(hypothesis, bins);
  const product = new Float64Array(2 * bins);
  let energy = 0;
  let plain = 0;
  for (let k = 1; k < bins; k++) {
    const mr = mask[2 * k];
    const mi = mask[2 * k + 1];
    // conj(template) · line, whitened: the matched filter for every placing at once.
    product[2 * k] = (lines[2 * k] * mr + lines[2 * k + 1] * mi) / scatter[k];
    product[2 * k + 1] = (lines[2 * k + 1] * mr - lines[2 * k] * mi) / scatter[k];
    const m2 = mr * mr + mi * mi;
    energy += m2 / scatter[k];
    plain += m2;
  }
  const placed = new Float64Array(2 * bins);
  transformOf(bins).inverse(product, placed);
  const best = strongest(placed);
  const amplitude = Math.sqrt(best.power) * bins;
  const score = (amplitude * amplitude) / energy;
  const scale = bins / energy;
  const at = 2 * best.index;
  return {
    score, phase: best.place / bins, re: placed[at] * scale, im: placed[at + 1] * scale,
    likeness: likeness(folded, { re: placed[at] * scale, im: placed[at + 1] * scale, plain }),
    peakShare: peakShare(product, best.index), power: powerUnder(folded.power, template(hypothesis, bins), best.index), placings: bins,
  };
}

/** Harmonics count in pairs, +k and −k, as they stand at the best placing. */
function peakShare(product: Float64Array, place: number): number {
  const n = product.length / 2;
  const at = (k: number): [number, number] => {
    const angle = (2 * Math.PI * ((k * place) % n)) / n;
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    return [product[2 * k] * c - product[2 * k + 1] * s, product[2 * k] * s + product[2 * k + 1] * c];
  };
  let most = 0;
  let re = 0;
  let im = 0;
  for (let k = 1; k < n / 2; k++) {
    const [a, b] = at(k);
    const [c, d] = at(n - k);
    re += a + c;
    im += b + d;
    most = Math.max(most, Math.hypot(a + c, b + d));
  }
  return most / Math.max(1e-300, Math.hypot(re, im));
}

function powerUnder(power: Float64Array, mask: Float64Array, place: number): number {
  let inside = 0;
  let weight = 0;
  for (let b = 0; b < mask.length; b++) {
    if (mask[b] === 0) continue;
    inside += mask[b] * power[(b + place) % power.length];
    weight += mask[b];
  }
  return inside / Math.max(1e-12, weight);
}

const masks = new Map<string, Float64Array>();

function templateLines(hypothesis: Hypothesis, bins: number): Float64Array {
  const key = `${hypothesis.usefulS} ${hypothesis.cyclicPrefixS} ${hypothesis.prefixesS.length} ${hypothesis.longEvery} ${bins}`;
  const known = masks.get(key);
  if (known) return known;
  const shape = template(hypothesis, bins);
  const input = new Float64Array(2 * bins);
  for (let i = 0; i < bins; i++) input[2 * i] = shape[i];
  const out = new Float64Array(2 * bins);
  transformOf(bins).forward(input, out);
  if (masks.size >= 64) masks.clear();
  masks.set(key, out);
  return out;
}

function strongest(placed: Float64Array): { index: number; place: number; power: number } {
  const n = placed.length / 2;
  const at = (i: number) => placed[2 * ((i + n) % n)] ** 2 + placed[2 * ((i + n) % n) + 1] ** 2;
  let index = 0;
  for (let i = 1; i < n; i++) if (at(i) > at(index)) index = i;
  const [a, b, c] = [Math.sqrt(at(index - 1)), Math.sqrt(at(index)), Math.sqrt(at(index + 1))];
  const bend = a - 2 * b + c;
  const shift = bend < 0 ? Math.max(-0.5, Math.min(0.5, (0.5 * (a - c)) / bend)) : 0;
  return { index, place: (index + shift + n) % n, power: at(index) };
}

function likeness({ lines, scatter, bins }: Folded, { re, im, plain }: { re: number; im: number; plain: number }): number {
  let all = 0;
  for (let k = 1; k < bins; k++) all += lines[2 * k] ** 2 + lines[2 * k + 1] ** 2 - scatter[k];
  const explained = (re * re + im * im) * plain;
  return Math.max(0, Math.min(1, explained / Math.max(explained, all)));
}
