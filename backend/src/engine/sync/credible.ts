import { welch } from '../spectrum/welch.js';
import { periodOf } from './hypotheses.js';
import { lagSums } from './lag-sums.js';
import { template } from './match.js';
import type { Prepared } from './prepare.js';
import { rescore, type Scored } from './score.js';

/**
 * Evidence from which on OFDM is claimed. Chance reaches a score of u at one of the placings
 * with a probability of about exp(−u); with some 60 listed and 30,000 free hypotheses in a
 * window these limits leave under one false claim in 10,000 windows of noise. Bursts add the
 * scatter of a sum of maxima (a Gumbel variate's standard deviation is 1.28).
 */
const LISTED = 16;
const FREE = 24;
const PER_BURST = 1.28 * 5;

/** |x|⁴ over (|x|²)²: 2 for a Gaussian signal, as any OFDM nearly is; 1 for a carrier with angle modulation only. */
export const LEAST_KURTOSIS = 1.5;
/** Off the right lag by more than the band's correlation time a prefix is gone; a tone, a sweep or a line is not. */
const BESIDE = 0.5;
const MOST_PEAK_SHARE = 0.9;
/** Correlation cannot exceed power, but for scatter. */
const MOST_RHO = 1.25;
const MOST_UNEVEN = 1.7;
/** One resource block is 12; a pulse or a tone spans one or two. */
const FEWEST_SUBCARRIERS = 6;
/** All of an OFDM signal repeats in its prefix, so that this is S / (S + N), less where two numerologies share the window. */
const LEAST_RHO = 0.08;
const LEAST_FREE_RHO = 0.15;

export interface Credibility {
  readonly credible: boolean;
  readonly reason: string | null;
}

export function credibility(window: Prepared, scored: Scored): Credibility {
  const spans = scored.spans.apart ? scored.spans.blocks.length : 1;
  const need = (scored.hypothesis.family === 'free' ? FREE : LISTED) + PER_BURST * (Math.sqrt(spans) - 1);
  if (!scored.best || !(scored.score > need)) return no(`evidence ${scored.score.toFixed(1)} below ${need.toFixed(1)}`);
  if (scored.best.match.peakShare > MOST_PEAK_SHARE) return no('one tone in the products');
  if (!evenPower(window, scored)) return no('the power follows the symbol, as in pulses');
  if (kurtosis(window) < LEAST_KURTOSIS) return no('the envelope is too constant for OFDM');
  const bandwidth = effectiveBandwidth(window);
  if (bandwidth * scored.hypothesis.usefulS < FEWEST_SUBCARRIERS) return no('the band is too narrow for several subcarriers');
  if (scored.rho < (scored.hypothesis.family === 'free' ? LEAST_FREE_RHO : LEAST_RHO)) return no('too little of the signal repeats');
  if (isSpread(window, scored)) return no('the symbols show at many lags, as those of a spread carrier do');
  const besides = beside(window, scored, bandwidth);
  if (besides > BESIDE) return no('the correlation does not belong to one lag');
  return { credible: true, reason: null };
}

function no(reason: string): Credibility {
  return { credible: false, reason };
}

export function kurtosis({ iq, on }: Prepared): number {
  let second = 0;
  let fourth = 0;
  let count = 0;
  for (const { start, end } of on) {
    for (let i = 2 * start; i < Math.min(iq.length, 2 * end); i += 2) {
      const p = iq[i] * iq[i] + iq[i + 1] * iq[i + 1];
      second += p;
      fourth += p * p;
      count++;
    }
  }
  return second > 0 ? (fourth * count) / (second * second) : 2;
}

/** A prefix is as strong as the rest of its symbol; pulses that recur are not. */
function evenPower(window: Prepared, { best, sums, hypothesis, rho, spans }: Scored): boolean {
  if (!best || rho > MOST_RHO) return false;
  const bins = 256;
  const period = (periodOf(hypothesis) * window.rateHz) / sums.hop;
  const mask = template(hypothesis, bins);
  let inside = 0;
  let insideWeight = 0;
  let all = 0;
  const { from, to } = spans.apart ? best.span : { from: 0, to: sums.power.length };
  for (let b = from; b < to; b++) {
    const turns = (b + 0.5 - best.origin) / period - best.match.phase;
    const weight = mask[Math.floor((turns - Math.floor(turns)) * bins)];
    inside += weight * sums.power[b];
    insideWeight += weight;
    all += sums.power[b];
  }
  const ratio = (inside / insideWeight) / (all / (to - from));
  return ratio > 1 / MOST_UNEVEN && ratio < MOST_UNEVEN;
}

/** Useful symbols this short are as long as the symbols of spread carriers, 11 chips in 1 us (IEEE 802.11 clause 15). */
const SPREAD_S = 5e-6;
/** Parts of the lag, away from the simple fractions at which pilots on every third or fourth subcarrier repeat. */
const ELSEWHERE = [0.083, 0.21, 0.417, 0.583, 0.79, 0.917];
/** Part of the score, and what chance reaches at one of so few lags less than once in ten thousand windows. */
const MOST_ELSEWHERE = 0.1;
const CHANCE_ELSEWHERE = 12;

/** Chips of one data symbol resemble each other at every lag within it, at the symbol rate; an OFDM symbol repeats at one. */
function isSpread(window: Prepared, scored: Scored): boolean {
  const { hypothesis, sums } = scored;
  if (hypothesis.family !== 'free' || hypothesis.usefulS > SPREAD_S) return false;
  const scores = ELSEWHERE.map((part) => rescore({ sums: lagSums(window, Math.max(2, part * sums.lag), sums.hop), rateHz: window.rateHz }, scored).score);
  return scores.filter((score) => score > Math.max(CHANCE_ELSEWHERE, MOST_ELSEWHERE * scored.score)).length >= ELSEWHERE.length / 2;
}

/**
 * The greater score at the two lags beside, over the score itself; the least of three distances,
 * since a carrier of which few blocks are in use correlates over a longer time than its band says.
 */
function beside(window: Prepared, scored: Scored, bandwidthHz: number): number {
  const unit = window.rateHz / bandwidthHz;
  let least = Infinity;
  for (const distance of [1.6, 3.2, 6.4].map((f) => Math.max(2, Math.round(f * unit)))) {
    const scores = [-distance, distance].map((d) => {
      const sums = lagSums(window, Math.round(scored.sums.lag) + d, scored.sums.hop);
      return rescore({ sums, rateHz: window.rateHz }, scored).score;
    });
    least = Math.min(least, Math.max(...scores) / scored.score);
    if (least < BESIDE || distance > 0.25 * scored.sums.lag) break;
  }
  return least;
}

/** (∫S)² / ∫S² of the power above the floor, Hz: its reciprocal is the correlation time. */
function effectiveBandwidth({ iq, rateHz, bandHz }: Prepared): number {
  const { power, binHz } = welch(iq, rateHz, { size: 256, most: 200 });
  const floor = Float64Array.from(power).sort()[Math.floor(power.length / 20)];
  let sum = 0;
  let squares = 0;
  for (const p of power) {
    const s = Math.max(0, p - floor);
    sum += s;
    squares += s * s;
  }
  return squares > 0 ? Math.min(bandHz, ((sum * sum) / squares) * binHz) : bandHz;
}
