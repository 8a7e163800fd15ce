import { conjugate } from '../vector/mix.js';
import { blockGrid } from './block-grid.js';
import { bestReference, matchCells, type ReferenceMatch } from './block-identity.js';
import { fixPrimary } from './primary-fix.js';
import { PrimaryScan, type PrimaryHit } from './primary-scan.js';
import type { WorkSignal } from './work-signal.js';

/** A synchronisation block that was found and named, in the upright capture. */
export interface FoundBlock {
  readonly spacingHz: number;
  readonly inverted: boolean;
  /** Time in the capture at which the useful part of its first symbol starts, s. */
  readonly usefulS: number;
  /** SS_REF against the capture's zero, Hz, upright. */
  readonly referenceHz: number;
  readonly cellId: number;
  readonly reference: ReferenceMatch;
  readonly primaryStatistic: number;
  readonly secondaryStatistic: number;
  readonly grid: readonly Float64Array[];
}

/**
 * What a block must show. A wrong cell passes `SECONDARY` in 336·e^−12 = 0.2 % of tries and a
 * wrong reference signal `REFERENCE` in 1e-4 of them (31 delays, 8 indices, Gamma(3)); all three
 * together lie 20 nepers above the best of the search's 1e7 places, which is a false block in
 * fewer than one of 1e7 searches.
 */
const PRIMARY = 12;
const SECONDARY = 12;
const REFERENCE = 20;
const TOGETHER = 50;
/** A window this clear is looked into at once, before the search goes on. */
const CLEAR = 30;
const CANDIDATES = 250;

/** The work signal in both senses; the second is made when it is first asked for. */
export class BothSenses {
  private mirrored: WorkSignal | null = null;

  constructor(readonly upright: WorkSignal) {}

  in(inverted: boolean): WorkSignal {
    if (!inverted) return this.upright;
    const { upright } = this;
    this.mirrored ??= { ...upright, iq: conjugate(upright.iq), centreHz: -upright.centreHz, lowHz: -upright.highHz, highHz: -upright.lowHz };
    return this.mirrored;
  }
}

/** Windows in order of time; those of one group may hold the same symbol. A part ends with a look at what was found. */
export interface WindowPlan {
  readonly parts: readonly (readonly (readonly number[])[])[];
}

/** The first block found in a work signal that shows all three signals, or null. */
export function searchBlock(senses: BothSenses, scan: PrimaryScan, plan: WindowPlan): FoundBlock | null {
  const tried = new Set<string>();
  for (const part of plan.parts) {
    for (const group of part) {
      for (const sample of group) scan.scan(sample);
      scan.closeGroup();
    }
    const found = firstBlock(senses, { scan, tried, hits: scan.ranked(4).flat().filter((hit) => hit.statistic > CLEAR) });
    if (found) return found;
  }
  return firstBlock(senses, { scan, tried, hits: scan.ranked(CANDIDATES).flat().filter((hit) => hit.statistic > 7.5) });
}

function firstBlock(senses: BothSenses, { scan, tried, hits }: { scan: PrimaryScan; tried: Set<string>; hits: readonly PrimaryHit[] }): FoundBlock | null {
  for (const hit of hits) {
    const key = [Math.round((2 * hit.sample) / scan.size), hit.nId2, hit.inverted, Math.round(hit.referenceHz / scan.spacingHz)].join();
    if (tried.has(key)) continue;
    tried.add(key);
    const block = blockAt(senses, scan.spacingHz, hit);
    if (block) return strongerSense(senses, block, hit);
  }
  return null;
}

/** The block whose primary signal a hit may be, or null where the other signals are not there. */
export function blockAt(senses: BothSenses, spacingHz: number, hit: Pick<PrimaryHit, 'sample' | 'referenceHz' | 'nId2' | 'inverted'>): FoundBlock | null {
  const work = senses.in(hit.inverted);
  const fix = fixPrimary(work, spacingHz, { ...hit, referenceHz: hit.inverted ? -hit.referenceHz : hit.referenceHz });
  const grid = fix && blockGrid(work, { spacingHz, sample: fix.sample, referenceHz: fix.referenceHz });
  if (!fix || !grid || fix.statistic < PRIMARY) return null;
  const cell = matchCells(grid, fix.nId2).reduce((a, b) => (b.statistic > a.statistic ? b : a));
  if (cell.statistic < SECONDARY) return null;
  const reference = bestReference(grid, cell.cellId);
  if (reference.statistic < REFERENCE || fix.statistic + cell.statistic + reference.statistic < TOGETHER) return null;
  return {
    spacingHz,
    inverted: hit.inverted,
    usefulS: work.startS + fix.sample / work.rateHz,
    referenceHz: work.centreHz + fix.referenceHz,
    cellId: cell.cellId,
    reference,
    primaryStatistic: fix.statistic,
    secondaryStatistic: cell.statistic,
    grid,
  };
}

/** Unequal mixer arms leave a weak mirror image of a block: of the two senses the stronger is the signal. */
function strongerSense(senses: BothSenses, block: FoundBlock, hit: PrimaryHit): FoundBlock {
  const mirrored = blockAt(senses, block.spacingHz, { ...hit, inverted: !hit.inverted, referenceHz: -hit.referenceHz });
  return mirrored && powerOf(mirrored) > powerOf(block) ? mirrored : block;
}

function powerOf(block: FoundBlock): number {
  return block.grid.reduce((total, points) => total + points.reduce((sum, part) => sum + part * part, 0), 0);
}
