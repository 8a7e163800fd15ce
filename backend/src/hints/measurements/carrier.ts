import type { SettingValue } from '#shared/decode';
import { CLOCK_BEYOND_PPM, CLOCK_LIMIT_PPM, RECORDER_PPM, SCATTER } from '../priors.js';
import type { Measurement } from '../model.js';
import type { Evidence } from '../types.js';
import { certainty, normal } from './likelihoods.js';
import { airNumber, airWord } from './numbers.js';

/**
 * The carrier: the stated centre plus the measured offset. Where the grid could not be placed,
 * only the residue modulo the spacing is known, and every whole number of spacings fits.
 */
export function carrierFrequency(evidence: Evidence): Measurement | null {
  return carrierWithClock(evidence, BEYOND_LIMITS);
}

/** Share of links whose clocks are beyond their limits. */
const BEYOND_LIMITS = 0.03;

/** The same for a stated share of clocks beyond their limits: 0 where the clock was excluded otherwise. */
export function carrierWithClock(evidence: Evidence, share: number): Measurement | null {
  const offset = airNumber(evidence, 'carrierOffsetHz');
  const centre = evidence.capture?.centreFrequencyHz ?? null;
  if (!offset || centre === null) return null;
  // The half subcarrier of an uplink is a setting of its own, not a part of the carrier's frequency.
  const shifted = evidence.air['halfSubcarrierShift']?.value === true ? 7500 : 0;
  const value = centre + offset.value - shifted;
  const method = offset.air.method ?? null;
  const spacing = method?.startsWith('fractional') ? airNumber(evidence, 'subcarrierSpacingHz')?.value : undefined;
  const range = spacing ?? evidence.capture?.sampleRateHz ?? 1e7;
  const within = normal({ value, method, sigma: Math.hypot(SCATTER.carrierFrequencyHz, (clockPpm(evidence) / 3) * 1e-6 * centre), range, confidence: certainty(offset.air) });
  const beyond = normal({ value, method, sigma: CLOCK_BEYOND_PPM * 1e-6 * centre, range, confidence: 1 });
  const fold = (setting: SettingValue): number => (spacing ? value + folded(Number(setting) - value, spacing) : Number(setting));
  return {
    value, method, otherLogLikelihood: Math.log(1 / range),
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
