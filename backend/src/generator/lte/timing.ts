/** T_s = 1/(15 kHz · 2048) (TS 36.211 clause 4). */
export const TS_PER_S = 30_720_000;
export const TS_PER_SLOT = 15_360;
export const LTE_SPACING_HZ = 15_000;

export type LtePrefix = 'normal' | 'extended';

export interface LteSlot {
  readonly symbols: number;
  readonly prefixTs: readonly number[];
  /** Start of each symbol's prefix from the slot's start. */
  readonly startTs: readonly number[];
}

/** Symbols of a slot, TS 36.211 Table 6.12-1 (downlink) and 5.6-1 (uplink). */
export function lteSlot(prefix: LtePrefix): LteSlot {
  const symbols = prefix === 'normal' ? 7 : 6;
  const prefixTs = Array.from({ length: symbols }, (_, l) => (prefix === 'extended' ? 512 : l === 0 ? 160 : 144));
  const startTs = prefixTs.map((_, l) => prefixTs.slice(0, l).reduce((sum, cp) => sum + cp + 2048, 0));
  return { symbols, prefixTs, startTs };
}

/** Bandwidths of TS 36.104 Table 5.6-1: resource blocks to Hz. */
export const LTE_BANDWIDTH_HZ: Record<number, number> = { 6: 1.4e6, 15: 3e6, 25: 5e6, 50: 10e6, 75: 15e6, 100: 20e6 };
