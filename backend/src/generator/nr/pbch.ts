import { bitsOf, crcBits } from '../crc.js';
import { goldSequence, qpsk } from '../gold.js';
import { polarEncode } from './polar.js';
import type { BlockIdentity } from './sync-signals.js';

/** Master information, TS 38.331 clause 6.2.2, with what the physical layer adds to it. */
export interface NrMib {
  readonly systemFrameNumber: number;
  readonly subCarrierSpacingCommon: 'scs15or60' | 'scs30or120';
  /** Complete k_SSB. */
  readonly kSsb: number;
  readonly dmrsTypeAPosition: 'pos2' | 'pos3';
  readonly pdcchConfigSib1: number;
  readonly cellBarred: boolean;
  readonly intraFreqReselection: boolean;
  readonly spare: 0 | 1;
}

/** TS 38.212 Table 7.1.1-1. */
const PAYLOAD_INTERLEAVER = [16, 23, 18, 17, 8, 30, 10, 6, 24, 7, 0, 5, 3, 2, 1, 4, 9, 11, 12, 13, 14, 15, 19, 20, 21, 22, 25, 26, 27, 28, 29, 31];
/** CRC24C of TS 38.212 clause 5.1. */
const CRC24C = 0xb2b117;
const CODED_BITS = 864;

/** 432 QPSK points of one block, interleaved, in the order of mapping (TS 38.211 clause 7.3.3). */
export function pbchPoints(mib: NrMib, block: BlockIdentity): Float64Array {
  const coded = polarEncode(pbchTransportBits(mib, block), CODED_BITS);
  const v = block.blockIndex % (block.maxBlocks === 4 ? 4 : 8);
  const c = goldSequence(block.cellId, CODED_BITS * (v + 1)).subarray(CODED_BITS * v);
  return qpsk(coded.map((bit, i) => bit ^ c[i]));
}

/** 56 bits: scrambled payload and its CRC (TS 38.212 clauses 7.1.1 to 7.1.3). */
export function pbchTransportBits(mib: NrMib, block: BlockIdentity): Uint8Array {
  const a = scramblePayload(interleavePayload(payloadBits(mib, block)), mib, block);
  return Uint8Array.from([...a, ...crcBits(a, CRC24C, 24)]);
}

/** ā(0..31): message choice, MIB, then SFN bits 3..0, half frame and three more bits (clause 7.1.1). */
export function payloadBits(mib: NrMib, block: BlockIdentity): number[] {
  const frame = bitsOf(mib.systemFrameNumber, 10);
  const last = block.maxBlocks === 64 ? bitsOf(block.blockIndex >> 3, 3) : [(mib.kSsb >> 4) & 1, 0, 0];
  return [
    0,
    ...frame.slice(0, 6),
    mib.subCarrierSpacingCommon === 'scs30or120' ? 1 : 0,
    ...bitsOf(mib.kSsb & 15, 4),
    mib.dmrsTypeAPosition === 'pos3' ? 1 : 0,
    ...bitsOf(mib.pdcchConfigSib1, 8),
    mib.cellBarred ? 0 : 1,
    mib.intraFreqReselection ? 0 : 1,
    mib.spare,
    ...frame.slice(6),
    block.halfFrame,
    ...last,
  ];
}

function interleavePayload(payload: readonly number[]): Uint8Array {
  const a = new Uint8Array(32);
  let frame = 0;
  let block = 11;
  let other = 14;
  payload.forEach((bit, i) => {
    const isFrame = (i >= 1 && i <= 6) || (i >= 24 && i <= 27);
    const j = isFrame ? frame++ : i === 28 ? 10 : i >= 29 ? block++ : other++;
    a[PAYLOAD_INTERLEAVER[j]] = bit;
  });
  return a;
}

/** First scrambling (clause 7.1.2): block index, half frame and two frame bits are left in the clear. */
function scramblePayload(a: Uint8Array, mib: NrMib, block: BlockIdentity): Uint8Array {
  const clear = new Set([0, 6, 24]);
  if (block.maxBlocks === 64) for (const p of [2, 3, 5]) clear.add(p);
  const perFrame = 32 - clear.size;
  const v = (mib.systemFrameNumber >> 1) & 3;
  const c = goldSequence(block.cellId, 4 * perFrame);
  let j = v * perFrame;
  return a.map((bit, i) => (clear.has(i) ? bit : bit ^ c[j++]));
}
