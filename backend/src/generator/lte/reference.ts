import { goldSequence, qpsk } from '../gold.js';
import { lteSlot, type LtePrefix } from './timing.js';

export interface ReferencePlace {
  readonly cellId: number;
  readonly prefix: LtePrefix;
  /** Slot in the frame, 0 to 19. */
  readonly slot: number;
  /** Symbol in the slot. */
  readonly symbol: number;
  readonly resourceBlocks: number;
}

/** Subcarriers of a port's cell-specific reference symbols in a symbol, or none (TS 36.211 clause 6.10.1.2). */
export function referenceSubcarriers(port: number, { cellId, prefix, slot, symbol, resourceBlocks }: ReferencePlace): number[] {
  const v = comb(port, { symbol, symbols: lteSlot(prefix).symbols, slot });
  if (v === null) return [];
  const first = (v + (cellId % 6)) % 6;
  return Array.from({ length: 2 * resourceBlocks }, (_, m) => 6 * m + first);
}

function comb(port: number, { symbol, symbols, slot }: { symbol: number; symbols: number; slot: number }): number | null {
  if (port >= 2) return symbol === 1 ? 3 * (slot % 2) + (port === 3 ? 3 : 0) : null;
  if (symbol === 0) return port === 0 ? 0 : 3;
  if (symbol === symbols - 3) return port === 0 ? 3 : 0;
  return null;
}

/** The 2·N_RB points on those subcarriers, interleaved (clause 6.10.1.1). */
export function referencePoints({ cellId, prefix, slot, symbol, resourceBlocks }: ReferencePlace): Float64Array {
  const cInit = 1024 * (7 * (slot + 1) + symbol + 1) * (2 * cellId + 1) + 2 * cellId + (prefix === 'normal' ? 1 : 0);
  const all = qpsk(goldSequence(cInit, 4 * 110));
  return all.slice(2 * (110 - resourceBlocks), 2 * (110 + resourceBlocks));
}

/** Subcarriers reserved for reference symbols of ports 0 to `ports` − 1. */
export function reservedSubcarriers(ports: number, place: ReferencePlace): Set<number> {
  return new Set(Array.from({ length: ports }, (_, p) => referenceSubcarriers(p, place)).flat());
}
