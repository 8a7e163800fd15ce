import type { DetectionContext } from '../types.js';
import type { DecodedBroadcast } from './burst-decode.js';
import { carrierCandidates, type CarrierCandidate } from './carrier-candidates.js';
import { carrierOf, placeCarrier, type CarrierPlacement } from './carrier-placement.js';
import type { Cell } from './cell.js';
import { clockDrift, type ClockDrift } from './clock-drift.js';
import type { DataPrefix } from './data-prefix.js';
import { judgePhases, type PhaseCompensation } from './phase-compensation.js';
import { lawsWithCompensation, lawsWithoutCompensation } from './phase-laws.js';
import { dataNumerology, referenceFrequency, type ReferenceFrequency } from './reference-frequency.js';
import type { WorkSignal } from './work-signal.js';

/** Grid of common resource blocks: subcarrier 0 of one of them, against the capture's zero, and their spacing, Hz. */
export interface CommonGrid {
  readonly edgeHz: number;
  readonly spacingHz: number;
}

/** What a decoded cell allows to measure. */
export interface CellMeasurements {
  readonly data: DataPrefix | null;
  readonly reference: ReferenceFrequency;
  /** Null where k_SSB only says that the block has no control resource set (TS 38.213 clause 13). */
  readonly commonGrid: CommonGrid | null;
  readonly placement: CarrierPlacement | null;
  /** True where the placement is believed: full edges of a standard bandwidth, or by far the likeliest carrier behind what was seen. */
  readonly placed: boolean;
  /** Probability of the placement among all carriers that may be behind what was seen. */
  readonly share: number;
  /** True where the outermost blocks are full ones, so that the number of blocks is the carrier's. */
  readonly fullEdges: boolean;
  readonly clock: ClockDrift | null;
  readonly phases: PhaseCompensation;
}

/** An unlisted number of full blocks is believed where its centre is the tuner's within this, parts per million. */
const CENTRED_PPM = 5;
/** Probability from which the likeliest carrier is believed. */
const LIKELY = 0.93;

export function measureCell(context: DetectionContext, { cell, work, decoded, inverted }: { cell: Cell; work: WorkSignal; decoded: DecodedBroadcast; inverted: boolean }): CellMeasurements {
  const { centreFrequencyHz: centreHz } = context.source;
  const data = dataNumerology(work, cell, { blind: context.blind, centreHz });
  const coarse = referenceFrequency(work, cell, data);
  const referenceHz = coarse.estimate.hz;
  const grid = commonGridOf(cell, referenceHz, decoded);
  const clock = clockDrift(cell);
  const seen = data && grid && placeCarrier(work, {
    spacingHz: data.spacingHz,
    extended: data.extended,
    subframeS: cell.frameStartS,
    blockEdgeHz: grid.edgeHz,
    stepHz: 12 * Math.min(grid.spacingHz, data.spacingHz),
  });
  const candidates = seen ? carrierCandidates(seen, { spacingHz: data!.spacingHz, centreHz, blockHz: referenceHz, clock }) : [];
  const { placement, placed, share } = believed(seen, candidates, { spacingHz: data?.spacingHz ?? 0, centreHz });
  const carriers = placed ? [{ referenceHz: placement!.referenceHz, weight: 1 }] : candidates.length > 0 ? candidates : possibleCarriers(context, { commonGrid: grid, inverted });
  const phases = judgePhases(cell, {
    present: lawsWithCompensation({ referenceHz, centreHz, spacingHz: cell.spacingHz, clock }),
    absent: lawsWithoutCompensation(referenceHz, carriers),
    reference: coarse.estimate,
  });
  const reference = sharpened(coarse, phases);
  const moved = reference.estimate.hz - referenceHz;
  return {
    data,
    reference,
    commonGrid: grid && { ...grid, edgeHz: grid.edgeHz + moved },
    placement: placement && { ...placement, referenceHz: placement.referenceHz + moved, lowHz: placement.lowHz + moved, highHz: placement.highHz + moved },
    placed,
    fullEdges: placement !== null && hasFullEdges(placement),
    share,
    clock,
    phases,
  };
}

/** The phases between symbols say the frequency better than the insides of the symbols, once their law is known. */
function sharpened(coarse: ReferenceFrequency, phases: PhaseCompensation): ReferenceFrequency {
  const { reference } = phases;
  if (!reference || reference.sigmaHz >= coarse.estimate.sigmaHz) return coarse;
  return { ...coarse, estimate: reference, method: `${coarse.method}, sharpened by the phases between them` };
}

/** k_SSB from the block down to the common grid: 15 kHz units in FR1, the common spacing's in FR2-1, the block's in FR2-2 (TS 38.211 clause 7.4.3.1). */
function commonGridOf(cell: Cell, referenceHz: number, { information }: DecodedBroadcast): CommonGrid | null {
  const wide = information.subCarrierSpacingCommon === 'scs30or120';
  const lower = cell.spacingHz <= 30_000;
  const spacingHz = cell.spacingHz >= 480_000 ? cell.spacingHz : lower ? (wide ? 30_000 : 15_000) : wide ? 120_000 : 60_000;
  const unitHz = lower ? 15_000 : spacingHz;
  if (information.kSsb > (lower ? 23 : 11)) return null;
  return { edgeHz: referenceHz - 120 * cell.spacingHz - information.kSsb * unitHz, spacingHz };
}

/** Share of the usual power in the outermost blocks: fading may weaken those of a standard bandwidth. */
const LISTED_EDGE = 0.3;
const UNLISTED_EDGE = 0.6;

function hasFullEdges({ inTable, edgeShare }: CarrierPlacement): boolean {
  return edgeShare > (inTable ? LISTED_EDGE : UNLISTED_EDGE);
}

function isCentred(placement: CarrierPlacement, centreHz: number | null): boolean {
  return centreHz !== null && Math.abs(placement.referenceHz) < CENTRED_PPM * 1e-6 * centreHz;
}

/** What was seen where its edges are a listed width's own, else the likeliest carrier behind it where none rivals it. */
function believed(seen: CarrierPlacement | null, candidates: readonly CarrierCandidate[], { spacingHz, centreHz }: { spacingHz: number; centreHz: number | null }): { placement: CarrierPlacement | null; placed: boolean; share: number } {
  if (!seen) return { placement: null, placed: false, share: 0 };
  const [best] = candidates;
  if (best && best.weight > LIKELY) return { placement: carrierOf(seen, best, spacingHz), placed: true, share: best.weight };
  return { placement: seen, placed: hasFullEdges(seen) && (seen.inTable || isCentred(seen, centreHz)), share: candidates.find(({ referenceHz }) => referenceHz === seen.referenceHz)?.weight ?? 0 };
}

/** Places on the common grid, half a block apart, that the RF reference may have where the edges do not say: about the middle of the occupied band. */
function possibleCarriers(context: DetectionContext, { commonGrid, inverted }: { commonGrid: CommonGrid | null; inverted: boolean }): { referenceHz: number; weight: number }[] {
  const span = occupiedUpright(context, inverted);
  if (!commonGrid || !span) return [];
  const middle = (span.lowHz + span.highHz) / 2;
  const reach = 0.12 * (span.highHz - span.lowHz);
  const step = 6 * commonGrid.spacingHz;
  const first = Math.ceil((middle - reach - commonGrid.edgeHz) / step);
  const last = Math.floor((middle + reach - commonGrid.edgeHz) / step);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => ({ referenceHz: commonGrid.edgeHz + (first + i) * step, weight: 1 }));
}

/** The occupied band was measured before an inverted spectrum was turned upright. */
function occupiedUpright({ occupied }: DetectionContext, inverted: boolean): { lowHz: number; highHz: number } | null {
  return occupied && inverted ? { lowHz: -occupied.highHz, highHz: -occupied.lowHz } : occupied;
}
