import { INPUT_INTERLEAVER, RELIABILITY_512, SUB_BLOCK_INTERLEAVER } from './polar-tables.js';

const N = 512;

/**
 * Polar code of the broadcast channel (TS 38.212 clauses 5.3.1 and 5.4.1 with n_max = 9, I_IL = 1,
 * no parity bits, I_BIL = 0): K bits in, E ≥ 512 bits out, the surplus by repetition.
 */
export function polarEncode(bits: Uint8Array, e: number): Uint8Array {
  const u = new Uint8Array(N);
  const interleaved = inputInterleave(bits);
  // E ≥ N, so no position is frozen by rate matching; the K best carry the bits in index order.
  const information = RELIABILITY_512.slice(N - bits.length).sort((p, q) => p - q);
  information.forEach((position, k) => { u[position] = interleaved[k]; });
  const y = subBlockInterleave(transform(u));
  return Uint8Array.from({ length: e }, (_, k) => y[k % N]);
}

/** u·G with G the ninth Kronecker power of (1 0; 1 1), in place of the matrix. */
function transform(u: Uint8Array): Uint8Array {
  const d = Uint8Array.from(u);
  for (let half = 1; half < N; half *= 2) {
    for (let at = 0; at < N; at++) if ((at & half) === 0) d[at] ^= d[at + half];
  }
  return d;
}

function inputInterleave(bits: Uint8Array): Uint8Array {
  const left = INPUT_INTERLEAVER.length - bits.length;
  return Uint8Array.from(INPUT_INTERLEAVER.filter((p) => p >= left), (p) => bits[p - left]);
}

function subBlockInterleave(d: Uint8Array): Uint8Array {
  return Uint8Array.from({ length: N }, (_, n) => d[SUB_BLOCK_INTERLEAVER[Math.floor((32 * n) / N)] * (N / 32) + (n % (N / 32))]);
}
