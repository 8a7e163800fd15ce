import { goldBits } from '../coding/gold.js';
import { decodeTailBiting, encode, LTE_CODE, tailState } from '../coding/viterbi.js';
import { CARRIER_BLOCKS } from './numerology.js';
import type { Prefix } from './numerology.js';

/** Coded bits of the broadcast channel in one frame (TS 36.211 clause 6.6.1: a fourth of 1920 or 1728). */
export function bitsPerFrame(prefix: Prefix): number {
  return prefix === 'normal' ? 480 : 432;
}

/** 24 bits and 16 of parity. */
const WORD_BITS = 40;

/** The scrambling of the four frames of one transmission, TS 36.211 clause 6.6.1. */
export function broadcastScrambling(cellId: number, prefix: Prefix): Uint8Array {
  return goldBits(cellId, 4 * bitsPerFrame(prefix));
}

/** Columns of the sub-block interleaver for convolutional codes, TS 36.212 Table 5.1.4-2. */
const COLUMNS = [
  1, 17, 9, 25, 5, 21, 13, 29, 3, 19, 11, 27, 7, 23, 15, 31,
  0, 16, 8, 24, 4, 20, 12, 28, 2, 18, 10, 26, 6, 22, 14, 30,
];

/** Where each bit of the circular buffer comes from (3·bit + stream), TS 36.212 clause 5.1.4.2: filler bits left out. */
export function circularBuffer(length: number): Int16Array {
  const rows = Math.ceil(length / 32);
  const filler = 32 * rows - length;
  const order: number[] = [];
  for (let stream = 0; stream < 3; stream++) {
    for (const column of COLUMNS) {
      for (let row = 0; row < rows; row++) {
        const bit = 32 * row + column - filler;
        if (bit >= 0) order.push(3 * bit + stream);
      }
    }
  }
  return Int16Array.from(order);
}
const BUFFER = circularBuffer(WORD_BITS);

/** CRC of TS 36.212 clause 5.1.1: x¹⁶ + x¹² + x⁵ + 1, starting from zero; the first bit in bit 15. */
export function crc16(bits: ArrayLike<number>): number {
  let register = 0;
  for (let i = 0; i < bits.length; i++) {
    const feedback = ((register >> 15) & 1) ^ bits[i];
    register = ((register << 1) & 0xffff) ^ (feedback ? 0x1021 : 0);
  }
  return register;
}

/** Parity mask by number of antenna ports, TS 36.212 Table 5.3.1.1-1. */
const MASKS: Readonly<Record<number, number>> = { 1: 0x0000, 2: 0xffff, 4: 0x5555 };

export interface MasterInformation {
  readonly resourceBlocks: number;
  readonly dlBandwidth: string;
  readonly phichDuration: 'normal' | 'extended';
  readonly phichResource: 'oneSixth' | 'half' | 'one' | 'two';
  /** The upper eight bits of the frame number. */
  readonly frameNumberUpper: number;
}

/** TS 36.331 clause 6.2.2, MasterInformationBlock; null where a field has a value that is not defined. */
export function parseMasterInformation(bits: ArrayLike<number>): MasterInformation | null {
  const field = (from: number, count: number) => {
    let value = 0;
    for (let i = from; i < from + count; i++) value = 2 * value + bits[i];
    return value;
  };
  const resourceBlocks = CARRIER_BLOCKS[field(0, 3)];
  if (resourceBlocks === undefined) return null;
  return {
    resourceBlocks,
    dlBandwidth: `n${resourceBlocks}`,
    phichDuration: field(3, 1) === 0 ? 'normal' : 'extended',
    phichResource: (['oneSixth', 'half', 'one', 'two'] as const)[field(4, 2)],
    frameNumberUpper: field(6, 8),
  };
}

export interface BroadcastWord {
  readonly information: MasterInformation;
  /** Σ of soft values that agree with the re-encoded word over Σ of magnitudes: 1 without noise. */
  readonly agreement: number;
  /** The coded and scrambled bits of all four frames. */
  readonly transmitted: Uint8Array;
}

/**
 * Soft bits (positive for 0) of one transmission's four frames as received, 0 where a frame is
 * missing, and the port number that was assumed: the word when its parity fits.
 */
export function decodeBroadcast(soft: Float64Array, scrambling: Uint8Array, ports: number): BroadcastWord | null {
  const gathered = new Float64Array(3 * WORD_BITS);
  for (let i = 0; i < soft.length; i++) gathered[BUFFER[i % BUFFER.length]] += scrambling[i] ? -soft[i] : soft[i];
  const { bits } = decodeTailBiting(gathered, LTE_CODE);
  let received = 0;
  for (let i = 24; i < WORD_BITS; i++) received = 2 * received + bits[i];
  if ((crc16(bits.subarray(0, 24)) ^ MASKS[ports]) !== received) return null;
  const information = parseMasterInformation(bits);
  if (!information) return null;
  const word = encode(bits, LTE_CODE, tailState(bits));
  const transmitted = Uint8Array.from(scrambling, (s, i) => s ^ word[BUFFER[i % BUFFER.length]]);
  return { information, transmitted, agreement: agreement(soft, transmitted) };
}

function agreement(soft: Float64Array, bits: Uint8Array): number {
  let sum = 0, magnitude = 0;
  for (let i = 0; i < soft.length; i++) {
    sum += bits[i] ? -soft[i] : soft[i];
    magnitude += Math.abs(soft[i]);
  }
  return magnitude > 0 ? sum / magnitude : 0;
}
