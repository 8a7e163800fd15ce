import type { BlindEstimate } from '../sync/estimate.js';

/** A rate that would make the symbols those of a standard, and why. */
export interface RateSuspicion {
  /** True rate over the stated one. */
  readonly ratio: number;
  readonly proof: string;
}

/** Ratios between clocks that radios and recorders run on (3/4 of 30.72 and its like, powers of two; common practice). */
const RATIOS = [1 / 2, 2, 3 / 4, 4 / 3, 2 / 3, 3 / 2, 4 / 5, 5 / 4, 25 / 24, 24 / 25, 1 / 4, 4];
const LEAST_CONFIDENCE = 0.9;

/**
 * The stated rate against the pattern of longer prefixes, which does not depend on it: every
 * 7·2^µ symbols at 15·2^µ kHz (TS 38.211 clause 5.3.1). Null where the two agree, or where the
 * pattern is not seen. A ratio of exactly 2 shows in no other way.
 */
export function suspectRate(blind: BlindEstimate | null): RateSuspicion | null {
  if (!blind || blind.longPrefixEvery === null || blind.confidence < LEAST_CONFIDENCE) return null;
  const spacing = 15e3 * (blind.longPrefixEvery / 7);
  const ratio = spacing / blind.subcarrierSpacingHz;
  if (Math.abs(ratio - 1) < 0.004) return null;
  const near = RATIOS.find((r) => Math.abs(ratio / r - 1) < 0.004);
  if (near === undefined) return null;
  const stated = Number((blind.subcarrierSpacingHz / 1e3).toFixed(3));
  return { ratio: near, proof: `a longer prefix stands every ${blind.longPrefixEvery} symbols, which is the pattern of ${spacing / 1e3} kHz; at the stated rate the symbols would be those of ${stated} kHz` };
}
