import { globalRasterStepHz, nearestOnGlobalRaster, syncRasterResidueHz } from './raster.js';
import type { PhaseLaws } from './phase-compensation.js';

/** Carrier errors that are expected between recorder and transmitter, parts per million. */
const EXPECTED_PPM = 1.5;
/** So near the synchronisation raster, a block stands on it. */
const ON_RASTER_PPM = 1;
/** Share of blocks near the synchronisation raster that stand on it all the same, when the error is larger. */
const ON_RASTER = 0.9;
/** Turns per symbol tried where the tuner's frequency is unknown. */
const TURNS = 64;

/**
 * Nominal frequencies that SS_REF may have where it was received at `receivedHz` on the air: on
 * the synchronisation raster (TS 38.104 clause 5.4.3.1), or on the global raster (clause 5.4.2.1)
 * for a block that only connected terminals use; weighted with the error that each implies.
 */
export function nominalFrequencies(receivedHz: number): PhaseLaws {
  const sigmaHz = EXPECTED_PPM * 1e-6 * receivedHz;
  const onSync = receivedHz - syncRasterResidueHz(receivedHz);
  if (Math.abs(receivedHz - onSync) < ON_RASTER_PPM * 1e-6 * receivedHz) return [{ hz: onSync, weight: 1 }];
  const likelihood = (hz: number) => Math.exp(-0.5 * ((hz - receivedHz) / sigmaHz) ** 2);
  const step = globalRasterStepHz(receivedHz);
  const nearest = nearestOnGlobalRaster(receivedHz);
  const reach = Math.ceil((3 * sigmaHz) / step);
  const others = Array.from({ length: 2 * reach + 1 }, (_, i) => nearest + (i - reach) * step).filter((hz) => Math.abs(hz - onSync) > 1);
  const whole = others.reduce((sum, hz) => sum + likelihood(hz), 0) + 1e-12;
  return [
    { hz: onSync, weight: ON_RASTER * likelihood(onSync) },
    ...others.map((hz) => ({ hz, weight: ((1 - ON_RASTER) * likelihood(hz)) / whole })),
  ].filter((law) => law.weight > 1e-6);
}

/** The likeliest of them. */
export function nominalFrequency(receivedHz: number): number {
  return nominalFrequencies(receivedHz).reduce((a, b) => (b.weight > a.weight ? b : a)).hz;
}

/** Laws under compensation; every turn per symbol is possible where the tuner's frequency is unknown. */
export function lawsWithCompensation({ referenceHz, centreHz, spacingHz }: { referenceHz: number; centreHz: number | null; spacingHz: number }): PhaseLaws {
  if (centreHz !== null) return nominalFrequencies(centreHz + referenceHz).map(({ hz, weight }) => ({ hz: -hz, weight }));
  return Array.from({ length: TURNS }, (_, i) => ({ hz: ((i / TURNS) * spacingHz) / (1 + 9 / 128), weight: 1 / TURNS }));
}

/**
 * Laws without compensation: the RF reference against SS_REF, both as received. Where the carrier
 * was not placed, each of the places that it may have.
 */
export function lawsWithoutCompensation(referenceHz: number, carriersHz: readonly number[]): PhaseLaws {
  return carriersHz.map((hz) => ({ hz: hz - referenceHz, weight: 1 / carriersHz.length }));
}
