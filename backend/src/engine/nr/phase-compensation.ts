import { BLOCK_PREFIX } from './block-grid.js';
import { BLOCK_SYMBOLS } from './block-layout.js';
import type { Cell } from './cell.js';
import type { FrequencyEstimate } from './frequency-fit.js';

/** What the phases of the blocks' symbols say about clause 5.4 of TS 38.211. */
export interface PhaseCompensation {
  readonly value: 'present' | 'absent' | null;
  readonly confidence: number;
  /** Distance of the two explanations in standard deviations of the measured phases. */
  readonly separation: number;
  readonly reason: string | null;
}

/**
 * A phase law: turns a second by which the symbols' starts advance against the block's grid.
 * Several where the frequency behind it is not known alone, each with its weight.
 */
export type PhaseLaws = readonly { readonly hz: number; readonly weight: number }[];

export interface PhaseQuestion {
  /** Under compensation the start of a symbol at t turns by −f_SS·t, f_SS the nominal SS_REF on the air. */
  readonly present: PhaseLaws;
  /** Without it by −(f_SS − f0)·t, f0 the carrier's RF reference. */
  readonly absent: PhaseLaws;
  readonly reference: FrequencyEstimate;
}

/** Standard deviation of a symbol's phase that is not noise (phase noise, fading), rad. */
const OTHER_PHASE = 0.03;
/** Spread of a path's own frequency, Hz, added to the reference's uncertainty. */
const DOPPLER_HZ = 20;
const SIGMAS = 3;
const STEPS = 12;
/** Largest χ² per degree of freedom that still counts as a fit. */
const WORST_FIT = 6;

/** Compares the two explanations over all blocks; `null` with a reason where they cannot be told apart or neither fits. */
export function judgePhases(cell: Cell, question: PhaseQuestion): PhaseCompensation {
  if (question.present.length === 0 || question.absent.length === 0) {
    return { value: null, confidence: 0, separation: 0, reason: 'neither the tuner’s frequency nor the carrier’s place is known' };
  }
  const sigmaHz = Math.hypot(question.reference.sigmaHz, DOPPLER_HZ);
  const driftHz = question.reference.hz - cell.gridHz;
  const present = explain(cell, question.present, { driftHz, sigmaHz });
  const absent = explain(cell, question.absent, { driftHz, sigmaHz });
  const separation = separationOf(cell, { from: present.best, to: absent.best, sigmaHz });
  if (separation < SIGMAS) {
    return { value: null, confidence: 0, separation, reason: `the phases with and without compensation lie ${separation.toFixed(1)} standard deviations apart at this carrier frequency` };
  }
  const better = present.logLikelihood > absent.logLikelihood ? present : absent;
  const degrees = cell.blocks.length * (BLOCK_SYMBOLS - 1);
  if (better.misfit > WORST_FIT * degrees + 20) {
    return { value: null, confidence: 0, separation, reason: 'the symbols’ phases follow neither law: the compensation may be made for another carrier frequency' };
  }
  const odds = Math.abs(present.logLikelihood - absent.logLikelihood);
  const confidence = 1 / (1 + Math.exp(-Math.min(odds, 9)));
  if (odds < SIGMAS) return { value: null, confidence, separation, reason: 'the symbols’ phases fit both laws about equally well' };
  return { value: better === present ? 'present' : 'absent', confidence, separation, reason: null };
}

interface Explanation { logLikelihood: number; misfit: number; best: number }

/** Likelihood of the phases under a set of laws, the frequency's error integrated over its own uncertainty. */
function explain(cell: Cell, laws: PhaseLaws, { driftHz, sigmaHz }: { driftHz: number; sigmaHz: number }): Explanation {
  const terms: { log: number; misfit: number; hz: number }[] = [];
  for (const law of laws) {
    for (let step = -STEPS; step <= STEPS; step++) {
      const x = (3 * step) / STEPS;
      const misfit = misfitOf(cell, law.hz + driftHz + x * sigmaHz);
      terms.push({ log: Math.log(law.weight) - (x * x) / 2 - misfit / 2, misfit: misfit + x * x, hz: law.hz });
    }
  }
  const top = terms.reduce((a, b) => (b.log > a.log ? b : a));
  const sum = terms.reduce((total, term) => total + Math.exp(term.log - top.log), 0);
  const norm = Math.log(laws.reduce((total, law) => total + law.weight, 0)) + Math.log(2 * STEPS + 1);
  return { logLikelihood: top.log + Math.log(sum) - norm, misfit: top.misfit, best: top.hz };
}

/** Time between the starts of neighbouring symbols of a block, s: the transmitter's own, exact. */
function symbolS(cell: Cell): number {
  return (1 + BLOCK_PREFIX) / cell.spacingHz;
}

/** χ² of the phases against a law, a free phase in each block. */
function misfitOf(cell: Cell, hz: number): number {
  const perSymbol = 2 * Math.PI * hz * symbolS(cell);
  let total = 0;
  for (const { fit } of cell.blocks) {
    const left = fit.phases.map((phase, l) => phase - perSymbol * l);
    const weights = fit.phaseVariances.map((variance) => 1 / (variance + OTHER_PHASE ** 2));
    let re = 0;
    let im = 0;
    left.forEach((angle, l) => {
      re += weights[l] * Math.cos(angle);
      im += weights[l] * Math.sin(angle);
    });
    const middle = Math.atan2(im, re);
    left.forEach((angle, l) => { total += weights[l] * wrapped(angle - middle) ** 2; });
  }
  return total;
}

function wrapped(angle: number): number {
  return angle - 2 * Math.PI * Math.round(angle / (2 * Math.PI));
}

/** How far the two laws' phases lie apart, in standard deviations, the frequency's own error allowed for. */
function separationOf(cell: Cell, { from, to, sigmaHz }: { from: number; to: number; sigmaHz: number }): number {
  const step = wrapped(2 * Math.PI * (from - to) * symbolS(cell));
  const stepSigma = 2 * Math.PI * sigmaHz * symbolS(cell);
  let information = 0;
  for (const { fit } of cell.blocks) {
    const weights = fit.phaseVariances.map((variance) => 1 / (variance + OTHER_PHASE ** 2));
    const whole = weights.reduce((sum, w) => sum + w, 0);
    const mean = weights.reduce((sum, w, l) => sum + w * l, 0) / whole;
    information += weights.reduce((sum, w, l) => sum + w * (l - mean) ** 2, 0);
  }
  return Math.abs(step) / Math.sqrt(1 / information + stepSigma ** 2);
}
