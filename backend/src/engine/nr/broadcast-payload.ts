import { goldBits } from '../coding/gold.js';

/** A of TS 38.212 clause 7.1.1: 24 bits of the message and 8 of the physical layer. */
export const PAYLOAD_BITS = 32;

/** Number of blocks a half frame may carry, L_max. */
export type MaxBlocks = 4 | 8 | 64;

/** G(j), TS 38.212 Table 7.1.1-1. */
const INTERLEAVER = [16, 23, 18, 17, 8, 30, 10, 6, 24, 7, 0, 5, 3, 2, 1, 4, 9, 11, 12, 13, 14, 15, 19, 20, 21, 22, 25, 26, 27, 28, 29, 31];

/** Bits of the payload ā in its own order: the message choice, 23 of the MIB, 8 of the physical layer. */
const FRAME_NUMBER = [1, 2, 3, 4, 5, 6, 24, 25, 26, 27];
const HALF_FRAME = 28;
const LAST = [29, 30, 31];

/** Where each payload bit lands: frame number first, the half frame at G(10), the last three from G(11), the rest from G(14). */
const PLACES = interleavedPlaces();

function interleavedPlaces(): Int32Array {
  const places = new Int32Array(PAYLOAD_BITS);
  let frame = 0;
  let rest = 14;
  for (let i = 0; i < PAYLOAD_BITS; i++) {
    const last = LAST.indexOf(i);
    const j = FRAME_NUMBER.includes(i) ? frame++ : i === HALF_FRAME ? 10 : last >= 0 ? 11 + last : rest++;
    places[i] = INTERLEAVER[j];
  }
  return places;
}

export function interleavePayload(payload: ArrayLike<number>): Uint8Array {
  const out = new Uint8Array(PAYLOAD_BITS);
  for (let i = 0; i < PAYLOAD_BITS; i++) out[PLACES[i]] = payload[i];
  return out;
}

export function deinterleavePayload(bits: ArrayLike<number>): Uint8Array {
  return Uint8Array.from(PLACES, (place) => bits[place]);
}

/**
 * First scrambling (clause 7.1.2) of interleaved bits; its own inverse. The bits that say which
 * part of the sequence is used stay as they are and take no place in it.
 */
export function scramblePayload(bits: Uint8Array, cellId: number, maxBlocks: MaxBlocks): Uint8Array {
  const clear = new Set([PLACES[25], PLACES[26], PLACES[HALF_FRAME]]);
  if (maxBlocks === 64) for (const i of LAST) clear.add(PLACES[i]);
  const part = 2 * bits[PLACES[25]] + bits[PLACES[26]];
  const used = PAYLOAD_BITS - clear.size;
  const sequence = goldBits(cellId, used, part * used);
  let next = 0;
  return bits.map((bit, i) => (clear.has(i) ? bit : bit ^ sequence[next++]));
}

/** The master information block of TS 38.331 clause 6.2.2, with the physical layer's share of it. */
export interface MasterInformation {
  /** All ten bits. */
  readonly systemFrameNumber: number;
  readonly subCarrierSpacingCommon: 'scs15or60' | 'scs30or120';
  /** The four bits of the message. */
  readonly ssbSubcarrierOffset: number;
  /** With the bit carried in the payload for up to eight blocks (FR1). */
  readonly kSsb: number;
  readonly dmrsTypeAPosition: 'pos2' | 'pos3';
  readonly pdcchConfigSIB1: number;
  readonly cellBarred: 'barred' | 'notBarred';
  readonly intraFreqReselection: 'allowed' | 'notAllowed';
  readonly halfFrame: 0 | 1;
  /** The three high bits of the block index where 64 blocks are possible, else 0. */
  readonly blockIndexHigh: number;
}

function numberOf(bits: ArrayLike<number>, places: readonly number[]): number {
  return places.reduce((value, place) => 2 * value + bits[place], 0);
}

const run = (from: number, count: number) => Array.from({ length: count }, (_, i) => from + i);

/** Fields of a payload in its own order; null where it is no MIB (the message's choice bit is 1). */
export function readPayload(payload: ArrayLike<number>, maxBlocks: MaxBlocks): MasterInformation | null {
  if (payload[0] !== 0) return null;
  const offset = numberOf(payload, run(8, 4));
  const last = numberOf(payload, LAST);
  return {
    systemFrameNumber: numberOf(payload, FRAME_NUMBER),
    subCarrierSpacingCommon: payload[7] ? 'scs30or120' : 'scs15or60',
    ssbSubcarrierOffset: offset,
    kSsb: maxBlocks === 64 ? offset : 16 * payload[LAST[0]] + offset,
    dmrsTypeAPosition: payload[12] ? 'pos3' : 'pos2',
    pdcchConfigSIB1: numberOf(payload, run(13, 8)),
    cellBarred: payload[21] ? 'notBarred' : 'barred',
    intraFreqReselection: payload[22] ? 'notAllowed' : 'allowed',
    halfFrame: payload[HALF_FRAME] ? 1 : 0,
    blockIndexHigh: maxBlocks === 64 ? last : 0,
  };
}

/** The payload that another block of the cell carries: its own frame number, half frame and index. */
export function payloadAt(
  payload: ArrayLike<number>,
  { systemFrameNumber, halfFrame, blockIndex, maxBlocks }: { systemFrameNumber: number; halfFrame: 0 | 1; blockIndex: number; maxBlocks: MaxBlocks },
): Uint8Array {
  const out = Uint8Array.from(payload);
  FRAME_NUMBER.forEach((place, i) => { out[place] = (systemFrameNumber >>> (9 - i)) & 1; });
  out[HALF_FRAME] = halfFrame;
  if (maxBlocks === 64) LAST.forEach((place, i) => { out[place] = (blockIndex >>> (5 - i)) & 1; });
  return out;
}
