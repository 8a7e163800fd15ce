import { goldBits } from '../coding/gold.js';

/** Length of the primary and of the secondary synchronisation signal. */
export const SYNC_LENGTH = 127;

/** One period of the m-sequence x(i+7) = x(i+tap) + x(i) mod 2 that starts with `start`. */
function mSequence(tap: number, start: readonly number[]): Uint8Array {
  const x = new Uint8Array(SYNC_LENGTH);
  for (let i = 0; i < SYNC_LENGTH; i++) x[i] = i < 7 ? start[i] : x[i - 7 + tap] ^ x[i - 7];
  return x;
}

/** Primary synchronisation signal of N_ID(2) = 0 to 2, values ±1 (TS 38.211 clause 7.4.2.2.1). */
export function primarySequence(nId2: number): Float64Array {
  const x = mSequence(4, [0, 1, 1, 0, 1, 1, 1]);
  return Float64Array.from({ length: SYNC_LENGTH }, (_, n) => 1 - 2 * x[(n + 43 * nId2) % SYNC_LENGTH]);
}

/** Secondary synchronisation signal of a cell identity 0 to 1007, values ±1 (clause 7.4.2.3.1). */
export function secondarySequence(cellId: number): Float64Array {
  const nId1 = Math.floor(cellId / 3);
  const m0 = 15 * Math.floor(nId1 / 112) + 5 * (cellId % 3);
  const m1 = nId1 % 112;
  const start = [1, 0, 0, 0, 0, 0, 0];
  const x0 = mSequence(4, start);
  const x1 = mSequence(1, start);
  return Float64Array.from({ length: SYNC_LENGTH }, (_, n) => (1 - 2 * x0[(n + m0) % SYNC_LENGTH]) * (1 - 2 * x1[(n + m1) % SYNC_LENGTH]));
}

/**
 * The 144 reference symbols of the broadcast channel, interleaved, unit power, for index ī = 0 to 7
 * (clause 7.4.1.4.1): ī is the block index with, for four blocks, the half frame as third bit.
 */
export function broadcastReference(cellId: number, index: number): Float64Array {
  const cInit = 2 ** 11 * (index + 1) * (Math.floor(cellId / 4) + 1) + 2 ** 6 * (index + 1) + (cellId % 4);
  return qpskPoints(goldBits(cInit, 288));
}

/** QPSK of TS 38.211 clause 5.1.3, two bits a point, interleaved, unit power. */
export function qpskPoints(bits: ArrayLike<number>): Float64Array {
  return Float64Array.from(bits, (bit) => (1 - 2 * bit) * Math.SQRT1_2);
}
