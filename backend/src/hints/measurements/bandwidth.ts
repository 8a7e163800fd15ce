import type { AirValue } from '#shared/decode';
import { SCATTER } from '../priors.js';
import type { Measurement } from '../model.js';
import type { Evidence } from '../types.js';
import { categorical, certainty } from './likelihoods.js';
import { airNumber } from './numbers.js';

const MOST_BLOCKS = 275;
/** How often the outer blocks of a carrier stay empty for the whole of a capture (common practice). */
const UNFILLED = 0.1;

/**
 * Resource blocks announced in the broadcast, else those seen. Seen ones are a lower bound: power
 * outside the declared blocks refutes a declaration, empty outer blocks hardly do.
 */
export function resourceBlocks(evidence: Evidence): Measurement | null {
  const announced = evidence.announced['resourceBlocks'];
  if (typeof announced === 'number') return categorical({ value: announced, confidence: 0.999, method: 'announced in the broadcast' }, 6);
  const seen = airNumber(evidence, 'resourceBlocks');
  if (!seen) return null;
  const sure = certainty(seen.air);
  const density = (declared: number): number => {
    const core = Math.exp(-0.5 * ((declared - seen.value) / SCATTER.resourceBlocks) ** 2) / (SCATTER.resourceBlocks * Math.sqrt(2 * Math.PI));
    const partly = declared > seen.value ? UNFILLED / declared : 0;
    return sure * ((1 - UNFILLED) * core + partly) + (1 - sure) / MOST_BLOCKS;
  };
  return {
    value: seen.value,
    method: seen.air.method ?? null,
    otherLogLikelihood: Math.log(1 / MOST_BLOCKS),
    logLikelihood: (setting) => Math.log(typeof setting === 'number' ? density(setting) : 1 / MOST_BLOCKS),
  };
}

/**
 * A channel must hold what is on the air: with a 99 % bandwidth W the channel is at least about
 * W, and in practice at most half as wide again (the share that guards take in the tables of
 * TS 38.104 clause 5.3.2 is 2 to 25 %). More than that is weak evidence, since a carrier need
 * not be filled.
 */
export function channelBandwidth(evidence: Evidence): Measurement | null {
  const frames = airNumber(evidence, 'channelBandwidthHz');
  if (frames) return ofFrames(frames.value, frames.air);
  const occupied = airNumber(evidence, 'occupiedBandwidthHz');
  if (!occupied) return null;
  const width = occupied.value;
  return {
    value: width,
    method: occupied.air.method ?? null,
    otherLogLikelihood: Math.log(0.3),
    logLikelihood: (setting) => (typeof setting === 'number' ? Math.log(fit(setting / width)) : 0),
  };
}

/** Channel of the frames seen: a wide channel also carries narrow frames, a narrow one no wide frames. */
function ofFrames(seen: number, air: AirValue): Measurement {
  const sure = certainty(air);
  const density = (declared: number): number => (Math.abs(declared / seen - 1) < 0.02 ? sure * 0.9 : declared > seen ? 0.1 : 1 - sure);
  return { value: seen, method: air.method ?? null, otherLogLikelihood: Math.log(0.3), logLikelihood: (setting) => Math.log(typeof setting === 'number' ? density(setting) : 0.3) };
}

function fit(ratio: number): number {
  if (ratio < 0.97) return 0.001;
  return ratio <= 1.5 ? 1 : Math.max(0.05, 1.5 / ratio ** 3);
}
