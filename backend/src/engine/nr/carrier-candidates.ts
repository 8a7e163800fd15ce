import { TRANSMISSION_BANDWIDTHS, type CarrierPlacement } from './carrier-placement.js';
import { nominalFrequencies } from './phase-laws.js';
import type { ClockDrift } from './clock-drift.js';

/** A carrier that may be behind the blocks that carry power, with its probability. */
export interface CarrierCandidate {
  /** Subcarrier 6·N_RB, Hz against the capture's zero. */
  readonly referenceHz: number;
  readonly resourceBlocks: number;
  readonly weight: number;
}

export interface CarrierSetting {
  readonly spacingHz: number;
  /** Stated centre of the capture, or null. */
  readonly centreHz: number | null;
  /** SS_REF as received, Hz against the capture's zero: how far from its raster says how far all is off. */
  readonly blockHz: number;
  readonly clock: ClockDrift | null;
}

/** A width that TS 38.104 does not list, against the listed ones. */
const UNLISTED = 0.03;
/** A block at the edge that never carried power, and each further one (common practice: little load starts at one edge). */
const UNSEEN = [0.2, 0.9] as const;
/** Recorders are tuned to the carrier more often than beside it; their error, parts per million. */
const TUNED = 20;
const TUNED_PPM = 5;
/** Carriers beside the channel raster of most bands, and so near it a carrier stands on it. */
const OFF_RASTER = 0.02;
const RASTER_TOLERANCE_HZ = 400;
/** Share from which the block's nominal place is taken for certain. */
const SURE = 0.9;
const NEGLIGIBLE = 1e-4;

/**
 * Carriers that hold all blocks with power: of a listed width, or of just these blocks; weighted
 * with the channel raster (TS 38.104 Table 5.4.2.3-1), the tuner's place, and the blocks at either
 * edge that would have been silent all the time. Likeliest first.
 */
export function carrierCandidates(placement: CarrierPlacement, setting: CarrierSetting): CarrierCandidate[] {
  const seen = placement.resourceBlocks;
  const listed = (TRANSMISSION_BANDWIDTHS.get(setting.spacingHz) ?? []).filter((blocks) => blocks >= seen);
  const widths = listed.includes(seen) ? listed : [seen, ...listed];
  const errorHz = errorOf(setting);
  const candidates = widths.flatMap((blocks) => Array.from({ length: blocks - seen + 1 }, (_, below) => {
    const referenceHz = placement.lowHz + (6 * blocks - 12 * below) * setting.spacingHz;
    const width = listed.includes(blocks) ? 1 : UNLISTED;
    const weight = width * unseen(below) * unseen(blocks - seen - below) * tuned(referenceHz, setting) * onRaster(referenceHz, setting, errorHz);
    return { referenceHz, resourceBlocks: blocks, weight };
  }));
  const whole = candidates.reduce((sum, { weight }) => sum + weight, 0);
  return candidates.map((each) => ({ ...each, weight: each.weight / whole })).filter(({ weight }) => weight > NEGLIGIBLE).sort((a, b) => b.weight - a.weight);
}

function unseen(blocks: number): number {
  return blocks === 0 ? 1 : UNSEEN[0] * UNSEEN[1] ** (blocks - 1);
}

function tuned(referenceHz: number, { centreHz }: CarrierSetting): number {
  return centreHz !== null && Math.abs(referenceHz) < TUNED_PPM * 1e-6 * centreHz ? TUNED : 1;
}

/** Received less nominal frequency, from the block; null where its nominal place is not sure. */
function errorOf({ centreHz, blockHz, clock }: CarrierSetting): number | null {
  if (centreHz === null) return null;
  const receivedHz = centreHz + blockHz;
  const best = nominalFrequencies(receivedHz, clock).reduce((a, b) => (b.weight > a.weight ? b : a));
  return best.weight > SURE ? receivedHz - best.hz : null;
}

/** Below 3 GHz carriers stand on multiples of 100 kHz; n41 and n90 on those of 15 kHz too. Above, any block edge is on the raster. */
function onRaster(referenceHz: number, { centreHz }: CarrierSetting, errorHz: number | null): number {
  if (centreHz === null || errorHz === null) return 1;
  const hz = centreHz + referenceHz - errorHz;
  if (hz > 3e9) return 1;
  const beside = (step: number) => Math.abs(hz - Math.round(hz / step) * step);
  if (beside(100e3) < RASTER_TOLERANCE_HZ) return 1;
  return hz > 2496e6 && hz < 2690e6 && beside(15e3) < RASTER_TOLERANCE_HZ ? 0.3 : OFF_RASTER;
}
