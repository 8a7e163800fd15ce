import { BLOCK_SUBCARRIERS, BLOCK_SYMBOLS, broadcastLayout, SYNC_FIRST } from './block-layout.js';
import { encodeBroadcast } from './broadcast-channel.js';
import { payloadAt, type MaxBlocks } from './broadcast-payload.js';
import { broadcastReference, primarySequence, secondarySequence } from './sequences.js';

/** Everything that a block's four symbols carry, once its payload is known. */
export interface BlockIdentity {
  readonly cellId: number;
  readonly maxBlocks: MaxBlocks;
  readonly blockIndex: number;
  readonly systemFrameNumber: number;
  readonly halfFrame: 0 | 1;
}

/**
 * The points of a block, 4 symbols of 240 subcarriers, interleaved, unit power, zero where nothing
 * is sent. `payload` is that of any block of the cell within the same 1,024 frames.
 */
export function knownBlock(payload: ArrayLike<number>, block: BlockIdentity): Float64Array[] {
  const { cellId, maxBlocks, blockIndex, halfFrame } = block;
  const points = Array.from({ length: BLOCK_SYMBOLS }, () => new Float64Array(2 * BLOCK_SUBCARRIERS));
  primarySequence(cellId % 3).forEach((chip, n) => { points[0][2 * (SYNC_FIRST + n)] = chip; });
  secondarySequence(cellId).forEach((chip, n) => { points[2][2 * (SYNC_FIRST + n)] = chip; });
  const { data, reference } = broadcastLayout(cellId);
  const v = blockIndex % (maxBlocks === 4 ? 4 : 8);
  const coded = encodeBroadcast(payloadAt(payload, block), { cellId, v, maxBlocks });
  const pilots = broadcastReference(cellId, maxBlocks === 4 ? v + 4 * halfFrame : v);
  for (const [elements, values] of [[data, coded], [reference, pilots]] as const) {
    elements.forEach(({ symbol, subcarrier }, i) => {
      points[symbol][2 * subcarrier] = values[2 * i];
      points[symbol][2 * subcarrier + 1] = values[2 * i + 1];
    });
  }
  return points;
}
