import type { DetectionContext } from '../types.js';
import { BlockReader } from './block-reader.js';
import { BothSenses, searchBlock, type FoundBlock } from './block-search.js';
import { blockSpacings } from './block-search-plan.js';
import { numerologyOf } from './numerology.js';
import { PrimaryScan } from './primary-scan.js';
import { planWindows } from './search-windows.js';
import { planWork, readWork, type WorkSignal } from './work-signal.js';

/** The default period of the blocks in cell search (TS 38.213 clause 4.1) and the length of the longest one. */
const WINDOW_S = 0.0204;
/** Samples times transforms’ levels up to which a search without a grid looks at every quarter of a symbol, where something stands out at all. */
const DENSE_WORK = 3.6e6;

export interface BlockFinding {
  readonly block: FoundBlock;
  readonly reader: BlockReader;
  /** The window of the capture in which it was found, upright. */
  readonly work: WorkSignal;
}

/** Above this data spacing nothing but NR comes into question, so that a second search is worth its cost. */
const NR_ALONE_HZ = 25e3;
const TRUSTED = 0.9;

/**
 * The first synchronisation block that stands up to its three signals, at any spacing, frequency
 * and sense: in the occupied band, then, for data that only NR has, in all that was recorded: a
 * fade may hide the part of the carrier that holds the block.
 */
export function findBlock(context: DetectionContext): BlockFinding | null {
  const { occupied, blind } = context;
  const found = searchIn(context, occupied);
  const mu = blind && blind.confidence >= TRUSTED && blind.subcarrierSpacingHz > NR_ALONE_HZ ? numerologyOf(blind.subcarrierSpacingHz) : null;
  return found ?? (occupied && mu !== null ? searchIn(context, null) : null);
}

function searchIn(context: DetectionContext, occupied: DetectionContext['occupied']): BlockFinding | null {
  const { source, blind } = context;
  const whole = { lowHz: -source.sampleRateHz / 2, highHz: source.sampleRateHz / 2 };
  const spacings = blockSpacings({ sampleRateHz: source.sampleRateHz, centreHz: source.centreFrequencyHz, blind });
  for (const [i, spacingHz] of spacings.entries()) {
    context.onProgress?.(`NR synchronisation block, ${spacingHz / 1000} kHz`, i / spacings.length);
    const band = searchBand(occupied, source.sampleRateHz, spacingHz) ?? whole;
    const plan = planWork(source.sampleRateHz, band, 256 * spacingHz);
    const work = readWork(source, plan, { startS: 0, durationS: WINDOW_S });
    const scan = new PrimaryScan(work, spacingHz, { lowHz: band.lowHz - plan.centreHz, highHz: band.highHz - plan.centreHz });
    if (!scan.possible) continue;
    const senses = new BothSenses(work);
    const sparse = !context.occupied || (work.iq.length / 2) * Math.log2(work.rateHz / spacingHz) > DENSE_WORK;
    const block = searchBlock(senses, scan, planWindows(work, spacingHz, { blind, sparse, sampleRateHz: source.sampleRateHz }));
    if (block) return { block, reader: new BlockReader(source, plan, senses, block.inverted), work: senses.in(block.inverted) };
  }
  return null;
}

/** The occupied band and some subcarriers more, no narrower than a block; null where nothing stands out. */
function searchBand(occupied: DetectionContext['occupied'], sampleRateHz: number, spacingHz: number): { lowHz: number; highHz: number } | null {
  if (!occupied) return null;
  const middle = (occupied.lowHz + occupied.highHz) / 2;
  const half = Math.max((occupied.highHz - occupied.lowHz) / 2 + 8 * spacingHz, 124 * spacingHz);
  const edge = sampleRateHz / 2;
  return { lowHz: Math.max(-edge, middle - half), highHz: Math.min(edge, middle + half) };
}
