/**
 * Long division of the bits by a generator polynomial; `polynomial` is written without its
 * leading term, start value 0, no inversion. Returns the remainder, first bit first.
 */
export function crcBits(bits: ArrayLike<number>, polynomial: number, width: number): Uint8Array {
  const register = new Uint8Array(width);
  for (let i = 0; i < bits.length; i++) {
    const feedback = register[0] ^ bits[i];
    register.copyWithin(0, 1);
    register[width - 1] = 0;
    if (feedback) for (let b = 0; b < width; b++) register[b] ^= (polynomial >>> (width - 1 - b)) & 1;
  }
  return register;
}

/** Most significant bit first. */
export function bitsOf(value: number, width: number): number[] {
  return Array.from({ length: width }, (_, i) => Math.floor(value / 2 ** (width - 1 - i)) % 2);
}
