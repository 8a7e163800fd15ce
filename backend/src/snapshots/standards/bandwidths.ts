/** TS 38.104 tables 5.3.2-1 (FR1), 5.3.2-2 (FR2-1); FR2-2 from memory. Blocks by spacing (kHz) and channel bandwidth (MHz). */
const FR1: Readonly<Record<number, Readonly<Record<number, number>>>> = {
  15: { 3: 15, 5: 25, 7: 35, 10: 52, 15: 79, 20: 106, 25: 133, 30: 160, 35: 188, 40: 216, 45: 242, 50: 270 },
  30: { 5: 11, 10: 24, 15: 38, 20: 51, 25: 65, 30: 78, 35: 92, 40: 106, 45: 119, 50: 133, 60: 162, 70: 189, 80: 217, 90: 245, 100: 273 },
  60: { 10: 11, 15: 18, 20: 24, 25: 31, 30: 38, 35: 44, 40: 51, 45: 58, 50: 65, 60: 79, 70: 93, 80: 107, 90: 121, 100: 135 },
};
const FR2: Readonly<Record<number, Readonly<Record<number, number>>>> = {
  60: { 50: 66, 100: 132, 200: 264 },
  120: { 50: 32, 100: 66, 200: 132, 400: 264 },
  480: { 400: 66, 800: 124, 1600: 248 },
  960: { 400: 33, 800: 62, 1600: 124, 2000: 148 },
};
/** TS 36.104 table 5.6-1. */
const LTE: Readonly<Record<number, number>> = { 1.4: 6, 3: 15, 5: 25, 10: 50, 15: 75, 20: 100 };

export type BandwidthTable = 'FR1' | 'FR2' | 'lte';

const row = (table: BandwidthTable, spacingHz: number): Readonly<Record<number, number>> =>
  table === 'lte' ? LTE : (table === 'FR1' ? FR1 : FR2)[spacingHz / 1e3] ?? {};

/** Most resource blocks that fit a channel, or null where the standard has no such channel at this spacing. */
export const maxResourceBlocks = (table: BandwidthTable, spacingHz: number, bandwidthHz: number): number | null =>
  row(table, spacingHz)[bandwidthHz / 1e6] ?? null;

/** The channel whose full allocation these blocks are, Hz, or null. */
export function bandwidthOfBlocks(table: BandwidthTable, spacingHz: number, blocks: number): number | null {
  const found = Object.entries(row(table, spacingHz)).find(([, n]) => n === blocks);
  return found === undefined ? null : Number(found[0]) * 1e6;
}

/** All channel bandwidths of a table, Hz, ascending. */
export function channelBandwidths(table: BandwidthTable): number[] {
  const rows = table === 'lte' ? [LTE] : Object.values(table === 'FR1' ? FR1 : FR2);
  return [...new Set(rows.flatMap((r) => Object.keys(r).map((mhz) => Number(mhz) * 1e6)))].sort((a, b) => a - b);
}
