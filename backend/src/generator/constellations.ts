import type { Random } from './random.js';

export const MODULATIONS = ['bpsk', 'qpsk', '16qam', '64qam', '256qam'] as const;
export type Modulation = (typeof MODULATIONS)[number];

/** Levels on one axis of a square constellation. */
const SIDE: Record<Exclude<Modulation, 'bpsk'>, number> = { qpsk: 2, '16qam': 4, '64qam': 8, '256qam': 16 };

/** Writes a random point of unit mean power at complex index `at`. */
export function randomPoint(into: Float64Array, at: number, { modulation, random }: { modulation: Modulation; random: Random }): void {
  const bits = random.bits();
  if (modulation === 'bpsk') {
    into[2 * at] = bits & 1 ? 1 : -1;
    into[2 * at + 1] = 0;
    return;
  }
  const side = SIDE[modulation];
  const scale = 1 / Math.sqrt((2 * (side * side - 1)) / 3);
  into[2 * at] = (2 * ((bits >>> 3) & (side - 1)) - side + 1) * scale;
  into[2 * at + 1] = (2 * ((bits >>> 17) & (side - 1)) - side + 1) * scale;
}
