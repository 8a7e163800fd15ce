import type { AirValue, SettingValue } from '#shared/decode';
import { CLOCK_BEYOND_PPM, CLOCK_LIMIT_PPM, RECORDER_PPM, SCATTER } from '../priors.js';
import { besideSyncRaster } from '../../snapshots/standards/nrRaster.js';
import type { Measurement } from '../model.js';
import type { Evidence } from '../types.js';
import { certainty, normal } from './likelihoods.js';
import { airNumber, airWord } from './numbers.js';

/**
 * The carrier: the stated centre plus the measured offset. Where the grid could not be placed,
 * only the residue modulo the spacing is known, and every whole number of spacings fits.
 */
export function carrierFrequency(evidence: Evidence): Measurement | null {
  return carrierWithClock(evidence, blockInStep(evidence) ? BEYOND_LIMITS * CHANCE_OF_RASTER : BEYOND_LIMITS);
}

/** Share of links whose clocks are beyond their limits. */
const BEYOND_LIMITS = 0.03;
/** How often a clock beyond its limits leaves a block on another place of the raster: its width in places of 400 kHz and more. */
const CHANCE_OF_RASTER = 0.03;

/** A block that is received on the synchronisation raster shows that the clocks are within their limits. */
function blockInStep(evidence: Evidence): boolean {
  const block = airNumber(evidence, 'ssbFrequencyHz');
  return block !== null && besideSyncRaster(block.value) < clockPpm(evidence) * 1e-6 * block.value + SCATTER.ssbFrequencyHz;
}

interface Place {
  readonly air: AirValue;
  /** Against the stated centre. */
  readonly offsetHz: number;
  /** The carrier may stand at any whole number of these from it; null where its place is known. */
  readonly periodHz: number | null;
}

/** What the air shows of the carrier's place: a whole offset, one on the grid of resource blocks, or a residue modulo the spacing. */
function placeOf(evidence: Evidence): Place | null {
  const offset = airNumber(evidence, 'carrierOffsetHz');
  if (!offset) return null;
  const { air } = offset;
  if (!air.method?.startsWith('fractional')) return { air, offsetHz: offset.value, periodHz: null };
  const { blockResidueHz, blockPeriodHz } = air;
  if (typeof blockResidueHz === 'number' && typeof blockPeriodHz === 'number') return { air, offsetHz: blockResidueHz, periodHz: blockPeriodHz };
  return { air, offsetHz: offset.value, periodHz: airNumber(evidence, 'subcarrierSpacingHz')?.value ?? null };
}

/** Hz after which another carrier would be received alike; null where the carrier's place is known. */
export function carrierPeriodHz(evidence: Evidence): number | null {
  return placeOf(evidence)?.periodHz ?? null;
}

/** The same for a stated share of clocks beyond their limits: 0 where the clock was excluded otherwise. */
export function carrierWithClock(evidence: Evidence, share: number): Measurement | null {
  const place = placeOf(evidence);
  const centre = evidence.capture?.centreFrequencyHz ?? null;
  if (!place || centre === null) return null;
  // The half subcarrier of an uplink is a setting of its own, not a part of the carrier's frequency.
  const shifted = evidence.air['halfSubcarrierShift']?.value === true ? 7500 : 0;
  const value = centre + place.offsetHz - shifted;
  const method = place.air.method ?? null;
  const range = place.periodHz ?? evidence.capture?.sampleRateHz ?? 1e7;
  const within = normal({ value, method, sigma: Math.hypot(SCATTER.carrierFrequencyHz, (clockPpm(evidence) / 3) * 1e-6 * centre), range, confidence: certainty(place.air) });
  const beyond = normal({ value, method, sigma: CLOCK_BEYOND_PPM * 1e-6 * centre, range, confidence: 1 });
  const fold = (setting: SettingValue): number => (place.periodHz ? value + folded(Number(setting) - value, place.periodHz) : Number(setting));
  return {
    value, method, periodHz: place.periodHz, otherLogLikelihood: Math.log(1 / range),
    logLikelihood: (setting) => Math.log((1 - share) * Math.exp(within.logLikelihood(fold(setting))) + share * Math.exp(beyond.logLikelihood(fold(setting)))),
  };
}

/** The nearest distance, where whole numbers of `period` do not count. */
export function folded(distance: number, period: number): number {
  return distance - period * Math.round(distance / period);
}

/** The block's absolute frequency. */
export function ssbFrequency(evidence: Evidence): Measurement | null {
  const block = airNumber(evidence, 'ssbFrequencyHz');
  if (!block) return null;
  const sigma = Math.hypot(SCATTER.ssbFrequencyHz, (clockPpm(evidence) / 3) * 1e-6 * block.value);
  return normal({ value: block.value, method: block.air.method ?? null, sigma, range: evidence.capture?.sampleRateHz ?? 1e7, confidence: certainty(block.air) });
}

/** Difference of two clocks that is still within limits: the transmitter's plus the recorder's. */
export function clockPpm(evidence: Evidence): number {
  return (CLOCK_LIMIT_PPM[airWord(evidence, 'technology') ?? 'ofdm'] ?? 25) + RECORDER_PPM;
}
