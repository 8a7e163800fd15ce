/** Subcarriers and symbols of a synchronisation block (TS 38.211 clause 7.4.3.1). */
export const BLOCK_SUBCARRIERS = 240;
export const BLOCK_SYMBOLS = 4;
/** First subcarrier of the primary (symbol 0) and the secondary signal (symbol 2). */
export const SYNC_FIRST = 56;
/** SS_REF, the subcarrier that gives the block its frequency (TS 38.104 clause 5.4.3.1). */
export const REFERENCE_SUBCARRIER = 120;

/** A resource element of the block. */
export interface Element {
  readonly symbol: number;
  readonly subcarrier: number;
}

/** True where the broadcast channel or its reference signal may lie (Table 7.4.3.1-1). */
function isBroadcast(symbol: number, subcarrier: number): boolean {
  return symbol === 1 || symbol === 3 || (symbol === 2 && (subcarrier < 48 || subcarrier >= 192));
}

const layouts = new Map<number, { data: readonly Element[]; reference: readonly Element[] }>();

/**
 * The broadcast channel's 432 data and 144 reference elements in the order of their mapping:
 * subcarriers first, then symbols. They depend on the cell identity modulo 4 alone.
 */
export function broadcastLayout(cellId: number): { data: readonly Element[]; reference: readonly Element[] } {
  const shift = cellId % 4;
  const known = layouts.get(shift);
  if (known) return known;
  const data: Element[] = [];
  const reference: Element[] = [];
  for (let symbol = 1; symbol < BLOCK_SYMBOLS; symbol++) {
    for (let subcarrier = 0; subcarrier < BLOCK_SUBCARRIERS; subcarrier++) {
      if (isBroadcast(symbol, subcarrier)) (subcarrier % 4 === shift ? reference : data).push({ symbol, subcarrier });
    }
  }
  const layout = { data, reference };
  layouts.set(shift, layout);
  return layout;
}
