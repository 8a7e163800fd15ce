import { randomPoint } from '../constellations.js';
import { goldSequence, qpsk } from '../gold.js';
import { Random } from '../random.js';
import type { NrSpec } from './spec.js';

export interface DataSymbol {
  readonly bins: Float64Array;
  /** Counted from the transmitter's time zero. */
  readonly slot: number;
  readonly symbol: number;
  /** Resource blocks that the synchronisation block holds. */
  readonly taken: readonly [number, number] | null;
  readonly slotsPerFrame: number;
}

/** Fills one symbol's resource blocks; false where the slot is empty. Subcarrier 6·N_RB lies on bin 0. */
export function fillSymbol(spec: NrSpec, at: DataSymbol): boolean {
  const plan = slotPlan(spec, at.slot);
  const control = at.symbol < spec.load.controlSymbols;
  if (!plan.used && !control) return false;
  const random = new Random(spec.seed, 'symbol', at.slot, at.symbol);
  const amplitude = 1 / Math.sqrt(12 * spec.resourceBlocks);
  const reference = spec.load.dmrs && plan.used && at.symbol === (spec.mib.dmrsTypeAPosition === 'pos2' ? 2 : 3) ? dmrs(spec, at) : null;
  const point = new Float64Array(2);
  const size = at.bins.length / 2;
  for (let block = 0; block < spec.resourceBlocks; block++) {
    if (at.taken && block >= at.taken[0] && block < at.taken[1]) continue;
    if (control ? !plan.control(block) : block < plan.first || block >= plan.end) continue;
    for (let k = 12 * block; k < 12 * block + 12; k++) {
      let gain = amplitude;
      if (reference) {
        // Configuration type 1, both code groups without data: every second subcarrier, 3 dB up.
        if (k % 2 === 1) continue;
        point[0] = reference[k];
        point[1] = reference[k + 1];
        gain *= Math.SQRT2;
      } else randomPoint(point, 0, { modulation: control ? 'qpsk' : plan.modulation, random });
      const bin = (k - 6 * spec.resourceBlocks + size) % size;
      at.bins[2 * bin] = gain * point[0];
      at.bins[2 * bin + 1] = gain * point[1];
    }
  }
  return true;
}

/** What a slot carries, from the seed and the slot's number alone. */
function slotPlan(spec: NrSpec, slot: number) {
  const random = new Random(spec.seed, 'slot', slot);
  const used = random.chance(spec.load.slots);
  const modulation = random.pick(spec.load.modulations);
  const width = Math.max(1, Math.round(spec.resourceBlocks * spec.load.blocks));
  const first = random.integer(0, spec.resourceBlocks - width);
  const controlSalt = random.integer(0, 5);
  // Control sits in bundles of six resource blocks, about two in three of them.
  const control = (block: number) => (Math.floor(block / 6) + controlSalt) % 3 !== 0;
  return { used, modulation, first, end: first + width, control };
}

/** r of TS 38.211 clause 7.4.1.1.1 with N_ID = cell and n_SCID = 0, six values a resource block. */
function dmrs(spec: NrSpec, at: DataSymbol): Float64Array {
  const slot = ((at.slot % at.slotsPerFrame) + at.slotsPerFrame) % at.slotsPerFrame;
  const cInit = (131072 * (14 * slot + at.symbol + 1) * (2 * spec.cellId + 1) + 2 * spec.cellId) % 2147483648;
  return qpsk(goldSequence(cInit, 12 * spec.resourceBlocks));
}
