import { fold } from './fold.js';
import { periodOf, type Hypothesis } from './hypotheses.js';
import { template } from './match.js';
import type { LagGroup } from './rank.js';
import { stretchOf, type Scored } from './score.js';

/** What the carrier's data use, and why where it is not simply the strongest. */
export interface Choice {
  readonly chosen: Scored;
  readonly group: LagGroup;
  /** True where all that was seen may be synchronisation blocks, whose spacing need not be the data's. */
  readonly blocksOnly: boolean;
}

/** Evidence from which on a second spacing on the same carrier counts as there. */
const PRESENT = 20;
const ALIKE = 0.3;

/**
 * A cellular carrier may hold synchronisation blocks of another spacing than its data's (TS
 * 38.211 clause 7.4.3.1): 60 kHz is never a block's, 240 kHz never the data's; of two others
 * the one that never uses the symbols between blocks is the blocks'.
 */
export function choose(groups: readonly LagGroup[], rateHz: number): Choice {
  const first = groups[0];
  const here = groups.filter((g) => g === first || (isCellular(g) && g.chosen.score > PRESENT && g.chosen.likeness > ALIKE));
  if (!isCellular(first)) return { chosen: wifiData(groups).chosen, group: wifiData(groups), blocksOnly: false };
  const spacing = (g: LagGroup) => g.chosen.hypothesis.subcarrierSpacingHz;
  const sixty = here.find((g) => spacing(g) === 60e3);
  if (sixty && spacing(first) !== 60e3) return { chosen: sixty.chosen, group: sixty, blocksOnly: false };
  const data = here.filter((g) => spacing(g) !== 240e3 && !onlyBlocks(g.chosen, rateHz));
  const group = data[0] ?? here.find((g) => spacing(g) !== 240e3) ?? first;
  return { chosen: group.chosen, group, blocksOnly: data.length === 0 };
}

function isCellular(group: LagGroup): boolean {
  return group.chosen.hypothesis.family === 'cellular' && group.chosen.best !== null;
}

/** A frame with 78.125 kHz data begins with 312.5 kHz training and signalling symbols (802.11ax): the data's spacing counts. */
function wifiData(groups: readonly LagGroup[]): LagGroup {
  const [first] = groups;
  if (first.chosen.hypothesis.family !== 'wifi' || first.chosen.hypothesis.usefulS > 4e-6) return first;
  const data = groups.find((g) => g.chosen.hypothesis.family === 'wifi' && g.chosen.hypothesis.usefulS > 12e-6 && g.chosen.score > PRESENT);
  return data ?? first;
}

/** First and last symbols of a slot, which no synchronisation block reaches (TS 38.213 clause 4.1), by spacing. */
function betweenBlocks(hypothesis: Hypothesis): number[] {
  if (hypothesis.cyclicPrefix !== 'normal') return [];
  if (hypothesis.subcarrierSpacingHz === 15e3) return [0, 6];
  if (hypothesis.subcarrierSpacingHz === 30e3) return [0, 1, 12, 13];
  // 120 kHz, case D: symbols 4 to 11 of even slots and 2 to 9 of odd ones.
  if (hypothesis.subcarrierSpacingHz === 120e3) return [0, 1, 2, 3].flatMap((slot) => [0, 1, 12, 13].map((l) => 14 * slot + l));
  return [];
}

function onlyBlocks(scored: Scored, rateHz: number): boolean {
  const between = betweenBlocks(scored.hypothesis);
  if (between.length === 0) return false;
  const symbols = symbolStrengths(scored, rateHz);
  if (!symbols) return false;
  const outside = mean(between.map((l) => symbols[l]));
  return outside < 0.15 * mean(symbols);
}

/** Prefix correlation of each symbol of the period, in phase with their mean. */
export function symbolStrengths(scored: Scored, rateHz: number): number[] | null {
  const { hypothesis, sums, best, spans } = scored;
  if (!best) return null;
  const period = (periodOf(hypothesis) * rateHz) / sums.hop;
  const folded = fold(sums, { period, spans: spans.blocks, spectrum: stretchOf(sums, spans.blocks).spectrum });
  if (!folded) return null;
  const angle = Math.atan2(best.match.im, best.match.re);
  const mask = template({ ...hypothesis, prefixesS: hypothesis.prefixesS }, folded.bins);
  return strengthsAlong(folded.profile, { mask, angle, hypothesis, phase: best.match.phase });
}

interface Along { mask: Float64Array; angle: number; hypothesis: Hypothesis; phase: number }

function strengthsAlong(profile: Float64Array, { mask, angle, hypothesis, phase }: Along): number[] {
  const bins = mask.length;
  const shift = Math.round(phase * bins);
  const scale = bins / periodOf(hypothesis);
  const level = mean(Array.from(mask, (_, b) => inPhase(profile, b, angle)));
  let at = 0;
  return hypothesis.prefixesS.map((prefix) => {
    const from = Math.floor(at * scale);
    const to = Math.max(from + 1, Math.ceil((at + prefix) * scale));
    at += prefix + hypothesis.usefulS;
    let sum = 0;
    for (let b = from; b < to; b++) sum += mask[b % bins] * (inPhase(profile, (b + shift) % bins, angle) - level);
    return sum / Math.max(1e-12, prefix * scale);
  });
}

function inPhase(profile: Float64Array, bin: number, angle: number): number {
  return profile[2 * bin] * Math.cos(angle) + profile[2 * bin + 1] * Math.sin(angle);
}

function mean(values: readonly number[]): number {
  return values.reduce((a, b) => a + b, 0) / values.length;
}
