import { transformOf } from '../fourier/fft.js';
import type { BlockFit } from './block-fit.js';
import { BLOCK_SUBCARRIERS, BLOCK_SYMBOLS, REFERENCE_SUBCARRIER } from './block-layout.js';

/** A frequency and its standard deviation. */
export interface FrequencyEstimate {
  readonly hz: number;
  readonly sigmaHz: number;
}

/** Samples of a useful symbol in which the block is put together; any size above its 240 subcarriers does. */
const SIZE = 512;

/**
 * How far the block's subcarriers lie beside where its grid was taken, from inside the symbols
 * alone (their phases against each other say something else: clause 5.4 of TS 38.211). First
 * order in the error: the received elements less the known ones are regressed on what a small
 * offset makes of them, a leakage between neighbours.
 */
export function offsetWithinSymbols(grid: readonly Float64Array[], known: readonly Float64Array[], { fit, spacingHz }: { fit: BlockFit; spacingHz: number }): FrequencyEstimate {
  let product = 0;
  let norm = 0;
  for (let l = 0; l < BLOCK_SYMBOLS; l++) {
    const sent = through(known[l], { fit, symbol: l });
    const slope = derivative(sent);
    const leftover = new Float64Array(sent.length);
    for (let i = 0; i < sent.length; i++) leftover[i] = grid[l][i] - sent[i];
    orthogonal(slope, sent);
    for (let i = 0; i < sent.length; i++) {
      product += leftover[i] * slope[i];
      norm += slope[i] * slope[i];
    }
  }
  if (norm === 0) return { hz: 0, sigmaHz: spacingHz };
  // The gains' own noise, that of some 3.3 elements each, swells the trace without telling of the offset.
  const swell = 1 + fit.noisePower / (3.3 * fit.signalPower);
  return { hz: ((product * swell) / norm) * spacingHz, sigmaHz: swell * Math.sqrt(fit.noisePower / (2 * norm)) * spacingHz };
}

function through(points: Float64Array, { fit, symbol }: { fit: BlockFit; symbol: number }): Float64Array {
  const c = fit.amplitudes[symbol] * Math.cos(fit.phases[symbol]);
  const d = fit.amplitudes[symbol] * Math.sin(fit.phases[symbol]);
  const out = new Float64Array(points.length);
  for (let i = 0; i < points.length; i += 2) {
    const a = points[i] * fit.gains[i] - points[i + 1] * fit.gains[i + 1];
    const b = points[i] * fit.gains[i + 1] + points[i + 1] * fit.gains[i];
    out[i] = a * c - b * d;
    out[i + 1] = a * d + b * c;
  }
  return out;
}

/** Change of the elements with the offset, per subcarrier spacing: the transform of j2π(t − ½)·s(t), t from 0 to 1. */
function derivative(sent: Float64Array): Float64Array {
  const bins = new Float64Array(2 * SIZE);
  const time = new Float64Array(2 * SIZE);
  for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
    const bin = (k - REFERENCE_SUBCARRIER + SIZE) % SIZE;
    bins[2 * bin] = sent[2 * k];
    bins[2 * bin + 1] = sent[2 * k + 1];
  }
  transformOf(SIZE).inverse(bins, time);
  for (let n = 0; n < SIZE; n++) {
    const weight = 2 * Math.PI * ((n + 0.5) / SIZE - 0.5);
    const re = time[2 * n];
    time[2 * n] = -weight * time[2 * n + 1];
    time[2 * n + 1] = weight * re;
  }
  transformOf(SIZE).forward(time, bins);
  const out = new Float64Array(sent.length);
  for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
    const bin = (k - REFERENCE_SUBCARRIER + SIZE) % SIZE;
    out[2 * k] = bins[2 * bin];
    out[2 * k + 1] = bins[2 * bin + 1];
  }
  return out;
}

/** Takes out of `slope` what lies along the symbol itself (its phase and amplitude are free). */
function orthogonal(slope: Float64Array, sent: Float64Array): void {
  let re = 0;
  let im = 0;
  let power = 1e-300;
  for (let i = 0; i < sent.length; i += 2) {
    re += slope[i] * sent[i] + slope[i + 1] * sent[i + 1];
    im += slope[i + 1] * sent[i] - slope[i] * sent[i + 1];
    power += sent[i] ** 2 + sent[i + 1] ** 2;
  }
  re /= power;
  im /= power;
  for (let i = 0; i < sent.length; i += 2) {
    slope[i] -= sent[i] * re - sent[i + 1] * im;
    slope[i + 1] -= sent[i] * im + sent[i + 1] * re;
  }
}
