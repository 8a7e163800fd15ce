import type { Symbols } from './symbols.js';

/** Which resource elements carry something, in blocks of neighbouring subcarriers by symbol. */
export interface Cells {
  /** Subcarriers in one block. */
  readonly group: number;
  readonly groups: number;
  /** 1 where the block is in use: index symbol · groups + block. */
  readonly active: Uint8Array;
}

/** A resource block of the cellular standards; fewer where the signal has few subcarriers. */
const BLOCK = 12;
/** Unequal power on every 2nd, 3rd or 6th subcarrier by this factor is a comb of reference signals. */
const COMB = 1.7;

/**
 * Blocks in use, by power; symbols that hold a comb of reference signals (empty or boosted
 * subcarriers at equal distances) are left out, for their points are no constellation.
 */
export function activeCells(symbols: Symbols): Cells {
  const group = Math.max(1, Math.min(BLOCK, Math.floor(symbols.width / 16)));
  const groups = Math.floor(symbols.width / group);
  const power = blockPowers(symbols, group, groups);
  const threshold = powerThreshold(power);
  const active = new Uint8Array(symbols.count * groups);
  for (let s = 0; s < symbols.count; s++) {
    for (let g = 0; g < groups; g++) active[s * groups + g] = power[s * groups + g] > threshold ? 1 : 0;
    if (group === BLOCK && isComb(symbols, s, { group, groups, active })) active.fill(0, s * groups, (s + 1) * groups);
  }
  return { group, groups, active };
}

function blockPowers({ values, width, count }: Symbols, group: number, groups: number): Float64Array {
  const out = new Float64Array(count * groups);
  for (let s = 0; s < count; s++) {
    for (let g = 0; g < groups; g++) {
      let sum = 0;
      for (let i = s * width + g * group; i < s * width + (g + 1) * group; i++) sum += values[2 * i] ** 2 + values[2 * i + 1] ** 2;
      out[s * groups + g] = sum;
    }
  }
  return out;
}

/** Half-way (in dB) between what is empty and what is full, where there are both. */
function powerThreshold(power: Float64Array): number {
  const sorted = Float64Array.from(power).sort();
  const low = sorted[Math.floor(0.03 * sorted.length)];
  const high = sorted[Math.floor(0.95 * sorted.length)];
  if (high < 4 * low) return 0;
  return Math.max(Math.sqrt(low * high), high / 16);
}

function isComb({ values, width }: Symbols, s: number, { group, groups, active }: Cells): boolean {
  return [2, 3].some((step) => {
    const power = new Float64Array(2 * step);
    let blocks = 0;
    for (let g = 0; g < groups; g++) {
      if (!active[s * groups + g]) continue;
      blocks++;
      for (let j = 0; j < group; j++) {
        const i = s * width + g * group + j;
        power[j % (2 * step)] += values[2 * i] ** 2 + values[2 * i + 1] ** 2;
      }
    }
    // The mean of n exponentials scatters by 1/√n: few blocks need a clearer comb.
    const clear = COMB + 3 / Math.sqrt(Math.max(1, (blocks * group) / (2 * step)));
    return blocks > 0 && Math.max(...power) > clear * Math.min(...power);
  });
}
