import type { SettingValue } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import type { Evidence } from '../types.js';
import { declaredValue } from './numbers.js';

/**
 * The spacing that a side's transform size and sample rate imply (rate over size); null where it
 * does not declare both.
 */
export function impliedSpacing(evidence: Evidence, side: Side): number | null {
  const size = declaredValue(evidence, side, 'fftSize');
  const rate = declaredValue(evidence, side, 'sampleRate');
  return typeof size === 'number' && typeof rate === 'number' && size > 0 ? rate / size : null;
}

/** Declared spacings for the two sides, by what their transform and rate imply. */
export function impliedPair(evidence: Evidence): Record<Side, SettingValue> | null {
  const a = impliedSpacing(evidence, 'a');
  const b = impliedSpacing(evidence, 'b');
  return a === null || b === null ? null : { a, b };
}
