import type { SettingValue } from '#shared/decode';
import type { HintSide, Side } from '#shared/vocabulary';
import { PRIORS } from './priors.js';

/** What the air says of one parameter, as likelihoods of the settings that might be true. */
export interface Measurement {
  readonly value: SettingValue;
  readonly method: string | null;
  /** The value stands for all that lie whole numbers of these from it. */
  readonly periodHz?: number | null;
  /** Natural logarithm of the probability of what was measured, were `setting` the true one. */
  logLikelihood(setting: SettingValue): number;
  /** The same, were it some other setting than the one declared. */
  readonly otherLogLikelihood: number;
  /** The same, were it none of these: impossible (negative infinity) where they are all there are. Left out: as `otherLogLikelihood`. */
  noneOfLogLikelihood?(settings: readonly SettingValue[]): number;
}

export interface Verdict {
  readonly pattern: 'differ-decided' | 'differ-open' | 'neither' | 'agree-contradicted' | 'one-contradicted';
  readonly side: HintSide;
  readonly probability: number;
}

/** Shares of the explanations, from the logarithms of prior times likelihood. */
export function shares(logs: readonly number[]): number[] {
  const top = Math.max(...logs);
  const weights = logs.map((log) => Math.exp(log - top));
  const sum = weights.reduce((total, weight) => total + weight, 0);
  return weights.map((weight) => weight / sum);
}

/** Likelihood with a floor: no detector is beyond error. */
export function floored(logLikelihood: number, measurement: Measurement): number {
  return Math.log((1 - PRIORS.detectorSlip) * Math.exp(logLikelihood) + PRIORS.detectorSlip * Math.exp(measurement.otherLogLikelihood));
}

/**
 * Two declared values that cannot both hold. Explanations: A at odds (then B's is the true one),
 * B at odds, both at odds. Without a measurement nothing tells which.
 */
export function judgeDifference(declared: Readonly<Record<Side, SettingValue>>, measurement: Measurement | null): Verdict {
  const open = { pattern: 'differ-open', side: 'unknown', probability: PRIORS.differenceIsReal } as const;
  if (!measurement) return open;
  const one = Math.log((1 - PRIORS.bothAtOdds) / 2);
  const neither = measurement.noneOfLogLikelihood?.([declared.a, declared.b]) ?? measurement.otherLogLikelihood;
  const [a, b, both] = shares([
    one + floored(measurement.logLikelihood(declared.b), measurement),
    one + floored(measurement.logLikelihood(declared.a), measurement),
    Math.log(PRIORS.bothAtOdds) + neither,
  ]) as [number, number, number];
  const best = Math.max(a, b, both);
  if (best < PRIORS.sideDecided) return open;
  const probability = best * PRIORS.differenceIsReal;
  if (best === both) return { pattern: 'neither', side: 'both', probability };
  return { pattern: 'differ-decided', side: best === a ? 'a' : 'b', probability };
}

/** One value, declared by both or by one: does the air contradict it? Null where it does not. */
export function judgeContradiction(declared: SettingValue, measurement: Measurement, by: { sides: readonly Side[]; transmitter: Side | null }): Verdict | null {
  const agreed = by.sides.length === 2;
  const prior = agreed ? PRIORS.agreedButOtherwise : PRIORS.oneSidedAtOdds;
  const [, wrong] = shares([
    Math.log(1 - prior) + floored(measurement.logLikelihood(declared), measurement),
    Math.log(prior) + measurement.otherLogLikelihood,
  ]) as [number, number];
  if (wrong < PRIORS.report) return null;
  if (agreed) return { pattern: 'agree-contradicted', side: by.transmitter ?? 'unknown', probability: wrong };
  return { pattern: 'one-contradicted', side: by.sides[0]!, probability: wrong };
}
