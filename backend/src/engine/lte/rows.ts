import { transformOf } from '../fourier/fft.js';
import { mix } from '../vector/mix.js';
import type { NativeWindow } from './native.js';
import { prefixSamples, symbolStart, symbolsPerSlot, SPACING_HZ } from './numerology.js';
import type { Prefix } from './numerology.js';

/** Where and how the symbols of a window are cut out. */
export interface Cut {
  readonly prefix: Prefix;
  /** First sample of the slot whose first symbol is number 0. */
  readonly slotStart: number;
  /** Removed before the transform, Hz. */
  readonly offsetHz: number;
  /** How many samples before the end of its prefix a symbol's transform begins. */
  readonly early: number;
}

/** Spectra of consecutive symbols, `first` the number of the first of them. Unshifted bins, interleaved. */
export interface Rows {
  readonly cut: Cut;
  readonly size: number;
  readonly first: number;
  readonly spectra: readonly Float64Array[];
}

/** Every whole symbol of the window. */
export function symbolRows(window: NativeWindow, cut: Cut): Rows {
  const { size } = window;
  const iq = mix(window.iq, -cut.offsetHz, size * SPACING_HZ);
  const samples = iq.length >> 1;
  const transform = transformOf(size);
  const input = new Float64Array(2 * size);
  const spectra: Float64Array[] = [];
  let first: number | null = null;
  for (let s = -symbolsPerSlot(cut.prefix) * Math.ceil(cut.slotStart / (7.5 * size)); ; s++) {
    const from = cut.slotStart + transformStart(cut, s, size);
    if (from < 0) continue;
    if (from + size > samples) break;
    first ??= s;
    input.set(iq.subarray(2 * from, 2 * (from + size)));
    const spectrum = new Float64Array(2 * size);
    transform.forward(input, spectrum);
    spectra.push(spectrum);
  }
  return { cut, size, first: first ?? 0, spectra };
}

/** First sample of symbol `s`'s transform, from the start of slot 0. */
export function transformStart(cut: Cut, s: number, size: number): number {
  const perSlot = symbolsPerSlot(cut.prefix);
  const l = ((s % perSlot) + perSlot) % perSlot;
  return symbolStart(cut.prefix, s, size) + prefixSamples(cut.prefix, l, size) - cut.early;
}

/** Which bin holds the carrier's DC tone, and whether the spectrum has to be turned. */
export interface View {
  readonly shift: number;
  readonly inverted: boolean;
}

/**
 * Subcarriers −half … half of symbol `s` around the DC tone, turned upright: interleaved,
 * subcarrier k at 2·(k + half). Null where the window does not hold the symbol.
 */
export function subcarriers(rows: Rows, s: number, view: View & { half: number }): Float64Array | null {
  const spectrum = rows.spectra[s - rows.first];
  if (!spectrum) return null;
  const { half, shift, inverted } = view;
  const out = new Float64Array(2 * (2 * half + 1));
  for (let k = -half; k <= half; k++) {
    const bin = inverted ? shift - k : shift + k;
    const at = 2 * (((bin % rows.size) + rows.size) % rows.size);
    out[2 * (k + half)] = spectrum[at];
    out[2 * (k + half) + 1] = inverted ? -spectrum[at + 1] : spectrum[at + 1];
  }
  return out;
}
