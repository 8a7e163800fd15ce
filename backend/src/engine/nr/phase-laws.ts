import { globalRasterStepHz, globalRasterWithin, syncRasterStepHz, syncRasterWithin } from './raster.js';
import type { ClockDrift } from './clock-drift.js';
import type { PhaseLaws } from './phase-compensation.js';

/** Carrier errors between recorder and transmitter, parts per million: ordinary clocks, and one in ten that is not. */
const ERRORS_PPM = [{ sigma: 1.5, weight: 0.9 }, { sigma: 12, weight: 0.1 }];
/** Share of radios whose carrier and sample clock hang on one reference, and how well the two then agree. */
const COMMON_REFERENCE = 0.7;
const COMMON_PPM = 0.1;
/** Share of blocks that stand on the synchronisation raster: terminals find no others. */
const ON_RASTER = 0.95;
/** Errors looked at: on the sparse raster, on the dense one (in which a larger error would prove nothing). */
const REACH_PPM = 36;
const DENSE_REACH_PPM = 4;
/** Places less likely than this against the likeliest are left out. */
const NEGLIGIBLE = 1e-5;
/** Turns per symbol tried where the tuner's frequency is unknown. */
const TURNS = 64;

/**
 * Nominal frequencies that SS_REF may have where it was received at `receivedHz` on the air: on
 * the synchronisation raster (TS 38.104 clause 5.4.3.1), or on the global raster (clause 5.4.2.1)
 * for a block that only connected terminals use; weighted with the density of the carrier error
 * that each implies, which the sample clock's measured error foretells where the two are common.
 */
export function nominalFrequencies(receivedHz: number, clock: ClockDrift | null = null): PhaseLaws {
  const errorPpm = (hz: number) => (1e6 * (receivedHz - hz)) / receivedHz;
  const within = (ppm: number, about = 0) => [receivedHz * (1 - (about + ppm) * 1e-6), receivedHz * (1 - (about - ppm) * 1e-6)] as const;
  const sync = syncRasterWithin(...within(REACH_PPM));
  const dense = [...globalRasterWithin(...within(DENSE_REACH_PPM)), ...(clock ? globalRasterWithin(...within(DENSE_REACH_PPM, clock.ppm)) : [])];
  const global = [...new Set(dense)].filter((hz) => !sync.includes(hz));
  const laws = [
    ...sync.map((hz) => ({ hz, weight: ON_RASTER * syncRasterStepHz(receivedHz) * errorDensity(errorPpm(hz), clock) })),
    ...global.map((hz) => ({ hz, weight: (1 - ON_RASTER) * globalRasterStepHz(receivedHz) * errorDensity(errorPpm(hz), clock) })),
  ];
  const most = Math.max(...laws.map((law) => law.weight));
  const whole = laws.reduce((sum, law) => sum + law.weight, 0);
  return laws.filter((law) => law.weight > NEGLIGIBLE * most).map(({ hz, weight }) => ({ hz, weight: weight / whole }));
}

/** Density of a carrier error, per part per million. */
function errorDensity(ppm: number, clock: ClockDrift | null): number {
  const alone = ERRORS_PPM.reduce((sum, { sigma, weight }) => sum + weight * normal(ppm, sigma), 0);
  if (!clock) return alone;
  return COMMON_REFERENCE * normal(ppm - clock.ppm, Math.hypot(clock.sigmaPpm, COMMON_PPM)) + (1 - COMMON_REFERENCE) * alone;
}

function normal(x: number, sigma: number): number {
  return Math.exp(-0.5 * (x / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI));
}

/** The likeliest of them. */
export function nominalFrequency(receivedHz: number, clock: ClockDrift | null = null): number {
  return nominalFrequencies(receivedHz, clock).reduce((a, b) => (b.weight > a.weight ? b : a)).hz;
}

/** Laws under compensation; every turn per symbol is possible where the tuner's frequency is unknown. */
export function lawsWithCompensation({ referenceHz, centreHz, spacingHz, clock }: { referenceHz: number; centreHz: number | null; spacingHz: number; clock: ClockDrift | null }): PhaseLaws {
  if (centreHz !== null) return nominalFrequencies(centreHz + referenceHz, clock).map(({ hz, weight }) => ({ hz: -hz, weight }));
  return Array.from({ length: TURNS }, (_, i) => ({ hz: ((i / TURNS) * spacingHz) / (1 + 9 / 128), weight: 1 / TURNS }));
}

/**
 * Laws without compensation: the RF reference against SS_REF, both as received. Where the carrier
 * was not placed, each of the places that it may have.
 */
export function lawsWithoutCompensation(referenceHz: number, carriers: readonly { readonly referenceHz: number; readonly weight: number }[]): PhaseLaws {
  const whole = carriers.reduce((sum, { weight }) => sum + weight, 0);
  return carriers.map((each) => ({ hz: each.referenceHz - referenceHz, weight: each.weight / whole }));
}
