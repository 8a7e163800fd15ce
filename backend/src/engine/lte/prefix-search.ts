import type { NativeWindow } from './native.js';
import { prefixSamples, slotSamples, symbolStart, symbolsPerSlot, SPACING_HZ } from './numerology.js';
import type { Prefix } from './numerology.js';

/** A slot grid found from the repetition of the cyclic prefix. */
export interface PrefixFit {
  readonly prefix: Prefix;
  /** First sample of a slot, 0 ≤ x < a slot; with the normal prefix a symbol's start that need not be the slot's first. */
  readonly slotStart: number;
  /** Carrier offset modulo the spacing, Hz, within half a spacing. */
  readonly fractionHz: number;
  /** Mean coherence of prefix and symbol's end, 0 to 1. */
  readonly coherence: number;
  /** Coherence in units of its scatter under white noise: its square is exponential with mean 1. */
  readonly score: number;
}

interface Folded { readonly re: Float64Array; readonly im: Float64Array; readonly energy: Float64Array; readonly slots: number }

/** Both prefixes, the better first (van de Beek et al., IEEE Trans. Signal Process. 45 (1997) 1800, folded over slots). */
export function searchPrefix(window: NativeWindow): PrefixFit[] {
  const folded = foldLagProducts(window);
  if (folded.slots < 1) return [];
  return [fit(window.size, folded, 'normal'), fit(window.size, folded, 'extended')].sort((a, b) => b.score - a.score);
}

/** x[n]·x*[n+N] summed over all slots, place by place; the energies of both ends beside it. */
function foldLagProducts({ iq, size }: NativeWindow): Folded {
  const period = slotSamples(size);
  const count = (iq.length >> 1) - size;
  const slots = Math.floor(count / period);
  // Running sums over two periods, so that windows may cross the seam.
  const re = new Float64Array(2 * period + 1);
  const im = new Float64Array(2 * period + 1);
  const energy = new Float64Array(2 * period + 1);
  for (let slot = 0; slot < slots; slot++) {
    for (let p = 0, a = 2 * slot * period, b = a + 2 * size; p < period; p++, a += 2, b += 2) {
      const ar = iq[a], ai = iq[a + 1], br = iq[b], bi = iq[b + 1];
      re[p + 1] += ar * br + ai * bi;
      im[p + 1] += ai * br - ar * bi;
      energy[p + 1] += 0.5 * (ar * ar + ai * ai + br * br + bi * bi);
    }
  }
  for (const sums of [re, im, energy]) {
    for (let p = 1; p <= period; p++) sums[period + p] = sums[p];
    for (let p = 1; p <= 2 * period; p++) sums[p] += sums[p - 1];
  }
  return { re, im, energy, slots };
}

function fit(size: number, folded: Folded, prefix: Prefix): PrefixFit {
  const period = slotSamples(size);
  const perSlot = symbolsPerSlot(prefix);
  const width = prefixSamples(prefix, 1, size);
  // The last `width` samples of each prefix: the first symbol's is longer.
  const places = Array.from({ length: perSlot }, (_, l) => symbolStart(prefix, l, size) + prefixSamples(prefix, l, size) - width);
  const best = { at: 0, value: -1, re: 0, im: 0 };
  for (let t = 0; t < (prefix === 'normal' ? period : period / perSlot); t++) {
    let re = 0, im = 0, energy = 0;
    for (const place of places) {
      const from = (t + place) % period;
      re += folded.re[from + width] - folded.re[from];
      im += folded.im[from + width] - folded.im[from];
      energy += folded.energy[from + width] - folded.energy[from];
    }
    const value = energy > 0 ? Math.hypot(re, im) / energy : 0;
    if (value > best.value) Object.assign(best, { at: t, value, re, im });
  }
  return {
    prefix,
    slotStart: best.at,
    // The product turns by −2π·f/15 kHz.
    fractionHz: (-Math.atan2(best.im, best.re) / (2 * Math.PI)) * SPACING_HZ,
    coherence: best.value,
    score: best.value * Math.sqrt(folded.slots * perSlot * width),
  };
}
