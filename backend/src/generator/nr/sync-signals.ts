import { goldSequence, qpsk } from '../gold.js';

/** Length-127 register x(i+7) = x(i+tap) + x(i) mod 2. */
function register(start: readonly number[], tap: number): Uint8Array {
  const x = new Uint8Array(127 + 7);
  x.set(start);
  for (let i = 0; i < 127; i++) x[i + 7] = x[i + tap] ^ x[i];
  return x;
}

/** Primary synchronisation signal, 127 values of ±1 (TS 38.211 clause 7.4.2.2.1). */
export function nrPss(cellId: number): Int8Array {
  const x = register([0, 1, 1, 0, 1, 1, 1], 4);
  return Int8Array.from({ length: 127 }, (_, n) => 1 - 2 * x[(n + 43 * (cellId % 3)) % 127]);
}

/** Secondary synchronisation signal, 127 values of ±1 (TS 38.211 clause 7.4.2.3.1). */
export function nrSss(cellId: number): Int8Array {
  const first = Math.floor(cellId / 3);
  const m0 = 15 * Math.floor(first / 112) + 5 * (cellId % 3);
  const m1 = first % 112;
  const x0 = register([1, 0, 0, 0, 0, 0, 0], 4);
  const x1 = register([1, 0, 0, 0, 0, 0, 0], 1);
  return Int8Array.from({ length: 127 }, (_, n) => (1 - 2 * x0[(n + m0) % 127]) * (1 - 2 * x1[(n + m1) % 127]));
}

/** Which block it is, as far as its signals carry it. */
export interface BlockIdentity {
  readonly cellId: number;
  readonly blockIndex: number;
  readonly halfFrame: 0 | 1;
  /** L̄_max: 4, 8 or 64 (10 and 20 in shared spectrum). */
  readonly maxBlocks: number;
}

/** The 144 reference symbols of PBCH, interleaved (TS 38.211 clause 7.4.1.4.1). */
export function pbchReference({ cellId, blockIndex, halfFrame, maxBlocks }: BlockIdentity): Float64Array {
  const i = maxBlocks === 4 ? (blockIndex % 4) + 4 * halfFrame : blockIndex % 8;
  const cInit = 2048 * (i + 1) * (Math.floor(cellId / 4) + 1) + 64 * (i + 1) + (cellId % 4);
  return qpsk(goldSequence(cInit, 288));
}
