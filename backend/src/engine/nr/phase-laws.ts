import { nearestOnGlobalRaster, syncRasterResidueHz } from './raster.js';
import type { PhaseLaws } from './phase-compensation.js';

/** A block farther than this beside the synchronisation raster does not stand on it, parts per million. */
const LARGEST_PPM = 10;
/** Turns per symbol tried where the tuner's frequency is unknown. */
const TURNS = 64;

/**
 * Nominal frequency of SS_REF that was received at `receivedHz` on the air: the nearest of the
 * synchronisation raster (TS 38.104 clause 5.4.3.1), or of the global raster (clause 5.4.2.1) for
 * a block that stands beside it.
 */
export function nominalFrequency(receivedHz: number): number {
  const residueHz = syncRasterResidueHz(receivedHz);
  return Math.abs(residueHz) < LARGEST_PPM * 1e-6 * receivedHz ? receivedHz - residueHz : nearestOnGlobalRaster(receivedHz);
}

/** Laws under compensation; every turn per symbol is possible where the tuner's frequency is unknown. */
export function lawsWithCompensation({ referenceHz, centreHz, spacingHz }: { referenceHz: number; centreHz: number | null; spacingHz: number }): PhaseLaws {
  if (centreHz !== null) return [{ hz: -nominalFrequency(centreHz + referenceHz), weight: 1 }];
  return Array.from({ length: TURNS }, (_, i) => ({ hz: ((i / TURNS) * spacingHz) / (1 + 9 / 128), weight: 1 / TURNS }));
}

/**
 * Laws without compensation: the RF reference against SS_REF, both as received. Where the carrier
 * was not placed, each of the places that it may have.
 */
export function lawsWithoutCompensation(referenceHz: number, carriersHz: readonly number[]): PhaseLaws {
  return carriersHz.map((hz) => ({ hz: hz - referenceHz, weight: 1 / carriersHz.length }));
}
