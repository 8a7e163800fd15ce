import { nextFast, transformOf } from '../fourier/fft.js';
import { smoothed } from '../spectrum/occupied.js';
import type { Working } from './lag-sums.js';

const MOST_SAMPLES = 1 << 18;
const HARMONICS = 3;

/**
 * Lags at which the products repeat with a known symbol period (both in samples), strongest
 * first: the useful symbol, where a comb of pilots had only shown the period. For one harmonic
 * of the symbol rate all lags come from one product of two transforms (the cyclic correlation of
 * Gardner 1986); three harmonics are added.
 */
export function cyclicLags({ iq }: Working, period: number, count: number): number[] {
  const samples = Math.min(MOST_SAMPLES, iq.length >> 1);
  const size = nextFast(samples + Math.ceil(period));
  const plain = spectrumOf(iq, { samples, size, cycles: 0 });
  const shape = smoothed(powers(plain), Math.max(4, Math.round(size / 300)));
  const reach = Math.ceil(period);
  const total = new Float64Array(reach);
  for (let k = 1; k <= HARMONICS; k++) {
    const turned = spectrumOf(iq, { samples, size, cycles: k / period });
    addCorrelation(total, { plain, turned, shape, size });
  }
  return peaksOf(total, { from: period / 1.52, to: period / 1.0139, count });
}

function spectrumOf(iq: Float32Array, { samples, size, cycles }: { samples: number; size: number; cycles: number }): Float64Array {
  const input = new Float64Array(2 * size);
  for (let n = 0; n < samples; n++) {
    const turn = n * cycles;
    const angle = 2 * Math.PI * (turn - Math.floor(turn));
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    input[2 * n] = iq[2 * n] * c - iq[2 * n + 1] * s;
    input[2 * n + 1] = iq[2 * n] * s + iq[2 * n + 1] * c;
  }
  const output = new Float64Array(2 * size);
  transformOf(size).forward(input, output);
  return output;
}

function powers(spectrum: Float64Array): Float64Array {
  return Float64Array.from({ length: spectrum.length / 2 }, (_, k) => spectrum[2 * k] ** 2 + spectrum[2 * k + 1] ** 2);
}

interface Pair { plain: Float64Array; turned: Float64Array; shape: Float64Array; size: number }

/** Σ x[n + lag]·(x[n]·turn[n])* for every lag, whitened by the spectrum's shape. */
function addCorrelation(total: Float64Array, { plain, turned, shape, size }: Pair): void {
  const product = new Float64Array(2 * size);
  for (let k = 0; k < size; k++) {
    const w = 1 / shape[k];
    product[2 * k] = w * (plain[2 * k] * turned[2 * k] + plain[2 * k + 1] * turned[2 * k + 1]);
    product[2 * k + 1] = w * (plain[2 * k + 1] * turned[2 * k] - plain[2 * k] * turned[2 * k + 1]);
  }
  const lags = new Float64Array(2 * size);
  transformOf(size).inverse(product, lags);
  for (let i = 0; i < total.length; i++) total[i] += lags[2 * i] ** 2 + lags[2 * i + 1] ** 2;
}

function peaksOf(total: Float64Array, { from, to, count }: { from: number; to: number; count: number }): number[] {
  const peaks: { lag: number; value: number }[] = [];
  for (let i = Math.max(1, Math.floor(from)); i < Math.min(to, total.length - 1); i++) {
    const [a, b, c] = [total[i - 1], total[i], total[i + 1]];
    if (b < a || b < c) continue;
    const bend = a - 2 * b + c;
    peaks.push({ lag: i + (bend < 0 ? (0.5 * (a - c)) / bend : 0), value: b });
  }
  peaks.sort((x, y) => y.value - x.value);
  return peaks.slice(0, count).map((p) => p.lag);
}
