/**
 * A cyclic redundancy code: `polynomial` without its leading term, most significant bit first;
 * the register starts at 0 and nothing is inverted (TS 38.212 clause 5.1, TS 36.212 clause 5.1.1).
 */
export interface Crc {
  readonly width: number;
  readonly polynomial: number;
}

/** D^24+D^23+D^21+D^20+D^17+D^15+D^13+D^12+D^8+D^4+D^2+D+1: TS 38.212 clause 5.1. */
export const CRC24C: Crc = { width: 24, polynomial: 0xb2b117 };

/**
 * The remainder of `count` bits from `from` on, as a number: the parity word of a message, and 0
 * for a message that is followed by its own parity word.
 */
export function crcRemainder(bits: ArrayLike<number>, crc: Crc, from = 0, count = bits.length - from): number {
  const top = crc.width - 1;
  const mask = 2 ** crc.width - 1;
  let register = 0;
  for (let i = from; i < from + count; i++) {
    const feedback = ((register >>> top) & 1) ^ bits[i];
    register = ((register << 1) & mask) ^ (feedback ? crc.polynomial : 0);
  }
  return register >>> 0;
}
