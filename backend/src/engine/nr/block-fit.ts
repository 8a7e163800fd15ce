import { BLOCK_SUBCARRIERS, BLOCK_SYMBOLS } from './block-layout.js';

/** A block against everything that it is known to carry. */
export interface BlockFit {
  /** Gain of each subcarrier, interleaved; the symbols' own phases taken out. */
  readonly gains: Float64Array;
  /** Phase and amplitude of each symbol against the gains: rad, and a factor. */
  readonly phases: readonly number[];
  readonly amplitudes: readonly number[];
  /** Variance of each symbol's phase, rad². */
  readonly phaseVariances: readonly number[];
  /** Mean over the elements; the signal without the primary one, which may be 3 dB up. */
  readonly noisePower: number;
  readonly signalPower: number;
}

const ROUNDS = 3;

/**
 * Least squares over a block: a gain of each subcarrier that stands still over the four symbols,
 * times a phase and an amplitude of each symbol (the primary signal may be 3 dB up). The noise is
 * what is left, over its degrees of freedom, so that no smoothness of the channel is assumed.
 */
export function fitBlock(grid: readonly Float64Array[], known: readonly Float64Array[]): BlockFit {
  let turns = Array.from({ length: BLOCK_SYMBOLS }, () => [1, 0]);
  let gains = firstGains(grid, known);
  for (let round = 0; round < ROUNDS; round++) {
    turns = symbolGains(grid, known, gains);
    gains = subcarrierGains(grid, known, turns);
  }
  const { noisePower, signalPower } = residual(grid, { known, gains, turns });
  const energies = known.map((points) => energy(points, gains));
  return {
    gains,
    phases: turns.map(([re, im]) => Math.atan2(im, re)),
    amplitudes: turns.map(([re, im]) => Math.hypot(re, im)),
    phaseVariances: turns.map(([re, im], l) => noisePower / (2 * energies[l] * (re * re + im * im) + 1e-300)),
    noisePower,
    signalPower,
  };
}

/** Gains of symbol 1, which covers every subcarrier, smoothed over seven of them: only to align the symbols. */
function firstGains(grid: readonly Float64Array[], known: readonly Float64Array[]): Float64Array {
  const gains = new Float64Array(2 * BLOCK_SUBCARRIERS);
  for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
    for (let m = Math.max(0, k - 3); m <= Math.min(BLOCK_SUBCARRIERS - 1, k + 3); m++) {
      gains[2 * k] += (grid[1][2 * m] * known[1][2 * m] + grid[1][2 * m + 1] * known[1][2 * m + 1]) / 7;
      gains[2 * k + 1] += (grid[1][2 * m + 1] * known[1][2 * m] - grid[1][2 * m] * known[1][2 * m + 1]) / 7;
    }
  }
  return gains;
}

/** Complex factor of each symbol; symbol 1 keeps 1. */
function symbolGains(grid: readonly Float64Array[], known: readonly Float64Array[], gains: Float64Array): number[][] {
  const raw = known.map((points, l) => {
    let re = 0;
    let im = 0;
    for (let i = 0; i < points.length; i += 2) {
      const a = points[i] * gains[i] - points[i + 1] * gains[i + 1];
      const b = points[i] * gains[i + 1] + points[i + 1] * gains[i];
      re += grid[l][i] * a + grid[l][i + 1] * b;
      im += grid[l][i + 1] * a - grid[l][i] * b;
    }
    const scale = 1 / (energy(points, gains) + 1e-300);
    return [re * scale, im * scale];
  });
  const [c, d] = raw[1];
  const power = c * c + d * d + 1e-300;
  return raw.map(([a, b]) => [(a * c + b * d) / power, (b * c - a * d) / power]);
}

function energy(points: Float64Array, gains: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < points.length; i += 2) {
    sum += (points[i] ** 2 + points[i + 1] ** 2) * (gains[i] ** 2 + gains[i + 1] ** 2);
  }
  return sum;
}

function subcarrierGains(grid: readonly Float64Array[], known: readonly Float64Array[], turns: readonly number[][]): Float64Array {
  const gains = new Float64Array(2 * BLOCK_SUBCARRIERS);
  for (let i = 0; i < gains.length; i += 2) {
    let weight = 0;
    for (let l = 0; l < BLOCK_SYMBOLS; l++) {
      const [c, d] = turns[l];
      const a = known[l][i] * c - known[l][i + 1] * d;
      const b = known[l][i] * d + known[l][i + 1] * c;
      gains[i] += grid[l][i] * a + grid[l][i + 1] * b;
      gains[i + 1] += grid[l][i + 1] * a - grid[l][i] * b;
      weight += a * a + b * b;
    }
    if (weight > 0) {
      gains[i] /= weight;
      gains[i + 1] /= weight;
    }
  }
  return gains;
}

function residual(grid: readonly Float64Array[], fit: { known: readonly Float64Array[]; gains: Float64Array; turns: readonly number[][] }): { noisePower: number; signalPower: number } {
  let left = 0;
  let total = 0;
  let elements = 0;
  let ordinary = 0;
  for (let l = 0; l < BLOCK_SYMBOLS; l++) {
    const [c, d] = fit.turns[l];
    for (let i = 0; i < fit.gains.length; i += 2) {
      const x = fit.known[l][i];
      const y = fit.known[l][i + 1];
      if (x === 0 && y === 0) continue;
      const a = x * c - y * d;
      const b = x * d + y * c;
      const re = fit.gains[i] * a - fit.gains[i + 1] * b;
      const im = fit.gains[i] * b + fit.gains[i + 1] * a;
      left += (grid[l][i] - re) ** 2 + (grid[l][i + 1] - im) ** 2;
      elements++;
      if (l === 0) continue;
      total += grid[l][i] ** 2 + grid[l][i + 1] ** 2;
      ordinary++;
    }
  }
  // 240 gains and three factors were fitted.
  const noisePower = left / (elements - BLOCK_SUBCARRIERS - 3) + 1e-30;
  return { noisePower, signalPower: Math.max(total / ordinary - noisePower, 1e-6 * noisePower) };
}
