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
  /**
   * SS_REF as the phases between the symbols give it, under the law that holds (under both, where
   * they say nearly the same): far sharper than from inside the symbols. Null where neither fits.
   */
  readonly reference: FrequencyEstimate | null;
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
/** Offsets tried: this many standard deviations each way, in this many steps. */
const REACH = 3.5;
const STEPS = 40;
/** Share from which one law of a set is taken for certain. */
const SURE_LAW = 0.99;
/** Natural logarithm of the odds from which one law is believed. */
const ODDS = 2;
/** By so much (χ², scaled to the scatter found) a law may fit worse than the best slope of all. */
const WORST_FIT = 25;
/** Slopes tried around the circle, and steps between two of them. */
const SLOPES = 256;
const FINER = 8;

/** Compares the two explanations over all blocks; `null` with a reason where they cannot be told apart or neither fits. */
export function judgePhases(cell: Cell, question: PhaseQuestion): PhaseCompensation {
  if (question.present.length === 0 || question.absent.length === 0) {
    return { value: null, confidence: 0, separation: 0, reason: 'neither the tuner’s frequency nor the carrier’s place is known', reference: null };
  }
  const sigmaHz = Math.hypot(1.2 * question.reference.sigmaHz, DOPPLER_HZ);
  const driftHz = question.reference.hz - cell.gridHz;
  const present = explain(cell, question.present, { driftHz, sigmaHz });
  const absent = explain(cell, question.absent, { driftHz, sigmaHz });
  const better = present.logLikelihood > absent.logLikelihood ? present : absent;
  // Phase noise and fading scatter the phases about whatever slope they have: what no slope explains is no law's fault.
  const freest = bestSlopeMisfit(cell);
  const scale = Math.max(1, freest / Math.max(1, cell.blocks.length * (BLOCK_SYMBOLS - 1) - 1));
  const fits = (better.misfit - freest) / scale <= WORST_FIT;
  const single = question.present.length === 1 && question.absent.length === 1;
  const odds = Math.abs(present.logLikelihood - absent.logLikelihood) / scale;
  const separation = single ? separationOf(cell, { from: present.hz, to: absent.hz, sigmaHz }) / Math.sqrt(scale) : Math.sqrt(2 * odds);
  const verdict = { confidence: 1 / (1 + Math.exp(-Math.min(odds, 9))), separation };
  const reference = (law: Explanation) => (law.share > SURE_LAW ? { hz: question.reference.hz + law.offset.hz, sigmaHz: law.offset.sigmaHz } : null);
  if (single && separation < SIGMAS) {
    const reason = `the phases with and without compensation lie ${separation.toFixed(1)} standard deviations apart at this carrier frequency`;
    return { ...verdict, value: null, reason, reference: fits ? reference(better) : null };
  }
  if (!fits) {
    return { ...verdict, value: null, reason: 'the symbols’ phases follow neither law: the compensation may be made for another carrier frequency', reference: null };
  }
  if (odds < ODDS) return { ...verdict, value: null, reason: 'the symbols’ phases fit both laws about equally well', reference: null };
  return { ...verdict, value: better === present ? 'present' : 'absent', reason: null, reference: reference(better) };
}

interface Explanation {
  readonly logLikelihood: number;
  /** χ² of the best law and offset, the prior's part included. */
  readonly misfit: number;
  readonly hz: number;
  /** Probability of the best law among its set: a neighbour of the right carrier would drag the offset along. */
  readonly share: number;
  /** Of SS_REF beside where it was taken to be. */
  readonly offset: FrequencyEstimate;
}

/** Likelihood of the phases under a set of laws, the frequency's error integrated over its own uncertainty. */
function explain(cell: Cell, laws: PhaseLaws, { driftHz, sigmaHz }: { driftHz: number; sigmaHz: number }): Explanation {
  const terms: { log: number; misfit: number; hz: number; offsetHz: number }[] = [];
  for (const law of laws) {
    for (let step = -STEPS; step <= STEPS; step++) {
      const x = (REACH * step) / STEPS;
      const misfit = misfitOf(cell, law.hz + driftHz + x * sigmaHz) + x * x;
      terms.push({ log: Math.log(law.weight) - misfit / 2, misfit, hz: law.hz, offsetHz: x * sigmaHz });
    }
  }
  const top = terms.reduce((a, b) => (b.log > a.log ? b : a));
  const sum = terms.reduce((total, term) => total + Math.exp(term.log - top.log), 0);
  const own = terms.filter((term) => term.hz === top.hz).map((term) => ({ ...term, weight: Math.exp(term.log - top.log) }));
  const ownSum = own.reduce((total, term) => total + term.weight, 0);
  const mean = own.reduce((total, term) => total + term.weight * term.offsetHz, 0) / ownSum;
  const variance = own.reduce((total, term) => total + term.weight * (term.offsetHz - mean) ** 2, 0) / ownSum;
  const norm = Math.log(laws.reduce((total, law) => total + law.weight, 0)) + Math.log(2 * STEPS + 1);
  const gridStepHz = (REACH * sigmaHz) / STEPS;
  return {
    logLikelihood: top.log + Math.log(sum) - norm,
    misfit: top.misfit,
    hz: top.hz,
    share: ownSum / sum,
    offset: { hz: mean, sigmaHz: Math.sqrt(variance + gridStepHz ** 2 / 12) },
  };
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

/** χ² under the best of all slopes, whatever would cause it. */
function bestSlopeMisfit(cell: Cell): number {
  const step = 1 / (SLOPES * symbolS(cell));
  const at = (from: number, by: number, count: number) => Array.from({ length: count }, (_, i) => ({ hz: from + i * by, misfit: misfitOf(cell, from + i * by) })).reduce((a, b) => (b.misfit < a.misfit ? b : a));
  const coarse = at(0, step, SLOPES);
  return at(coarse.hz - step, step / FINER, 2 * FINER + 1).misfit;
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
