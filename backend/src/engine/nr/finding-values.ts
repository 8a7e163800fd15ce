import type { AirValue } from '#shared/decode';
import type { Cell } from './cell.js';
import type { ClockDrift } from './clock-drift.js';
import type { CellMeasurements, CommonGrid } from './measure-cell.js';
import type { PhaseCompensation } from './phase-compensation.js';

/** Standard deviation above which a clock difference is not reported, parts per million. */
const LARGEST_CLOCK_SIGMA = 1;
/** Unit points with random phases against known ones: √2 of their amplitude. */
const RANDOM_EVM_PERCENT = 100 * Math.SQRT2;

export function unknown(reason: string): AirValue {
  return { value: null, reason };
}

/** Carrier offset, resource blocks and the data's numerology, each with how it was found. */
export function carrierValues({ data, placement, placed, share, fullEdges, commonGrid, reference }: CellMeasurements): Record<string, AirValue> {
  const sigmaHz = reference.estimate.sigmaHz;
  const values: Record<string, AirValue> = {};
  if (placement && placed) {
    const how = fullEdges ? 'edges of the carrier\'s power' : 'the one carrier of a listed width and raster that explains where power stands';
    const method = `${how}, on the grid of common resource blocks that k_SSB gives; ${reference.method}`;
    const confidence = Math.min(0.98, Math.max(share, fullEdges && placement.inTable ? 0.98 : 0));
    values.carrierOffsetHz = { value: placement.referenceHz, confidence, method, sigmaHz };
    values.resourceBlocks = { value: placement.resourceBlocks, confidence: Math.min(confidence, placement.inTable ? 0.98 : 0.9), method };
    return values;
  }
  const spacingHz = data?.spacingHz ?? commonGrid?.spacingHz ?? null;
  values.resourceBlocks = unknown(placement
    ? `power stands on ${placement.resourceBlocks} blocks: they may be a part of the carrier`
    : 'the carrier’s edges do not stand out in the capture');
  values.carrierOffsetHz = spacingHz === null || (!commonGrid && !data)
    ? unknown('the data’s spacing is not known')
    : {
      value: residue(commonGrid ? commonGrid.edgeHz : data!.residue.hz, spacingHz), confidence: 0.97, method: `fractional: residue modulo ${spacingHz / 1000} kHz; ${reference.method}`, sigmaHz,
      ...(commonGrid && data ? besideBlocks(commonGrid, data.spacingHz) : {}),
    };
  return values;
}

/**
 * Subcarrier 6·N_RB is the edge or the middle of a block of the data's grid, and that grid's edges are some
 * of the common one's: the carrier is known but for so many Hz, though not where its power ends.
 */
function besideBlocks(common: CommonGrid, spacingHz: number): { blockResidueHz: number; blockPeriodHz: number } {
  const blockPeriodHz = Math.min(6 * spacingHz, 12 * common.spacingHz);
  return { blockResidueHz: residue(common.edgeHz, blockPeriodHz), blockPeriodHz };
}

function residue(hz: number, spacingHz: number): number {
  return hz - Math.round(hz / spacingHz) * spacingHz;
}

/** Error vector against all elements of the decoded blocks; the signal-to-noise ratio of the data where its floor is seen, else the blocks'. */
export function qualityValues(cell: Cell, placement: CellMeasurements['placement']): Record<string, AirValue> {
  const noise = cell.blocks.reduce((sum, { fit }) => sum + fit.noisePower, 0);
  const signal = cell.blocks.reduce((sum, { fit }) => sum + fit.signalPower, 0);
  if (!(signal > 0)) return { evmPercent: unknown('no block lies wholly in the capture') };
  const method = `${cell.blocks.length} synchronisation block${cell.blocks.length === 1 ? '' : 's'}, every element known after decoding`;
  return {
    evmPercent: { value: 100 * Math.sqrt(noise / signal), confidence: 0.95, method },
    evmRandomPercent: { value: RANDOM_EVM_PERCENT, method: 'random phases against the same points' },
    snrDb: placement?.snrDb == null
      ? { value: 10 * Math.log10(signal / noise), confidence: 0.8, method }
      : { value: placement.snrDb, confidence: 0.9, method: 'level of the resource blocks in use, while they are, against the floor beside the carrier' },
  };
}

export function clockValue(clock: ClockDrift | null): AirValue {
  if (!clock) return unknown('a single synchronisation block shows no drift');
  if (clock.sigmaPpm > LARGEST_CLOCK_SIGMA) return unknown(`the blocks lie too close in time: standard deviation ${clock.sigmaPpm.toFixed(1)} ppm`);
  return { value: clock.ppm, confidence: 0.95, method: 'drift of the synchronisation blocks’ delay', sigmaPpm: clock.sigmaPpm };
}

export function phaseValue(phases: PhaseCompensation, cell: Cell): AirValue {
  if (phases.value === null) return unknown(phases.reason ?? 'the phases do not say');
  const method = `phases of ${4 * cell.blocks.length} known symbols against both laws of TS 38.211 clause 5.4, ${phases.separation.toFixed(0)} standard deviations apart`;
  return { value: phases.value, confidence: phases.confidence, method };
}
