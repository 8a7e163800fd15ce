import { besideSyncRaster } from '../../snapshots/standards/nrRaster.js';
import { carrierWithClock, clockPpm, folded } from '../measurements/carrier.js';
import { airNumber } from '../measurements/numbers.js';
import { judgeContradiction } from '../model.js';
import { CLOCK_BEYOND_PPM, SCATTER } from '../priors.js';
import type { Evidence, Finding, Rule } from '../types.js';
import { basisOf, declaredBy, recordingBasis } from './basis.js';
import { carrierRow, shiftFromDeclared, type Shift } from './carrier-shift.js';

/**
 * The carrier that agreeing snapshots (or the one that speaks) declare, against the one on the
 * air. What is left over is a wrong channel where it is far off or whole raster steps, a clock
 * where it is a few parts in a million (and the sample clock says the same).
 */
export const carrier: Rule = (evidence) => {
  if (evidence.air['direction']?.value === 'uplink' && evidence.air['halfSubcarrierShift']?.value === null) return [];
  const shift = shiftFromDeclared(evidence);
  if (shift === null) return clockAlone(evidence, false);
  const limitHz = shift.fc * clockPpm(evidence) * 1e-6 + 3 * SCATTER.carrierFrequencyHz;
  if (Math.abs(shift.hz) <= limitHz) return clockAlone(evidence, true);
  const clock = clockShare(evidence, shift);
  if (clock > 0.5) return [clockFinding(evidence, { ppm: (shift.hz / shift.fc) * 1e6, hz: shift.hz, probability: clock })];
  // A block beside its place has a rule of its own.
  return shift.blockHz === null ? wrongCarrier(evidence, 1 - clock) : [];
};

/** Probability that a shift beyond the limits is a clock's and not a channel's. */
function clockShare(evidence: Evidence, shift: Shift): number {
  const ppm = (shift.hz / shift.fc) * 1e6;
  const free = Math.exp(-0.5 * (ppm / (2.5 * CLOCK_BEYOND_PPM)) ** 2);
  const toRaster = shift.blockHz === null ? besideCarrierRaster(shift) : besideSyncRaster(shift.blockHz);
  const onRaster = Math.exp(-0.5 * (toRaster / (2 * SCATTER.carrierFrequencyHz + 1e-7 * shift.fc)) ** 2);
  const sampled = airNumber(evidence, 'sampleClockOffsetPpm');
  const sigma = sampled ? Math.max(0.5, Number(sampled.air['sigmaPpm'] ?? 1)) : Infinity;
  // A common reference moves carrier and samples alike; a wrong channel leaves the samples in step.
  const follows = sampled && Math.abs(ppm) > 3 * sigma ? Math.exp(0.5 * ((sampled.value / sigma) ** 2 - ((sampled.value - ppm) / sigma) ** 2)) : 1;
  const clock = free * Math.min(1e6, follows);
  return clock / (clock + 0.02 + 5 * onRaster);
}

/** How far a shift is from whole steps of the carrier's raster, Hz. */
function besideCarrierRaster(shift: Shift): number {
  const steps = shift.fc < 3e9 ? [100e3, 15e3] : [15e3];
  return Math.min(...steps.filter((step) => Math.abs(shift.hz) > step / 2).map((step) => Math.abs(folded(shift.hz, step))), Infinity);
}

function wrongCarrier(evidence: Evidence, share: number): Finding[] {
  const row = carrierRow(evidence)!;
  if (row.verdict === 'differ') return [];
  const measurement = carrierWithClock(evidence, 0)!;
  const sides = declaredBy(row);
  const verdict = judgeContradiction(row[sides[0]!]!.value, measurement, { sides, transmitter: evidence.transmitter });
  if (!verdict) return [];
  return [{ code: 'carrier-frequency', side: verdict.side, probability: verdict.probability * share, basis: basisOf(row, evidence, { pattern: verdict.pattern, measurement }), consequences: [] }];
}

/** Scatter of the sample clock where the carrier is in step, ppm: the two seldom have references of their own. */
const SAMPLES_ALONE_PPM = 2;

/** The sample clock alone, where it was measured: the carrier is within limits, or nothing is declared of it. */
function clockAlone(evidence: Evidence, carrierInStep: boolean): Finding[] {
  const sampled = airNumber(evidence, 'sampleClockOffsetPpm');
  if (!sampled) return [];
  const sigma = Math.max(carrierInStep ? SAMPLES_ALONE_PPM : 0.5, Number(sampled.air['sigmaPpm'] ?? 1));
  const excess = Math.abs(sampled.value) - clockPpm(evidence) - 3 * sigma;
  if (excess <= 0) return [];
  return [clockFinding(evidence, { ppm: sampled.value, hz: null, probability: Math.min(0.9, 0.6 + 0.1 * (excess / sigma)) })];
}

function clockFinding(evidence: Evidence, seen: { ppm: number; hz: number | null; probability: number }): Finding {
  const away = seen.hz === null ? '' : ` (${(seen.hz / 1e3).toFixed(2)} kHz)`;
  const limit = clockPpm(evidence);
  return {
    code: 'reference-clock', side: 'capture', probability: Math.min(0.97, seen.probability), consequences: [],
    basis: recordingBasis([
      `Transmitter and recorder differ by ${seen.ppm.toFixed(2)} ppm${away}, more than the ${limit} ppm that their clocks may`,
      'One recording shows only the difference of two clocks; which of them is off, a second recorder on a reference would tell',
    ], 'TS 38.104, clause 6.5.1'),
  };
}
