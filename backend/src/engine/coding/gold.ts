/** Both registers run this far before the first output (TS 36.211 clause 7.2, TS 38.211 clause 5.2.1: N_C). */
const LEAD_IN = 1600;

/**
 * The length-31 Gold sequence of TS 36.211 clause 7.2 and TS 38.211 clause 5.2.1: bits
 * c(skip) to c(skip + count − 1), each 0 or 1. `cInit` is the second register's start, below 2³¹.
 */
export function goldBits(cInit: number, count: number, skip = 0): Uint8Array {
  let x1 = 1;
  let x2 = cInit >>> 0;
  const out = new Uint8Array(count);
  const from = LEAD_IN + skip;
  for (let n = 0; n < from + count; n++) {
    if (n >= from) out[n - from] = (x1 ^ x2) & 1;
    // Bit 0 is x(n); the new bit x(n + 31) enters at bit 30.
    x1 = (x1 >>> 1) | (((x1 ^ (x1 >>> 3)) & 1) << 30);
    x2 = (x2 >>> 1) | (((x2 ^ (x2 >>> 1) ^ (x2 >>> 2) ^ (x2 >>> 3)) & 1) << 30);
  }
  return out;
}
