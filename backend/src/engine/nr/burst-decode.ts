import { codewordRatios, decodeBroadcast } from './broadcast-channel.js';
import { readPayload, type MasterInformation } from './broadcast-payload.js';
import { blockRatios } from './block-ratios.js';
import { estimateChannel } from './block-channel.js';
import { patternsOf } from './block-pattern.js';
import type { BlockReader } from './block-reader.js';
import type { FoundBlock } from './block-search.js';
import { collectBlocks, type BlockHypothesis } from './burst.js';
import { decodeJointly } from './joint-decode.js';

/** A payload that passed its CRC and does not contradict the reference signal. */
export interface DecodedBroadcast {
  /** The block whose payload it is. */
  readonly block: FoundBlock;
  readonly payload: Uint8Array;
  readonly information: MasterInformation;
  readonly hypothesis: BlockHypothesis;
  /** How many blocks were added up. */
  readonly combined: number;
}

/** Hypotheses about the block that a reference index allows, by its spacing (TS 38.213 clause 4.1). */
export function hypothesesOf(spacingHz: number, index: number): BlockHypothesis[] {
  const counts = spacingHz <= 30_000 ? ([8, 4] as const) : ([64] as const);
  return counts.flatMap((maxBlocks) => patternsOf(spacingHz).map((pattern) => ({ pattern, maxBlocks, blockIndex: maxBlocks === 4 ? index % 4 : index })));
}

/** Blocks looked at when the first does not decode, the clearest first. */
const FURTHER = 8;

/**
 * The broadcast channel of the block found: alone, then added up with the other blocks that carry
 * the same payload (those of its half frame; where 64 are possible, those whose index has the
 * same three high bits). Where that fails, each other block of the cell by itself, which needs no
 * timing between them, then all together over their half frames. Null where nothing passes the CRC.
 */
export function decodeBurst(reader: BlockReader, first: FoundBlock): DecodedBroadcast | null {
  const found = decodeHalfFrame(reader, first);
  if (found) return found;
  const clear = (block: FoundBlock) => block.primaryStatistic + block.secondaryStatistic + block.reference.statistic;
  const others = reader.others(first).sort((a, b) => clear(b) - clear(a)).slice(0, FURTHER);
  for (const block of others) {
    const decoded = decodeAlone(block);
    if (decoded) return decoded;
  }
  return decodeTogether([first, ...others].sort((a, b) => clear(b) - clear(a)));
}

function decodeHalfFrame(reader: BlockReader, first: FoundBlock): DecodedBroadcast | null {
  const alone = decodeAlone(first);
  if (alone) return alone;
  for (const hypothesis of hypothesesOf(first.spacingHz, first.reference.index)) {
    const decoded = decodeSum(reader, first, hypothesis);
    if (decoded) return decoded;
  }
  return null;
}

function decodeAlone(block: FoundBlock): DecodedBroadcast | null {
  const ratios = ratiosOf(block, block.cellId);
  for (const hypothesis of hypothesesOf(block.spacingHz, block.reference.index)) {
    const decoded = decode(codewordRatios(ratios, keyOf(block, hypothesis, hypothesis.blockIndex)), { first: block, hypothesis, combined: 1 });
    if (decoded) return decoded;
  }
  return null;
}

function decodeTogether(blocks: readonly FoundBlock[]): DecodedBroadcast | null {
  const [first] = blocks;
  const soft = blocks.map((block) => ({ block, ratios: ratiosOf(block, block.cellId) }));
  for (const hypothesis of hypothesesOf(first.spacingHz, first.reference.index)) {
    const joint = decodeJointly(soft, hypothesis);
    const decoded = joint && accepted(joint, { first, hypothesis, combined: joint.combined });
    if (decoded) return decoded;
  }
  return null;
}

function ratiosOf({ grid, reference }: Pick<FoundBlock, 'grid' | 'reference'>, cellId: number): Float64Array {
  return blockRatios(grid, cellId, estimateChannel(grid, cellId, reference));
}

function keyOf(first: FoundBlock, { maxBlocks }: BlockHypothesis, blockIndex: number) {
  return { cellId: first.cellId, v: blockIndex % (maxBlocks === 4 ? 4 : 8), maxBlocks };
}

function decodeSum(reader: BlockReader, first: FoundBlock, hypothesis: BlockHypothesis): DecodedBroadcast | null {
  const count = hypothesis.maxBlocks === 4 ? 4 : 8;
  const indices = Array.from({ length: count }, (_, i) => i);
  const parity = hypothesis.maxBlocks === 4 ? Math.floor(first.reference.index / 4) : 0;
  const blocks = collectBlocks(reader, first, { hypothesis, indices, halfFrames: [0], parity });
  if (blocks.length < 2) return null;
  const sum = new Float64Array(512);
  for (const block of blocks) {
    const word = codewordRatios(ratiosOf(block, first.cellId), keyOf(first, hypothesis, block.blockIndex));
    for (let i = 0; i < sum.length; i++) sum[i] += word[i];
  }
  return decode(sum, { first, hypothesis, combined: blocks.length });
}

function decode(word: Float64Array, of: { first: FoundBlock; hypothesis: BlockHypothesis; combined: number }): DecodedBroadcast | null {
  const payload = decodeBroadcast(word, keyOf(of.first, of.hypothesis, of.hypothesis.blockIndex));
  const information = payload && readPayload(payload, of.hypothesis.maxBlocks);
  return payload && information && accepted({ payload, information }, of);
}

function accepted({ payload, information }: Pick<DecodedBroadcast, 'payload' | 'information'>, { first, hypothesis, combined }: { first: FoundBlock; hypothesis: BlockHypothesis; combined: number }): DecodedBroadcast | null {
  // Four blocks: the reference signal carries the half frame too.
  if (hypothesis.maxBlocks === 4 && information.halfFrame !== Math.floor(first.reference.index / 4)) return null;
  const blockIndex = hypothesis.blockIndex + 8 * information.blockIndexHigh;
  return { block: first, payload, information, hypothesis: { ...hypothesis, blockIndex }, combined };
}
