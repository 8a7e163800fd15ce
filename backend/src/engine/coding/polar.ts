import { POLAR_INPUT_PATTERN, POLAR_RELIABILITY, POLAR_SUB_BLOCKS } from './polar-tables.js';

/** A polar code of TS 38.212 clause 5.3.1 without parity-check bits, at most 512 bits long. */
export interface PolarCode {
  /** Length N of a codeword, a power of two. */
  readonly length: number;
  /** The sub-channels that carry information, ascending: clause 5.3.1.2. */
  readonly information: readonly number[];
  /** 1 where a sub-channel is frozen to 0. */
  readonly frozen: Uint8Array;
}

/** The code with the K most reliable sub-channels of N (nothing punctured or shortened: E ≥ N). */
export function polarCode(length: number, messageBits: number): PolarCode {
  if (length > 512 || Math.log2(length) % 1 !== 0) throw new RangeError(`a polar code of ${length} bits is not in the table`);
  const usable = POLAR_RELIABILITY.filter((position) => position < length);
  const information = usable.slice(length - messageBits).sort((a, b) => a - b);
  const frozen = new Uint8Array(length).fill(1);
  for (const position of information) frozen[position] = 0;
  return { length, information, frozen };
}

/** Codeword of message bits in the order of the sub-channels: u·G, G the n-fold Kronecker power of [1 0; 1 1]. */
export function polarEncode(code: PolarCode, message: ArrayLike<number>): Uint8Array {
  const word = new Uint8Array(code.length);
  code.information.forEach((position, k) => { word[position] = message[k]; });
  for (let half = 1; half < code.length; half *= 2) {
    for (let block = 0; block < code.length; block += 2 * half) {
      for (let i = block; i < block + half; i++) word[i] ^= word[i + half];
    }
  }
  return word;
}

/** Input interleaving, clause 5.3.1.1 with I_IL = 1: entry k is the bit that goes to place k. */
export function inputInterleaver(messageBits: number): number[] {
  const skipped = POLAR_INPUT_PATTERN.length - messageBits;
  return POLAR_INPUT_PATTERN.filter((m) => m >= skipped).map((m) => m - skipped);
}

/** Sub-block interleaving, clause 5.4.1.1: entry n is the codeword bit that is sent n-th. */
export function subBlockOrder(length: number): Int32Array {
  const block = length / 32;
  return Int32Array.from({ length }, (_, n) => POLAR_SUB_BLOCKS[Math.floor(n / block)] * block + (n % block));
}
