import type { SampleSource } from '../types.js';
import { resample } from '../vector/resample.js';

/**
 * A window of the capture at 15 kHz·2^n, so that a symbol of every numerology is a whole power
 * of two long. Its frequency 0 is `centreHz` of the capture; phases are those of a mixer that
 * runs freely from the capture's sample 0. Sample 0 lies `startS` after that sample.
 */
export interface WorkSignal {
  readonly iq: Float32Array;
  readonly rateHz: number;
  readonly centreHz: number;
  readonly startS: number;
  /** Frequencies that the window's filter passes, in the work signal. */
  readonly lowHz: number;
  readonly highHz: number;
}

/** The resampler's passband, as a share of the rate. */
const PASSED = 0.455;

export interface WorkPlan {
  readonly rateHz: number;
  readonly centreHz: number;
  readonly lowHz: number;
  readonly highHz: number;
}

/** The smallest rate that holds a band (Hz in the capture) and at least `leastRateHz`; a capture at such a rate is taken as it is. */
export function planWork(sampleRateHz: number, band: { lowHz: number; highHz: number }, leastRateHz: number): WorkPlan {
  const width = band.highHz - band.lowHz;
  const native = isNative(sampleRateHz);
  let rateHz = 15_000 * 64;
  while (rateHz < leastRateHz || 2 * PASSED * rateHz < width) {
    rateHz *= 2;
    if (native && rateHz >= sampleRateHz) break;
  }
  if (native && rateHz >= sampleRateHz) {
    return { rateHz: sampleRateHz, centreHz: 0, lowHz: -sampleRateHz / 2, highHz: sampleRateHz / 2 };
  }
  const reach = PASSED * Math.min(rateHz, sampleRateHz);
  const centreHz = rateHz >= sampleRateHz ? 0 : (band.highHz + band.lowHz) / 2;
  return { rateHz, centreHz, lowHz: -reach, highHz: reach };
}

function isNative(rateHz: number): boolean {
  return Number.isInteger(Math.log2(rateHz / 15_000));
}

/** Reads `durationS` from `startS` on (less at the capture's end) and brings it to the plan's rate. */
export function readWork(source: SampleSource, plan: WorkPlan, { startS, durationS }: { startS: number; durationS: number }): WorkSignal {
  const first = Math.max(0, Math.round(startS * source.sampleRateHz));
  const iq = source.read(first, Math.round(durationS * source.sampleRateHz));
  const made = plan.rateHz === source.sampleRateHz && plan.centreHz === 0
    ? iq
    : resample(iq, source.sampleRateHz, plan.rateHz, { shiftHz: -plan.centreHz, startSample: first });
  return { ...plan, iq: made, startS: first / source.sampleRateHz };
}
