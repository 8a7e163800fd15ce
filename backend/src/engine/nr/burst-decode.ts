import { codewordRatios, decodeBroadcast } from './broadcast-channel.js';
import { readPayload, type MasterInformation } from './broadcast-payload.js';
import { blockRatios } from './block-ratios.js';
import { estimateChannel } from './block-channel.js';
import { patternsOf } from './block-pattern.js';
import type { BlockReader } from './block-reader.js';
import type { FoundBlock } from './block-search.js';
import { collectBlocks, type BlockHypothesis } from './burst.js';

/** A payload that passed its CRC and does not contradict the reference signal. */
export interface DecodedBroadcast {
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

/**
 * The broadcast channel of the block found: alone, then added up with the other blocks that carry
 * the same payload (those of its half frame; where 64 are possible, those whose index has the
 * same three high bits). Null where no hypothesis passes the CRC.
 */
export function decodeBurst(reader: BlockReader, first: FoundBlock): DecodedBroadcast | null {
  const { index } = first.reference;
  const ratios = ratiosOf(first, first.cellId);
  const hypotheses = hypothesesOf(first.spacingHz, index);
  for (const hypothesis of hypotheses) {
    const decoded = decode(codewordRatios(ratios, keyOf(first, hypothesis, hypothesis.blockIndex)), { first, hypothesis, combined: 1 });
    if (decoded) return decoded;
  }
  for (const hypothesis of hypotheses) {
    const decoded = decodeSum(reader, first, hypothesis);
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

function decode(word: Float64Array, { first, hypothesis, combined }: { first: FoundBlock; hypothesis: BlockHypothesis; combined: number }): DecodedBroadcast | null {
  const payload = decodeBroadcast(word, keyOf(first, hypothesis, hypothesis.blockIndex));
  const information = payload && readPayload(payload, hypothesis.maxBlocks);
  if (!payload || !information) return null;
  // Four blocks: the reference signal carries the half frame too.
  if (hypothesis.maxBlocks === 4 && information.halfFrame !== Math.floor(first.reference.index / 4)) return null;
  const blockIndex = hypothesis.blockIndex + 8 * information.blockIndexHigh;
  return { payload, information, hypothesis: { ...hypothesis, blockIndex }, combined };
}
