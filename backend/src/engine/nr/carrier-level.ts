/** Subcarriers whose power is summed up in one symbol: few enough to follow the allocation, enough to be steady. */
export const TILE = 48;

/** Power of each tile of each symbol looked at, per subcarrier; tiles in order of frequency. */
export type Tiles = readonly Float64Array[];

/** Of a tile's symbols so many are brighter than its level while on. */
const BRIGHT = 0.15;
/** A tile that never rises above this share of the brightest one carries nothing (or is faded away). */
const UNUSED = 0.1;
const LEAST_SYMBOLS = 20;

/**
 * Signal-to-noise ratio of what is used, while it is used: in each of the carrier's tiles the
 * symbols that carry something are told from those that do not by half of its own level, so that
 * neither pauses nor resource blocks left free nor a fade's slope count. Null where too little
 * stands out.
 */
export function usedSnrDb(tiles: Tiles, { from, to, floor }: { from: number; to: number; floor: number }): number | null {
  if (tiles.length < LEAST_SYMBOLS || !(floor > 0)) return null;
  const first = Math.ceil(from / TILE);
  const count = Math.floor(to / TILE) - first;
  const levels = Array.from({ length: Math.max(0, count) }, (_, i) => whileOn(tiles, first + i, floor));
  const most = Math.max(0, ...levels);
  const used = levels.filter((level) => level > UNUSED * most);
  if (used.length === 0 || most <= 0) return null;
  return 10 * Math.log10(used.reduce((sum, level) => sum + level, 0) / used.length / floor);
}

/** Mean power above the floor of a tile's symbols that carry something. */
function whileOn(tiles: Tiles, tile: number, floor: number): number {
  const powers = tiles.map((row) => row[tile]).sort((a, b) => a - b);
  const high = powers[Math.floor((1 - BRIGHT) * powers.length)] - floor;
  const on = powers.filter((power) => power - floor > high / 2);
  return on.reduce((sum, power) => sum + power - floor, 0) / Math.max(1, on.length);
}
