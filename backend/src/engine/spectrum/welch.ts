import { transformOf } from '../fourier/fft.js';

/** Power spectral density of a two-sided complex signal, in ascending frequency. */
export interface Density {
  /** Frequency of the first bin, Hz against the capture's zero. */
  readonly startHz: number;
  readonly binHz: number;
  /** Power in each bin, full scale 1; their sum is the mean power. */
  readonly power: Float64Array;
  /** Number of averaged transforms, overlap taken into account: each bin scatters by 1/√averages of itself. */
  readonly averages: number;
}

export interface WelchOptions {
  /** Transform length; default 2048. */
  readonly size?: number;
  /** At most so many transforms, spread evenly over the window; default 600. */
  readonly most?: number;
  /** Parts of the window to use, in samples from its start; default all of it. */
  readonly segments?: readonly { readonly start: number; readonly end: number }[];
}

/** Hann windows that overlap by half: 36/19 times fewer independent averages than windows (Welch, IEEE Trans. AU-15 (1967) 70). */
const HALF_OVERLAP = 19 / 36;

/**
 * Averaged periodograms of a window (Welch 1967). A window shorter than one transform is padded
 * with zeros. Throws RangeError for an empty window.
 */
export function welch(iq: Float32Array, sampleRateHz: number, options: WelchOptions = {}): Density {
  const { size = 2048, most = 600 } = options;
  const samples = iq.length >> 1;
  if (samples === 0) throw new RangeError('no samples to take a spectrum of');
  const starts = thinned(placesOf(options.segments ?? [{ start: 0, end: samples }], size), most);
  const window = hann(size);
  const input = new Float64Array(2 * size);
  const output = new Float64Array(2 * size);
  const sum = new Float64Array(size);
  for (const start of starts) {
    load(iq, start, { window, input });
    transformOf(size).forward(input, output);
    for (let k = 0; k < size; k++) sum[k] += output[2 * k] ** 2 + output[2 * k + 1] ** 2;
  }
  const gain = window.reduce((a, w) => a + w * w, 0) * size * starts.length;
  const power = new Float64Array(size);
  for (let k = 0; k < size; k++) power[(k + size / 2) % size] = sum[k] / gain;
  const averages = Math.max(1, starts.length * HALF_OVERLAP * (starts.length < most ? 1 : 1.5));
  return { startHz: -sampleRateHz / 2, binHz: sampleRateHz / size, power, averages: Math.min(averages, starts.length) };
}

function placesOf(segments: readonly { start: number; end: number }[], size: number): number[] {
  const starts: number[] = [];
  for (const { start, end } of segments) {
    for (let at = start; at + size <= end; at += size >> 1) starts.push(at);
  }
  return starts.length > 0 ? starts : [segments[0]?.start ?? 0];
}

function thinned(starts: number[], most: number): number[] {
  if (starts.length <= most) return starts;
  return Array.from({ length: most }, (_, i) => starts[Math.floor((i * starts.length) / most)]);
}

function hann(size: number): Float64Array {
  return Float64Array.from({ length: size }, (_, n) => 0.5 - 0.5 * Math.cos((2 * Math.PI * n) / size));
}

function load(iq: Float32Array, start: number, { window, input }: { window: Float64Array; input: Float64Array }): void {
  const last = Math.min(window.length, (iq.length >> 1) - start);
  input.fill(0, 2 * Math.max(0, last));
  for (let n = 0; n < last; n++) {
    input[2 * n] = window[n] * iq[2 * (start + n)];
    input[2 * n + 1] = window[n] * iq[2 * (start + n) + 1];
  }
}
