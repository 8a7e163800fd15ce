/** Primary synchronisation signal, 62 points, interleaved (TS 36.211 clause 6.11.1.1). */
export function ltePss(cellId: number): Float64Array {
  const u = [25, 29, 34][cellId % 3];
  const d = new Float64Array(124);
  for (let n = 0; n < 62; n++) {
    const angle = (-Math.PI * u * (n < 31 ? n * (n + 1) : (n + 1) * (n + 2))) / 63;
    d[2 * n] = Math.cos(angle);
    d[2 * n + 1] = Math.sin(angle);
  }
  return d;
}

/** Length-31 sequence of ±1: x(i+5) = Σ x(i+tap), started from 0 0 0 0 1 (clause 6.11.2.1). */
function chips(taps: readonly number[]): Int8Array {
  const x = new Uint8Array(36);
  x[4] = 1;
  for (let i = 0; i < 31; i++) x[i + 5] = taps.reduce((sum, tap) => sum ^ x[i + tap], 0);
  return Int8Array.from({ length: 31 }, (_, i) => 1 - 2 * x[i]);
}

/** Secondary synchronisation signal, 62 values of ±1 (clause 6.11.2.1); the second half frame differs. */
export function lteSss(cellId: number, secondHalf: boolean): Int8Array {
  const [m0, m1] = shifts(Math.floor(cellId / 3));
  const s = chips([0, 2]);
  const c = chips([0, 3]);
  const z = chips([0, 1, 2, 4]);
  const id2 = cellId % 3;
  const [even, odd] = secondHalf ? [m1, m0] : [m0, m1];
  const d = new Int8Array(62);
  for (let n = 0; n < 31; n++) {
    d[2 * n] = s[(n + even) % 31] * c[(n + id2) % 31];
    d[2 * n + 1] = s[(n + odd) % 31] * c[(n + id2 + 3) % 31] * z[(n + (even % 8)) % 31];
  }
  return d;
}

/** m0 and m1 of Table 6.11.2.1-1, by its formula. */
function shifts(id1: number): [number, number] {
  const q1 = Math.floor(id1 / 30);
  const q = Math.floor((id1 + (q1 * (q1 + 1)) / 2) / 30);
  const m = id1 + (q * (q + 1)) / 2;
  const m0 = m % 31;
  return [m0, (m0 + Math.floor(m / 31) + 1) % 31];
}
