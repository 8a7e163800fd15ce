import { resample } from '../vector/resample.js';
import { conjugate, mix } from '../vector/mix.js';
import type { SampleSource } from '../types.js';
import { SAMPLES_PER_US } from './training.js';

/** The PHY's clock as a divisor of 20 MHz: 1, 2 (10 MHz) or 4 (5 MHz channels). */
export type ClockDivisor = 1 | 2 | 4;

/**
 * A piece of the capture at `oversampling` times the PHY's own 20 MHz / clock divisor. Times
 * in it are nominal microseconds (those of the 20 MHz clock).
 */
export interface Piece {
  readonly iq: Float32Array;
  readonly samplesPerUs: number;
  readonly oversampling: number;
  readonly clock: ClockDivisor;
  readonly rateHz: number;
  /** Place of sample 0 in the capture (fractional samples do not occur). */
  readonly startSample: number;
  readonly inverted: boolean;
  /** What was removed from every frequency (after turning upright), Hz. */
  readonly offsetHz: number;
}

/** The least power of two times the PHY's clock that holds the capture's whole band. */
export function nativeRate(captureRateHz: number, clock: ClockDivisor): { rateHz: number; oversampling: number } {
  let oversampling = 1;
  while ((20e6 / clock) * oversampling < 0.999 * captureRateHz) oversampling *= 2;
  return { rateHz: (20e6 / clock) * oversampling, oversampling };
}

export interface Reading {
  readonly startSample: number;
  readonly nominalUs: number;
  readonly clock: ClockDivisor;
  readonly inverted?: boolean;
  readonly offsetHz?: number;
  /** Keep only this much around the (new) zero, Hz: rounded up to a power of two times the PHY's clock. Default: everything. */
  readonly widthHz?: number;
}

/** Reads a piece, turns it upright and takes `offsetHz` out. */
export function readPiece(source: SampleSource, at: Reading): Piece {
  const { rateHz, oversampling } = nativeRate(Math.min(source.sampleRateHz, at.widthHz ?? source.sampleRateHz), at.clock);
  const start = Math.max(0, Math.floor(at.startSample));
  const count = Math.min(source.samples - start, Math.ceil(at.nominalUs * 1e-6 * at.clock * source.sampleRateHz));
  const raw = source.read(start, Math.max(0, count));
  const upright = at.inverted ? conjugate(raw) : raw;
  const moved = at.offsetHz ? mix(upright, -at.offsetHz, source.sampleRateHz) : upright;
  return {
    iq: rateHz === source.sampleRateHz ? moved : resample(moved, source.sampleRateHz, rateHz),
    samplesPerUs: SAMPLES_PER_US * oversampling, oversampling, clock: at.clock, rateHz,
    startSample: start, inverted: at.inverted ?? false, offsetHz: at.offsetHz ?? 0,
  };
}

/** The same piece with more taken out. */
export function shifted(piece: Piece, offsetHz: number): Piece {
  return { ...piece, iq: mix(piece.iq, -offsetHz, piece.rateHz), offsetHz: piece.offsetHz + offsetHz };
}

/** The same piece turned over; the offset that was removed turns with it. */
export function turned(piece: Piece): Piece {
  return { ...piece, iq: conjugate(piece.iq), inverted: !piece.inverted, offsetHz: -piece.offsetHz };
}
