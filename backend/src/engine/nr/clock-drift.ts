import { BLOCK_SUBCARRIERS } from './block-layout.js';
import type { Cell, KnownBlock } from './cell.js';

/** The transmitter's sample clock against the capture's; positive: the transmitter's is faster. */
export interface ClockDrift {
  readonly ppm: number;
  readonly sigmaPpm: number;
}

/** Delays tried against the first block, useful parts. */
const REACH = 0.02;
const STEP = 1 / 2048;
/** Change of a channel's power over its delays that cannot be excluded. */
const LEAST_CHANGE = 0.01;

/** Drift of the blocks' delays over the capture, or null with fewer than two blocks at different times. */
export function clockDrift(cell: Cell): ClockDrift | null {
  const [first, ...rest] = cell.blocks;
  if (!first || rest.length === 0) return null;
  const compared = rest.map((block) => ({ block, ...delayBetween(first, block) }));
  const points = [
    { timeS: 0, delayS: 0, sigmaS: sigmaOf(first, first, cell.spacingHz) },
    ...compared.map(({ block, delay }) => ({ timeS: block.usefulS - first.usefulS, delayS: delay / cell.spacingHz, sigmaS: sigmaOf(first, block, cell.spacingHz) })),
  ];
  const weights = points.map((p) => 1 / p.sigmaS ** 2);
  const whole = weights.reduce((a, b) => a + b, 0);
  const meanTime = points.reduce((sum, p, i) => sum + weights[i] * p.timeS, 0) / whole;
  const spread = points.reduce((sum, p, i) => sum + weights[i] * (p.timeS - meanTime) ** 2, 0);
  const slope = points.reduce((sum, p, i) => sum + weights[i] * (p.timeS - meanTime) * p.delayS, 0) / spread;
  return { ppm: -slope * 1e6, sigmaPpm: 1e6 * Math.hypot(1 / Math.sqrt(spread), wanderOf(cell.blocks, compared) / cell.spacingHz) };
}

/**
 * A channel that changes moves its own centre of gravity, by up to twice its spread in a fade, and slowly, so that
 * more blocks do not help: as a drift, useful parts a second, the largest over the blocks.
 */
function wanderOf(blocks: readonly KnownBlock[], compared: readonly { block: KnownBlock; changed: number }[]): number {
  const spread = spreadOf(blocks);
  const last = compared[compared.length - 1].block.usefulS - blocks[0].usefulS;
  return Math.max(...compared.map(({ changed }) => 2 * spread * Math.sqrt(2 * changed))) / last;
}

/**
 * Delay of a block's channel against the first's, useful parts: the peak of their cross-correlation
 * over delay; and the share of the channel's power that changed meanwhile, noise allowed for.
 */
function delayBetween(first: KnownBlock, block: KnownBlock): { delay: number; changed: number } {
  const products = new Float64Array(2 * BLOCK_SUBCARRIERS);
  const a = first.fit.gains;
  const b = block.fit.gains;
  for (let i = 0; i < products.length; i += 2) {
    products[i] = b[i] * a[i] + b[i + 1] * a[i + 1];
    products[i + 1] = b[i + 1] * a[i] - b[i] * a[i + 1];
  }
  const powers: number[] = [];
  for (let delay = -REACH; delay <= REACH; delay += STEP) powers.push(powerAt(products, delay));
  const at = powers.indexOf(Math.max(...powers));
  const [left, top, right] = [powers[at - 1] ?? 0, powers[at], powers[at + 1] ?? 0];
  const bend = left - 2 * top + right;
  const likeness = top / (BLOCK_SUBCARRIERS ** 2 * gainPower(first) * gainPower(block));
  return {
    delay: -REACH + STEP * (at + (bend < 0 ? (0.5 * (left - right)) / bend : 0)),
    changed: Math.max(LEAST_CHANGE, Math.min(1, 1 - likeness)),
  };
}

/** Mean power of the gains without their noise: 96 subcarriers have three elements, 17 two and 127 four. */
function gainPower({ fit }: Pick<KnownBlock, 'fit'>): number {
  let sum = 0;
  for (let i = 0; i < fit.gains.length; i++) sum += fit.gains[i] ** 2;
  return Math.max(sum / BLOCK_SUBCARRIERS - noiseOfGains(fit), 0.05 * fit.signalPower);
}

function noiseOfGains(fit: KnownBlock['fit']): number {
  return (fit.noisePower * (96 / 3 + 17 / 2 + 127 / 4)) / BLOCK_SUBCARRIERS;
}

/** Distances over which the gain's change is looked at, widest first: the wider, the less the noise counts; a gain that has turned away says too little. */
const APART = [24, 8, 4];
const STILL_ALIKE = 0.6;

/** Root mean square spread of the channel's delays, useful parts, from how fast its gain changes over the subcarriers. */
function spreadOf(blocks: readonly KnownBlock[]): number {
  const found = APART.map((apart) => ({ apart, likeness: likenessAt(blocks, apart) }));
  const { apart, likeness } = found.find((each) => each.likeness > STILL_ALIKE) ?? found[found.length - 1];
  return Math.sqrt(2 * Math.max(0, 1 - likeness)) / (2 * Math.PI * apart);
}

/** Mean over the blocks, each for itself, since their delays differ; against the power where the two ends stand, since a fade moves it. */
function likenessAt(blocks: readonly KnownBlock[], apart: number): number {
  return blocks.reduce((sum, { fit }) => sum + likenessOf(fit, apart), 0) / blocks.length;
}

function likenessOf(fit: KnownBlock['fit'], apart: number): number {
  const pairs = BLOCK_SUBCARRIERS - apart;
  let re = 0;
  let im = 0;
  let lower = 0;
  let upper = 0;
  for (let i = 0; i < 2 * pairs; i += 2) {
    const j = i + 2 * apart;
    re += fit.gains[j] * fit.gains[i] + fit.gains[j + 1] * fit.gains[i + 1];
    im += fit.gains[j + 1] * fit.gains[i] - fit.gains[j] * fit.gains[i + 1];
    lower += fit.gains[i] ** 2 + fit.gains[i + 1] ** 2;
    upper += fit.gains[j] ** 2 + fit.gains[j + 1] ** 2;
  }
  const noise = pairs * noiseOfGains(fit);
  return Math.hypot(re, im) / Math.sqrt(Math.max(lower - noise, 0.05 * lower) * Math.max(upper - noise, 0.05 * upper));
}

function powerAt(products: Float64Array, delay: number): number {
  let re = 0;
  let im = 0;
  for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
    const cos = Math.cos(2 * Math.PI * delay * k);
    const sin = Math.sin(2 * Math.PI * delay * k);
    re += products[2 * k] * cos - products[2 * k + 1] * sin;
    im += products[2 * k] * sin + products[2 * k + 1] * cos;
  }
  return re * re + im * im;
}

/**
 * Standard deviation of a delay between two blocks, s (Cramér–Rao: 240 gains of 3.5 elements
 * each; their mean square distance from the middle is 240²/12), with a floor of 2e-5 useful
 * parts for what the channel does meanwhile.
 */
function sigmaOf(first: KnownBlock, block: KnownBlock, spacingHz: number): number {
  const noise = (fit: KnownBlock['fit']) => fit.noisePower / fit.signalPower / 3.5;
  const perGain = noise(first.fit) + noise(block.fit);
  const rmsDistance = BLOCK_SUBCARRIERS / Math.sqrt(12);
  const parts = Math.sqrt(perGain / (2 * BLOCK_SUBCARRIERS)) / (2 * Math.PI * rmsDistance);
  return Math.hypot(parts, 2e-5) / spacingHz;
}
