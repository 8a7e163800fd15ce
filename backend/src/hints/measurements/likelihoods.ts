import type { AirValue, SettingValue } from '#shared/decode';
import type { Measurement } from '../model.js';

/** Confidence of an air value that states none: a detector that spoke at all is sure. */
const UNSTATED = 0.98;

export function certainty(air: AirValue): number {
  return Math.min(0.9999, Math.max(0.5, air.confidence ?? UNSTATED));
}

/** A word or whole number out of `choices` possible ones. */
export function categorical(air: AirValue, choices: number, same = (a: SettingValue, b: SettingValue) => a === b): Measurement {
  const sure = certainty(air);
  const miss = (1 - sure) / (choices - 1);
  return {
    value: air.value,
    method: air.method ?? null,
    logLikelihood: (setting) => Math.log(same(setting, air.value) ? sure : miss),
    // Some other setting is true: mostly the one that was measured, where it is not among the declared.
    otherLogLikelihood: Math.log((sure + (choices - 2) * miss) / (choices - 1)),
    noneOfLogLikelihood: (settings) => {
      const left = choices - settings.length;
      if (left <= 0) return Number.NEGATIVE_INFINITY;
      return Math.log(settings.some((setting) => same(setting, air.value)) ? miss : (sure + (left - 1) * miss) / left);
    },
  };
}

export interface Spread {
  readonly value: number;
  readonly method: string | null;
  /** One standard deviation, in the value's unit. */
  readonly sigma: number;
  /** Width over which other settings might lie: their likelihood is spread evenly over it. */
  readonly range: number;
  readonly confidence: number;
}

/** A number with normal scatter; tails are kept heavy by the detector's own doubt. */
export function normal(spread: Spread): Measurement {
  const density = (deviation: number): number => {
    const core = Math.exp(-0.5 * (deviation / spread.sigma) ** 2) / (spread.sigma * Math.sqrt(2 * Math.PI));
    return spread.confidence * core + (1 - spread.confidence) / spread.range;
  };
  return {
    value: spread.value,
    method: spread.method,
    logLikelihood: (setting) => (typeof setting === 'number' ? Math.log(density(setting - spread.value)) : Math.log(1 / spread.range)),
    otherLogLikelihood: Math.log(1 / spread.range),
  };
}
