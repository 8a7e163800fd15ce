/**
 * Pseudo-random sequence of TS 38.211 clause 5.2.1 (the same in TS 36.211 clause 7.2): two
 * length-31 shift registers, the first 1600 outputs dropped. One byte a bit, values 0 and 1.
 */
export function goldSequence(cInit: number, length: number): Uint8Array {
  const skip = 1600;
  const total = skip + length;
  const x1 = new Uint8Array(total + 31);
  const x2 = new Uint8Array(total + 31);
  x1[0] = 1;
  for (let i = 0; i < 31; i++) x2[i] = Math.floor(cInit / 2 ** i) % 2;
  for (let n = 0; n < total; n++) {
    x1[n + 31] = x1[n + 3] ^ x1[n];
    x2[n + 31] = x2[n + 3] ^ x2[n + 2] ^ x2[n + 1] ^ x2[n];
  }
  const c = new Uint8Array(length);
  for (let n = 0; n < length; n++) c[n] = x1[n + skip] ^ x2[n + skip];
  return c;
}

/** Pairs of bits to QPSK, (1−2b0)/√2 + j(1−2b1)/√2 (TS 38.211 clause 5.1.3). Interleaved. */
export function qpsk(bits: Uint8Array): Float64Array {
  const points = new Float64Array(bits.length);
  for (let i = 0; i < bits.length; i++) points[i] = (1 - 2 * bits[i]) * Math.SQRT1_2;
  return points;
}
