import { codewordOf, codewordRatios, decodeBroadcast } from './broadcast-channel.js';
import { payloadAt, readPayload, PAYLOAD_BITS, type MasterInformation } from './broadcast-payload.js';
import type { FoundBlock } from './block-search.js';
import { blockStartS, HALF_FRAME_S, type BlockHypothesis } from './burst.js';

/** A block with the ratios of its 864 bits. */
export interface SoftBlock {
  readonly block: FoundBlock;
  readonly ratios: Float64Array;
}

export interface JointBroadcast {
  /** That of the first block. */
  readonly payload: Uint8Array;
  readonly information: MasterInformation;
  readonly combined: number;
}

/** Half frames that the low four bits of the frame number and the half-frame bit count: beyond, the message itself changes. */
const COUNTED = 32;
/** A block belongs to the first one's frames where it starts within this share of a symbol of its place. */
const IN_PLACE = 0.2;

/**
 * The first block's broadcast channel with the help of blocks of other half frames. Their payloads
 * differ in the counted bits and in the scrambling that these choose (TS 38.212 clauses 7.1.1 and
 * 7.1.2). Coding is linear, so that for each value of the first block's count the difference of
 * two codewords is known, and the ratios can be added with its signs.
 */
export function decodeJointly(blocks: readonly SoftBlock[], hypothesis: BlockHypothesis): JointBroadcast | null {
  const [first] = blocks;
  const { cellId } = first.block;
  const { maxBlocks, blockIndex } = hypothesis;
  const key = { cellId, v: blockIndex % (maxBlocks === 4 ? 4 : 8), maxBlocks };
  const others = blocks.slice(1).flatMap((each) => placed(each, first.block, hypothesis) ?? []);
  if (others.length === 0) return null;
  const own = codewordRatios(first.ratios, key);
  const words = others.map(({ soft, v }) => codewordRatios(soft.ratios, { ...key, v }));
  for (let count = 0; count < COUNTED; count++) {
    if (maxBlocks === 4 && count % 2 !== Math.floor(first.block.reference.index / 4)) continue;
    const inReach = others.flatMap((each, i) => (count + each.halfFrames >= 0 && count + each.halfFrames < COUNTED ? [{ ...each, word: words[i] }] : []));
    if (inReach.length === 0) continue;
    const sum = own.slice();
    const base = codewordAt(count, key);
    for (const { halfFrames, word } of inReach) {
      const other = codewordAt(count + halfFrames, key);
      for (let i = 0; i < sum.length; i++) sum[i] += other[i] === base[i] ? word[i] : -word[i];
    }
    const payload = decodeBroadcast(sum, key);
    const information = payload && readPayload(payload, maxBlocks);
    if (payload && information && 2 * (information.systemFrameNumber % 16) + information.halfFrame === count) {
      return { payload, information, combined: 1 + inReach.length };
    }
  }
  return null;
}

/** Where another block stands against the first, or null where samples were lost between or it is another pattern's. */
function placed(soft: SoftBlock, first: FoundBlock, { pattern, maxBlocks, blockIndex }: BlockHypothesis): { soft: SoftBlock; halfFrames: number; v: number } | null {
  const { index } = soft.block.reference;
  const low = maxBlocks === 4 ? index % 4 : index;
  // Of 64 blocks only those of the same place are sure to share the index's high bits.
  if (maxBlocks === 64 && low !== blockIndex % 8) return null;
  const at = (usefulS: number, place: number) => usefulS - (maxBlocks === 64 ? 0 : blockStartS(pattern, place));
  const apart = (at(soft.block.usefulS, low) - at(first.usefulS, blockIndex)) / HALF_FRAME_S;
  const halfFrames = Math.round(apart);
  if (Math.abs(apart - halfFrames) * HALF_FRAME_S > IN_PLACE / first.spacingHz) return null;
  if (maxBlocks === 4 && Math.abs(Math.floor(index / 4) - Math.floor(first.reference.index / 4)) !== Math.abs(halfFrames % 2)) return null;
  return { soft, halfFrames, v: low };
}

/** Codeword of a payload that holds nothing but a count of half frames. */
function codewordAt(count: number, { cellId, maxBlocks }: { cellId: number; maxBlocks: BlockHypothesis['maxBlocks'] }): Uint8Array {
  const place = { systemFrameNumber: count >> 1, halfFrame: (count % 2) as 0 | 1, blockIndex: 0, maxBlocks };
  return codewordOf(payloadAt(new Uint8Array(PAYLOAD_BITS), place), cellId, maxBlocks);
}
