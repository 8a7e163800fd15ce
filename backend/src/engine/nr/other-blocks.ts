import { blockGrid } from './block-grid.js';
import { bestReference, matchCells } from './block-identity.js';
import type { BothSenses, FoundBlock } from './block-search.js';
import { fixPrimary } from './primary-fix.js';

/** What each signal of a further block must show: its cell and frequency are known, so that less proves it. */
const PRIMARY = 10;
const SECONDARY = 6;
const REFERENCE = 14;
const TOGETHER = 36;

/**
 * The other blocks of a cell in the work signal, in order of time, each synchronised by itself:
 * where samples were lost they do not stand where the first one's timing puts them.
 */
export function otherBlocks(senses: BothSenses, first: FoundBlock): FoundBlock[] {
  const work = senses.in(first.inverted);
  const size = Math.round(work.rateHz / first.spacingHz);
  const nId2 = first.cellId % 3;
  const blocks: FoundBlock[] = [];
  for (let sample = size; 2 * (sample + size) < work.iq.length; sample += size) {
    const fix = fixPrimary(work, first.spacingHz, { sample, nId2, referenceHz: first.referenceHz - work.centreHz });
    if (!fix || fix.statistic < PRIMARY) continue;
    const usefulS = work.startS + fix.sample / work.rateHz;
    if ([first, ...blocks].some((each) => Math.abs(each.usefulS - usefulS) < 2 / first.spacingHz)) continue;
    const grid = blockGrid(work, { spacingHz: first.spacingHz, sample: fix.sample, referenceHz: fix.referenceHz });
    const secondary = grid && matchCells(grid, nId2).find(({ cellId }) => cellId === first.cellId)!.statistic;
    if (!grid || secondary === null || secondary < SECONDARY) continue;
    const reference = bestReference(grid, first.cellId);
    if (reference.statistic < REFERENCE || fix.statistic + secondary + reference.statistic < TOGETHER) continue;
    blocks.push({ ...first, usefulS, referenceHz: work.centreHz + fix.referenceHz, reference, primaryStatistic: fix.statistic, secondaryStatistic: secondary, grid });
  }
  return blocks;
}
