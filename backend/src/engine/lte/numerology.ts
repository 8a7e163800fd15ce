/** LTE's frame structure, TS 36.211 clauses 4, 6.12: 15 kHz, slots of half a millisecond. */
export const SPACING_HZ = 15_000;
export const SLOT_S = 0.0005;
export const SLOTS_PER_FRAME = 20;

export type Prefix = 'normal' | 'extended';
export type Duplex = 'fdd' | 'tdd';

/** TS 36.104 clause 5.6: the resource blocks of the six channel bandwidths, smallest first. */
export const CARRIER_BLOCKS: readonly number[] = [6, 15, 25, 50, 75, 100];

export function symbolsPerSlot(prefix: Prefix): number {
  return prefix === 'normal' ? 7 : 6;
}

/** Prefix of symbol `l` of a slot, in samples at 15 kHz times `size` (TS 36.211 Table 6.12-1). */
export function prefixSamples(prefix: Prefix, l: number, size: number): number {
  const units = prefix === 'extended' ? 512 : l === 0 ? 160 : 144;
  return (units * size) / 2048;
}

/** Samples in a slot at 15 kHz times `size`. */
export function slotSamples(size: number): number {
  return 7.5 * size;
}

/** First sample of symbol `s` (its prefix), counted from the start of a slot whose first symbol is number 0; `s` may be negative. */
export function symbolStart(prefix: Prefix, s: number, size: number): number {
  const perSlot = symbolsPerSlot(prefix);
  const slot = Math.floor(s / perSlot);
  const l = s - slot * perSlot;
  const inSlot = l === 0 ? 0 : prefixSamples(prefix, 0, size) + size + (l - 1) * (prefixSamples(prefix, 1, size) + size);
  return slot * slotSamples(size) + inSlot;
}

/** Where the synchronisation signals lie in a half frame, as symbols from its start (TS 36.211 clauses 6.11.1.2, 6.11.2.2). */
export function syncSymbols(prefix: Prefix, duplex: Duplex): { primary: number; secondary: number } {
  const perSlot = symbolsPerSlot(prefix);
  const primary = duplex === 'fdd' ? perSlot - 1 : 2 * perSlot + 2;
  return { primary, secondary: duplex === 'fdd' ? primary - 1 : primary - 3 };
}
