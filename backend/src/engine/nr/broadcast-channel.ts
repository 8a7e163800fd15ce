import { CRC24C, crcRemainder } from '../coding/crc.js';
import { goldBits } from '../coding/gold.js';
import { inputInterleaver, polarCode, polarEncode, subBlockOrder } from '../coding/polar.js';
import { polarListDecode } from '../coding/polar-list.js';
import { deinterleavePayload, interleavePayload, PAYLOAD_BITS, scramblePayload, type MaxBlocks } from './broadcast-payload.js';
import { qpskPoints } from './sequences.js';

/** Coded bits of one block: 432 QPSK symbols (TS 38.212 clause 7.1.5). */
export const CODED_BITS = 864;
const MESSAGE_BITS = PAYLOAD_BITS + CRC24C.width;
const CODE = polarCode(512, MESSAGE_BITS);
const INTERLEAVER = inputInterleaver(MESSAGE_BITS);
const SENT_ORDER = subBlockOrder(CODE.length);
const LIST_SIZE = 8;

/** Which block it is, as far as its bits depend on it: v is the low two (L_max 4) or three bits of its index. */
export interface BroadcastKey {
  readonly cellId: number;
  readonly v: number;
  readonly maxBlocks: MaxBlocks;
}

/**
 * Log-likelihood ratios of the 512 codeword bits, positive for 0, from those of the 864 received
 * bits: second scrambling (TS 38.211 clause 7.3.3.1) and repetition (TS 38.212 clause 5.4.1)
 * undone. Ratios of blocks that carry the same payload may be added.
 */
export function codewordRatios(received: ArrayLike<number>, { cellId, v }: BroadcastKey): Float64Array {
  const scrambling = goldBits(cellId, CODED_BITS, v * CODED_BITS);
  const word = new Float64Array(CODE.length);
  for (let i = 0; i < CODED_BITS; i++) word[SENT_ORDER[i % CODE.length]] += scrambling[i] ? -received[i] : received[i];
  return word;
}

/** The payload (32 bits in its own order), or null where no path of the list passes the CRC. */
export function decodeBroadcast(word: Float64Array, key: BroadcastKey): Uint8Array | null {
  for (const path of polarListDecode(CODE, word, LIST_SIZE)) {
    const bits = new Uint8Array(MESSAGE_BITS);
    INTERLEAVER.forEach((from, to) => { bits[from] = path.message[to]; });
    if (crcRemainder(bits, CRC24C) !== 0) continue;
    return deinterleavePayload(scramblePayload(bits.subarray(0, PAYLOAD_BITS), key.cellId, key.maxBlocks));
  }
  return null;
}

/** The 512 bits of a payload's codeword, in the order of the polar code. */
export function codewordOf(payload: ArrayLike<number>, cellId: number, maxBlocks: MaxBlocks): Uint8Array {
  const scrambled = scramblePayload(interleavePayload(payload), cellId, maxBlocks);
  const parity = crcRemainder(scrambled, CRC24C);
  const bits = new Uint8Array(MESSAGE_BITS);
  bits.set(scrambled);
  for (let i = 0; i < CRC24C.width; i++) bits[PAYLOAD_BITS + i] = (parity >>> (CRC24C.width - 1 - i)) & 1;
  return polarEncode(CODE, INTERLEAVER.map((from) => bits[from]));
}

/** The 432 points that carry a payload, interleaved, in the order of their mapping. */
export function encodeBroadcast(payload: ArrayLike<number>, { cellId, v, maxBlocks }: BroadcastKey): Float64Array {
  const word = codewordOf(payload, cellId, maxBlocks);
  const scrambling = goldBits(cellId, CODED_BITS, v * CODED_BITS);
  return qpskPoints(Uint8Array.from(scrambling, (c, i) => c ^ word[SENT_ORDER[i % CODE.length]]));
}
