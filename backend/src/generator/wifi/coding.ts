import { crcBits } from '../crc.js';

/** Rate-1/2 convolutional code, octal 133 and 171 (IEEE 802.11 clause 17.3.5.6); starts from zeros. */
export function convolve(bits: ArrayLike<number>): Uint8Array {
  const at = (i: number) => (i < 0 ? 0 : bits[i]);
  const out = new Uint8Array(2 * bits.length);
  for (let i = 0; i < bits.length; i++) {
    out[2 * i] = at(i) ^ at(i - 2) ^ at(i - 3) ^ at(i - 5) ^ at(i - 6);
    out[2 * i + 1] = at(i) ^ at(i - 1) ^ at(i - 2) ^ at(i - 3) ^ at(i - 6);
  }
  return out;
}

/**
 * First permutation of the interleaver for one bit a tone: written by rows of `columns`, read by
 * columns (clause 17.3.5.7: 16 columns; 19.3.11.8 and 21.3.10.8: 13, 18, 26 by bandwidth).
 */
export function interleave(bits: ArrayLike<number>, columns: number): Uint8Array {
  const rows = bits.length / columns;
  const out = new Uint8Array(bits.length);
  for (let k = 0; k < bits.length; k++) out[rows * (k % columns) + Math.floor(k / columns)] = bits[k];
  return out;
}

/** CRC of HT-SIG, VHT-SIG-A and HE-SIG-A: D^8 + D^2 + D + 1, started from ones and inverted, C7 first (clause 19.3.9.4.4). */
export function signalCrc(bits: ArrayLike<number>): Uint8Array {
  // Ones in the register are the same as the first eight bits inverted.
  const started = Uint8Array.from(bits, (bit, i) => (i < 8 ? bit ^ 1 : bit));
  return crcBits(started, 0x07, 8).map((bit) => bit ^ 1);
}

/** Polarity of the pilots, 127 values: scrambler x^7 + x^4 + 1 from all ones (clause 17.3.5.10). */
export const PILOT_POLARITY: readonly number[] = (() => {
  const state = [1, 1, 1, 1, 1, 1, 1];
  return Array.from({ length: 127 }, () => {
    const bit = state[6] ^ state[3];
    state.pop();
    state.unshift(bit);
    return 1 - 2 * bit;
  });
})();

/** Least significant bit first, as the fields of a PHY header are sent. */
export function field(value: number, width: number): number[] {
  return Array.from({ length: width }, (_, i) => (value >> i) & 1);
}
