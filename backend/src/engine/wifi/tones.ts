import { transformOf } from '../fourier/fft.js';
import type { Piece } from './piece.js';
import { LAYOUT } from './training.js';

/** Spectrum of 3.2 µs (nominal) from `atUs`, unshifted, interleaved, bins 312.5 kHz / clock apart; null outside the piece. */
export function toneSpectrum(piece: Piece, atUs: number): Float64Array | null {
  const size = LAYOUT.usefulUs * piece.samplesPerUs;
  const from = Math.round(atUs * piece.samplesPerUs);
  if (from < 0 || from + size > piece.iq.length >> 1) return null;
  const input = Float64Array.from(piece.iq.subarray(2 * from, 2 * (from + size)));
  const output = new Float64Array(2 * size);
  transformOf(size).forward(input, output);
  return output;
}

/** Place of tone `k` of the 20 MHz subchannel `channel` (64 tones each) in a spectrum of `size` bins. */
export function tonePlace(k: number, channel: number, size: number): number {
  const bin = k + 64 * channel;
  return 2 * (((bin % size) + size) % size);
}
