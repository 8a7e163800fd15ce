import { decibels, mean, meanPower } from '../vector/power.js';
import { clippedFraction } from './clipping.js';
import type { LevelFacts } from '../types.js';

/** Mean power in dB of a complex tone at full scale; −200 for silence. */
export function rmsDbfs(iq: Float32Array): number {
  return decibels(Math.max(1e-20, meanPower(iq)));
}

/** Blocks in which the mean is taken on its own, to see how far chance alone moves it. */
const BLOCKS = 64;

/**
 * DC power to the power of the rest, dB; null where chance alone would give as much. A constant
 * has the same phase in every block; a data-bearing subcarrier at zero has not.
 */
export function dcOffsetDb(iq: Float32Array): number | null {
  const samples = iq.length >> 1;
  const block = Math.floor(samples / BLOCKS);
  if (block < 32) return null;
  const means = Array.from({ length: BLOCKS }, (_, b) => mean(iq.subarray(2 * b * block, 2 * (b + 1) * block)));
  const re = average(means.map((m) => m[0]));
  const im = average(means.map((m) => m[1]));
  const scatter = average(means.map((m) => (m[0] - re) ** 2 + (m[1] - im) ** 2)) / (BLOCKS - 1);
  const dc = re * re + im * im - scatter;
  const rest = meanPower(iq) - re * re - im * im;
  return dc > 8 * scatter && rest > 0 ? decibels(dc / rest) : null;
}

/**
 * Image power to signal power, dB, for a circular signal (any OFDM, most modulations): with
 * y = μx + νx*, the mean of y² is 2μν·|x|², so the image is |mean y²|² / (2·mean |y|²)². Null
 * where chance alone would give as much. DC is taken out first.
 */
export function iqImbalanceDb(iq: Float32Array): number | null {
  const samples = iq.length >> 1;
  const block = Math.floor(samples / BLOCKS);
  if (block < 32) return null;
  const [dcRe, dcIm] = mean(iq);
  const squares = Array.from({ length: BLOCKS }, (_, b) => meanSquare(iq, { from: b * block, to: (b + 1) * block, dcRe, dcIm }));
  const re = average(squares.map((s) => s[0]));
  const im = average(squares.map((s) => s[1]));
  const scatter = average(squares.map((s) => (s[0] - re) ** 2 + (s[1] - im) ** 2)) / (BLOCKS - 1);
  const power = meanPower(iq) - dcRe * dcRe - dcIm * dcIm;
  const square = re * re + im * im - scatter;
  return square > 8 * scatter && power > 0 ? decibels(square / (4 * power * power)) : null;
}

interface Part { from: number; to: number; dcRe: number; dcIm: number }

function meanSquare(iq: Float32Array, { from, to, dcRe, dcIm }: Part): [number, number] {
  let re = 0;
  let im = 0;
  for (let i = 2 * from; i < 2 * to; i += 2) {
    const a = iq[i] - dcRe;
    const b = iq[i + 1] - dcIm;
    re += a * a - b * b;
    im += 2 * a * b;
  }
  return [re / (to - from), im / (to - from)];
}

function average(values: number[]): number {
  return values.reduce((a, b) => a + b, 0) / values.length;
}

export function levelFacts(iq: Float32Array): LevelFacts {
  return { rmsDbfs: rmsDbfs(iq), clippedFraction: clippedFraction(iq), dcOffsetDb: dcOffsetDb(iq), iqImbalanceDb: iqImbalanceDb(iq) };
}
