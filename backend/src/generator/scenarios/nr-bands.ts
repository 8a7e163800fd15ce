import type { BlockCase } from '../nr/block-pattern.js';

/** A band as far as scenarios use it: downlink edges, raster, and the synchronisation blocks it allows (TS 38.104 Tables 5.2-1, 5.4.2.3-1, 5.4.3.3-1). */
export interface NrBand {
  readonly band: number;
  readonly duplex: 'fdd' | 'tdd';
  readonly lowHz: number;
  readonly highHz: number;
  readonly rasterHz: number;
  readonly spacingsHz: readonly number[];
  readonly cases: readonly BlockCase[];
  /** Uplink carrier minus downlink carrier; 0 in TDD. */
  readonly uplinkShiftHz: number;
}

const MHZ = 1e6;
const band = (row: readonly [number, 'fdd' | 'tdd', number, number, number, readonly number[], readonly BlockCase[], number?]): NrBand => ({
  band: row[0], duplex: row[1], lowHz: row[2] * MHZ, highHz: row[3] * MHZ, rasterHz: row[4] * 1000, spacingsHz: row[5].map((k) => k * 1000), cases: row[6], uplinkShiftHz: (row[7] ?? 0) * MHZ,
});

export const NR_BANDS: readonly NrBand[] = [
  band([1, 'fdd', 2110, 2170, 100, [15, 30, 60], ['A'], -190]),
  band([3, 'fdd', 1805, 1880, 100, [15, 30, 60], ['A'], -95]),
  band([5, 'fdd', 869, 894, 100, [15, 30], ['A', 'B'], -45]),
  band([7, 'fdd', 2620, 2690, 100, [15, 30, 60], ['A'], -120]),
  band([28, 'fdd', 758, 803, 100, [15, 30], ['A'], -55]),
  band([66, 'fdd', 2110, 2180, 100, [15, 30, 60], ['A', 'B'], -400]),
  band([40, 'tdd', 2300, 2400, 100, [15, 30, 60], ['C']]),
  band([41, 'tdd', 2496, 2690, 30, [30, 60], ['A', 'C']]),
  band([77, 'tdd', 3300, 4200, 30, [15, 30, 60], ['C']]),
  band([78, 'tdd', 3300, 3800, 30, [15, 30, 60], ['C']]),
  band([79, 'tdd', 4400, 5000, 30, [15, 30, 60], ['C']]),
  band([257, 'tdd', 26500, 29500, 120, [60, 120], ['D', 'E']]),
  band([258, 'tdd', 24250, 27500, 120, [60, 120], ['D', 'E']]),
  band([260, 'tdd', 37000, 40000, 120, [60, 120], ['D', 'E']]),
  band([261, 'tdd', 27500, 28350, 120, [60, 120], ['D']]),
];

/** Resource blocks by channel bandwidth in MHz, TS 38.104 Tables 5.3.2-1 and 5.3.2-2. */
const BLOCKS: Readonly<Record<string, Readonly<Record<number, number>>>> = {
  'fr1/15': { 5: 25, 10: 52, 15: 79, 20: 106, 25: 133, 30: 160, 40: 216, 50: 270 },
  'fr1/30': { 5: 11, 10: 24, 15: 38, 20: 51, 25: 65, 30: 78, 40: 106, 50: 133, 60: 162, 80: 217, 100: 273 },
  'fr1/60': { 10: 11, 15: 18, 20: 24, 25: 31, 30: 38, 40: 51, 50: 65, 60: 79, 80: 107, 100: 135 },
  'fr2/60': { 50: 66, 100: 132, 200: 264 },
  'fr2/120': { 50: 32, 100: 66, 200: 132, 400: 264 },
};

/** Channel bandwidths (MHz) with their resource blocks for a spacing. */
export function channelBlocks(carrierHz: number, spacingHz: number): Readonly<Record<number, number>> {
  return BLOCKS[`${carrierHz > 7.125e9 ? 'fr2' : 'fr1'}/${spacingHz / 1000}`] ?? {};
}
