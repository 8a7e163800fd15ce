/** Square constellations by bits; BPSK and QPSK as their smallest. */
export type Order = 'bpsk' | 'qpsk' | '16qam' | '64qam' | '256qam';
export const ORDERS: readonly Order[] = ['bpsk', 'qpsk', '16qam', '64qam', '256qam'];

/** Levels per axis, and the distance between neighbours at unit mean power. */
interface Shape {
  readonly perI: number;
  readonly perQ: number;
  readonly step: number;
}

const SHAPES: Readonly<Record<Order, Shape>> = {
  bpsk: { perI: 2, perQ: 1, step: 2 },
  qpsk: square(2),
  '16qam': square(4),
  '64qam': square(8),
  '256qam': square(16),
};

/** Mean power of the odd levels −(m − 1) … m − 1 on both axes is 2·(m² − 1)/3. */
function square(m: number): Shape {
  return { perI: m, perQ: m, step: 2 / Math.sqrt((2 * (m * m - 1)) / 3) };
}

/** The level nearest to `x` on one axis. */
export function nearestLevel(x: number, levels: number, step: number): number {
  if (levels === 1) return 0;
  const index = Math.round(x / step + (levels - 1) / 2);
  return (Math.min(levels - 1, Math.max(0, index)) - (levels - 1) / 2) * step;
}

export function nearest(re: number, im: number, order: Order): [number, number] {
  const { perI, perQ, step } = SHAPES[order];
  return [nearestLevel(re, perI, step), nearestLevel(im, perQ, step)];
}

/** Root mean square distance to the nearest point, in percent of the root mean power (1); points interleaved, unit power. */
export function evmPercent(points: ArrayLike<number>, order: Order): number {
  let sum = 0;
  for (let i = 0; i < points.length; i += 2) sum += squaredError(points[i], points[i + 1], order);
  return 100 * Math.sqrt(sum / Math.max(1, points.length / 2));
}

export function squaredError(re: number, im: number, order: Order): number {
  const [a, b] = nearest(re, im, order);
  return (re - a) ** 2 + (im - b) ** 2;
}

/**
 * What `evmPercent` gives for points of the same strengths that mean nothing: each is turned by
 * an angle of its own, spread evenly (the golden ratio's multiples), four turns of each point.
 * Gaussian points, as a demodulator returns them off the right spacing or timing, stay as they
 * were, so that there the two values agree.
 */
export function randomEvmPercent(points: ArrayLike<number>, order: Order): number {
  let sum = 0;
  let turn = 0;
  for (let i = 0; i < points.length; i += 2) {
    for (let t = 0; t < TURNS; t++) {
      turn = (turn + GOLDEN) % 1;
      const c = Math.cos(2 * Math.PI * turn);
      const d = Math.sin(2 * Math.PI * turn);
      sum += squaredError(points[i] * c - points[i + 1] * d, points[i] * d + points[i + 1] * c, order);
    }
  }
  return 100 * Math.sqrt(sum / Math.max(1, (TURNS * points.length) / 2));
}

const TURNS = 4;
const GOLDEN = (Math.sqrt(5) - 1) / 2;

/** EVM over that of random points: 1 means nothing, 0 a perfect constellation. */
export function openness(points: ArrayLike<number>, order: Order): number {
  return evmPercent(points, order) / Math.max(1e-9, randomEvmPercent(points, order));
}
