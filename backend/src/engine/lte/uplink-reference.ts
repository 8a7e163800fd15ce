/**
 * Base sequences of the uplink's reference symbols, TS 36.211 clause 5.5.1.1, for three
 * resource blocks and more: Zadoff-Chu sequences of the largest prime below the length,
 * continued cyclically. `length` subcarriers, interleaved. The first of the two sequences that a
 * group has from six blocks on: the second only occurs with sequence hopping.
 */
export function uplinkBaseSequence(group: number, length: number): Float64Array {
  const prime = largestPrimeBelow(length);
  const q = Math.floor((prime * (group + 1)) / 31 + 0.5);
  const out = new Float64Array(2 * length);
  for (let n = 0; n < length; n++) {
    const m = n % prime;
    const angle = (-Math.PI * ((q * m * (m + 1)) % (2 * prime))) / prime;
    out[2 * n] = Math.cos(angle);
    out[2 * n + 1] = Math.sin(angle);
  }
  return out;
}

function largestPrimeBelow(n: number): number {
  for (let p = n - 1; ; p--) if (isPrime(p)) return p;
}

function isPrime(n: number): boolean {
  for (let d = 2; d * d <= n; d++) if (n % d === 0) return false;
  return n > 1;
}

/** Whether so many blocks may be allocated: factors 2, 3 and 5 (TS 36.211 clause 5.3.3). */
export function isAllocation(blocks: number): boolean {
  let rest = blocks;
  for (const p of [2, 3, 5]) while (rest % p === 0 && rest > 0) rest /= p;
  return rest === 1;
}
