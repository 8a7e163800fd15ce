import { BLOCK_SUBCARRIERS, broadcastLayout } from './block-layout.js';
import type { ReferenceMatch } from './block-identity.js';
import { broadcastReference } from './sequences.js';

/** What a block's symbols went through, from the broadcast channel's reference signal. */
export interface BlockChannel {
  /** Gain of each subcarrier in symbol 1, interleaved. */
  readonly gains: Float64Array;
  /** Phase of symbols 0 to 3 against symbol 1, rad; that of symbol 0 is unknown here and 0. */
  readonly phases: readonly number[];
  readonly noisePower: number;
  readonly signalPower: number;
}

/** Lengths that the channel's response may have, in useful parts: a cable, ordinary paths, the whole prefix. */
const SPREADS = [1 / 256, 1 / 80, 1 / 30, 9 / 128];

/** Averages of the reference elements on one subcarrier of symbols 1 to 3. */
interface Pilots {
  readonly subcarriers: readonly number[];
  readonly gains: Float64Array;
  /** How many elements each average holds. */
  readonly counts: readonly number[];
}

/**
 * Gain by Gaussian-process (Wiener) interpolation over the subcarriers, the response uniform over
 * the one of a few lengths that makes the pilots likeliest; the channel stands still over a block
 * but for a phase of each symbol.
 */
export function estimateChannel(grid: readonly Float64Array[], cellId: number, match: ReferenceMatch): BlockChannel {
  const raw = leastSquares(grid, cellId, match.index);
  const phases = symbolPhases(raw);
  const { pilots, noisePower } = averaged(raw, phases);
  const power = Math.max(1e-3 * noisePower, mean(pilots.subcarriers.map((_, i) => pilots.gains[2 * i] ** 2 + pilots.gains[2 * i + 1] ** 2)) - noisePower / 2);
  const turned = turn(pilots, match.delay);
  const fits = SPREADS.map((spread) => fit(turned, { spread, power, noisePower }));
  const best = fits.reduce((a, b) => (b.logLikelihood > a.logLikelihood ? b : a));
  return { gains: turnBack(best.gains, match.delay), phases, noisePower, signalPower: power };
}

interface RawPilot { symbol: number; subcarrier: number; re: number; im: number }

function leastSquares(grid: readonly Float64Array[], cellId: number, index: number): RawPilot[] {
  const sent = broadcastReference(cellId, index);
  return broadcastLayout(cellId).reference.map(({ symbol, subcarrier }, i) => {
    const a = grid[symbol][2 * subcarrier];
    const b = grid[symbol][2 * subcarrier + 1];
    return { symbol, subcarrier, re: a * sent[2 * i] + b * sent[2 * i + 1], im: b * sent[2 * i] - a * sent[2 * i + 1] };
  });
}

/** Phases of symbols 2 and 3 against symbol 1 on the subcarriers that they share. */
function symbolPhases(raw: readonly RawPilot[]): number[] {
  const first = new Map(raw.filter((p) => p.symbol === 1).map((p) => [p.subcarrier, p]));
  const phases = [0, 0, 0, 0];
  for (const symbol of [2, 3]) {
    let re = 0;
    let im = 0;
    for (const p of raw) {
      const q = first.get(p.subcarrier);
      if (p.symbol !== symbol || !q) continue;
      re += p.re * q.re + p.im * q.im;
      im += p.im * q.re - p.re * q.im;
    }
    phases[symbol] = Math.atan2(im, re);
  }
  return phases;
}

/** The pilots of a subcarrier averaged over the symbols, and the noise from how they differ. */
function averaged(raw: readonly RawPilot[], phases: readonly number[]): { pilots: Pilots; noisePower: number } {
  const columns = new Map<number, { re: number; im: number }[]>();
  for (const { symbol, subcarrier, re, im } of raw) {
    const cos = Math.cos(phases[symbol]);
    const sin = Math.sin(phases[symbol]);
    const column = columns.get(subcarrier) ?? [];
    column.push({ re: re * cos + im * sin, im: im * cos - re * sin });
    columns.set(subcarrier, column);
  }
  const subcarriers = [...columns.keys()].sort((a, b) => a - b);
  const gains = new Float64Array(2 * subcarriers.length);
  let spread = 0;
  let degrees = 0;
  subcarriers.forEach((subcarrier, i) => {
    const column = columns.get(subcarrier)!;
    gains[2 * i] = mean(column.map((p) => p.re));
    gains[2 * i + 1] = mean(column.map((p) => p.im));
    for (const p of column) spread += (p.re - gains[2 * i]) ** 2 + (p.im - gains[2 * i + 1]) ** 2;
    degrees += column.length - 1;
  });
  return { pilots: { subcarriers, gains, counts: subcarriers.map((s) => columns.get(s)!.length) }, noisePower: spread / degrees + 1e-30 };
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Pilots with the strongest path moved to delay 0. */
function turn(pilots: Pilots, delay: number): Pilots {
  const gains = new Float64Array(pilots.gains.length);
  pilots.subcarriers.forEach((k, i) => rotate(pilots.gains, i, { angle: 2 * Math.PI * delay * k, into: gains, to: i }));
  return { ...pilots, gains };
}

function turnBack(gains: Float64Array, delay: number): Float64Array {
  const out = new Float64Array(gains.length);
  for (let k = 0; k < gains.length / 2; k++) rotate(gains, k, { angle: -2 * Math.PI * delay * k, into: out, to: k });
  return out;
}

function rotate(from: Float64Array, at: number, { angle, into, to }: { angle: number; into: Float64Array; to: number }): void {
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  into[2 * to] = from[2 * at] * cos - from[2 * at + 1] * sin;
  into[2 * to + 1] = from[2 * at] * sin + from[2 * at + 1] * cos;
}

/** Covariance of two subcarriers' gains, the response uniform over `spread` about delay 0. */
function covariance(distance: number, { spread, power }: { spread: number; power: number }): number {
  const x = Math.PI * spread * distance;
  return power * (x === 0 ? 1 : Math.sin(x) / x);
}

function fit(pilots: Pilots, model: { spread: number; power: number; noisePower: number }): { gains: Float64Array; logLikelihood: number } {
  const n = pilots.subcarriers.length;
  const matrix = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) matrix[i * n + j] = covariance(pilots.subcarriers[i] - pilots.subcarriers[j], model);
    matrix[i * n + i] += model.noisePower / pilots.counts[i] + 1e-9 * model.power;
  }
  cholesky(matrix, n);
  const weights = [0, 1].map((part) => solve(matrix, Float64Array.from({ length: n }, (_, i) => pilots.gains[2 * i + part])));
  let logLikelihood = 0;
  for (let i = 0; i < n; i++) {
    logLikelihood -= 2 * Math.log(matrix[i * n + i]);
    for (const part of [0, 1]) logLikelihood -= pilots.gains[2 * i + part] * weights[part][i];
  }
  const gains = new Float64Array(2 * BLOCK_SUBCARRIERS);
  for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
    for (let i = 0; i < n; i++) {
      const c = covariance(k - pilots.subcarriers[i], model);
      gains[2 * k] += c * weights[0][i];
      gains[2 * k + 1] += c * weights[1][i];
    }
  }
  return { gains, logLikelihood };
}

/** Lower Cholesky factor in place (row-major, n by n). */
function cholesky(a: Float64Array, n: number): void {
  for (let j = 0; j < n; j++) {
    for (let i = j; i < n; i++) {
      let sum = a[i * n + j];
      for (let k = 0; k < j; k++) sum -= a[i * n + k] * a[j * n + k];
      a[i * n + j] = i === j ? Math.sqrt(Math.max(sum, 1e-300)) : sum / a[j * n + j];
    }
  }
}

/** Solves L·Lᵀ·x = b. */
function solve(l: Float64Array, b: Float64Array): Float64Array {
  const n = b.length;
  const x = b.slice();
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < i; k++) x[i] -= l[i * n + k] * x[k];
    x[i] /= l[i * n + i];
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let k = i + 1; k < n; k++) x[i] -= l[k * n + i] * x[k];
    x[i] /= l[i * n + i];
  }
  return x;
}
