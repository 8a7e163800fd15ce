import type { Curve } from '#shared/decode';
import { activity } from '../level/activity.js';
import { chooseWindows, isSameLevel, readWindow } from '../level/windows.js';
import { spectrumOf } from '../spectrum/spectrum.js';
import type { BlindOfdm, SampleSource, SymbolGrid, Window } from '../types.js';
import { decibels, meanPower } from '../vector/power.js';
import { choose, type Choice } from './choose.js';
import { credibility } from './credible.js';
import { lagCurve, symbolCurve } from './curves.js';
import { prepare, type Prepared, type Stretch } from './prepare.js';
import { rank, type LagGroup, type Ranking } from './rank.js';
import { refine, type Refined } from './refine.js';

export interface EstimateOptions {
  /** Signal-on stretches in samples of the capture; left out: found by level. */
  readonly segments?: readonly Stretch[];
  /** Edges of what is on the air, Hz against the capture's zero; left out: found in the spectrum. */
  readonly occupied?: { readonly lowHz: number; readonly highHz: number } | null;
  /** Further windows at most, when the first says nothing; default 3. */
  readonly further?: number;
}

export interface BlindEstimate extends BlindOfdm {
  /** Every how many symbols a longer prefix stands: 7·2^µ tells a numerology whatever the rate label; null where all are equal or it cannot be told. */
  readonly longPrefixEvery: number | null;
  /** True where only synchronisation blocks may have been seen, whose spacing need not be the data's. */
  readonly blocksOnly: boolean;
  readonly alongSymbol: Curve | null;
}

export interface BlindResult {
  readonly found: BlindEstimate | null;
  /** Correlation against lag, for the plot, found or not. */
  readonly prefixCorrelation: Curve | null;
  /** Why nothing is claimed; null where something is. */
  readonly reason: string | null;
}

/** Spacing, prefix, symbol grid and fractional offset of any OFDM, or null where the window holds none. */
export function estimateOfdm(source: SampleSource, options: EstimateOptions = {}): BlindEstimate | null {
  return analyseOfdm(source, options).found;
}

/** As `estimateOfdm`, with the plot and the reason. Looks at the first 20 ms (of a narrow band, more), and further where those say nothing. */
export function analyseOfdm(source: SampleSource, options: EstimateOptions = {}): BlindResult {
  let first: BlindResult | null = null;
  const windowS = lengthFor(source, options.occupied ?? null);
  let level = 0;
  for (const start of chooseWindows(source, { windowS, further: options.further ?? 3 })) {
    const window = readWindow(source, start, windowS);
    const here = meanPower(window.iq);
    if (first && isSameLevel(level, here)) continue;
    const result = analyseWindow(window, options);
    if (result.found) return result;
    if (!first) [first, level] = [result, here];
  }
  return first ?? { found: null, prefixCorrelation: null, reason: 'the capture is empty' };
}

const FEWEST_SAMPLES = 512;
/** Independent samples of the signal that a window should hold, and how long and large it may grow for that. */
const WANTED = 20_000;
const LONGEST_S = 0.25;
const MOST_SAMPLES = 4e6;

/** 20 ms, or longer where a narrow band shows little in them. */
function lengthFor({ sampleRateHz }: SampleSource, occupied: EstimateOptions['occupied']): number {
  const widthHz = occupied ? occupied.highHz - occupied.lowHz : sampleRateHz;
  return Math.max(0.02, Math.min(WANTED / widthHz, LONGEST_S, MOST_SAMPLES / sampleRateHz));
}

export function analyseWindow(window: Window, options: EstimateOptions = {}): BlindResult {
  if (window.iq.length < 2 * FEWEST_SAMPLES) return { found: null, prefixCorrelation: null, reason: 'too few samples' };
  const prepared = prepare(window, { occupied: bandOf(window, options), on: onOf(window, options) });
  const ranking = rank(prepared);
  if (ranking.groups.length === 0) return { found: null, prefixCorrelation: null, reason: 'too short for any symbol' };
  const { choice, reason } = credibleChoice(prepared, ranking);
  if (!choice) return { found: null, prefixCorrelation: lagCurve(ranking.lags, null), reason };
  const refined = refine(prepared, choice.chosen);
  return { found: toEstimate(prepared, { ranking, choice, refined }), prefixCorrelation: lagCurve(ranking.lags, choice.chosen.hypothesis), reason: null };
}

/** How many lags are looked at before nothing is claimed. */
const TRIED = 4;
const WORTH = 20;

/**
 * The best lag, or a listed one behind it, that stands up to every test: reference signals alone
 * can be strongest at a lag that is no useful symbol. A free lag behind others is not trusted: a
 * sweep has many.
 */
function credibleChoice(window: Prepared, { groups }: Ranking): { choice: Choice | null; reason: string | null } {
  let first: string | null = null;
  for (let skip = 0; skip < Math.min(TRIED, groups.length); skip++) {
    if (skip > 0 && (groups[skip].chosen.score < WORTH || groups[skip].chosen.hypothesis.family === 'free')) continue;
    const choice = choose(groups.slice(skip), window.rateHz);
    const { credible, reason } = credibility(window, choice.chosen);
    if (credible) return { choice, reason: null };
    first ??= reason;
  }
  return { choice: null, reason: first };
}

function bandOf(window: Window, { occupied }: EstimateOptions): { lowHz: number; highHz: number } | null {
  return occupied === undefined ? spectrumOf(window.iq, window.sampleRateHz).occupied : occupied;
}

function onOf(window: Window, { segments, occupied }: EstimateOptions): Stretch[] {
  const samples = window.iq.length >> 1;
  if (segments) {
    const { startSample } = window;
    const inside = segments.map((s) => ({ start: Math.max(0, s.start - startSample), end: Math.min(samples, s.end - startSample) }));
    return inside.filter((s) => s.end > s.start);
  }
  const bandwidthHz = occupied ? occupied.highHz - occupied.lowHz : undefined;
  return [...activity(window.iq, window.sampleRateHz, { bandwidthHz }).segments];
}

interface Findings { ranking: Ranking; choice: Choice; refined: Refined }

function toEstimate(window: Prepared, { ranking, choice, refined }: Findings): BlindEstimate {
  const { hypothesis } = refined.scored;
  return {
    subcarrierSpacingHz: hypothesis.subcarrierSpacingHz,
    cyclicPrefix: hypothesis.family === 'cellular' && isTabled(hypothesis.subcarrierSpacingHz) ? hypothesis.cyclicPrefix : null,
    cyclicPrefixS: hypothesis.cyclicPrefixS,
    confidence: confidenceOf(ranking.groups, choice),
    grid: gridOf(window, refined),
    snrDb: snrDb(window, refined),
    candidates: candidatesOf(ranking.groups),
    longPrefixEvery: hypothesis.longEvery,
    blocksOnly: choice.blocksOnly,
    alongSymbol: symbolCurve(refined.scored, window.rateHz, refined.start),
  };
}

function isTabled(spacingHz: number): boolean {
  const mu = Math.log2(spacingHz / 15e3);
  return Math.abs(mu - Math.round(mu)) < 1e-6;
}

/** In the occupied band: the working band holds noise beside the signal's. */
function snrDb({ rateHz, bandHz }: Prepared, { snr }: Refined): number | null {
  return snr === null ? null : decibels((snr * rateHz) / bandHz);
}

function gridOf({ rateHz, decimation, centreHz, startSample }: Prepared, { scored, start, residueHz }: Refined): SymbolGrid {
  const { hypothesis } = scored;
  const rate = rateHz * decimation;
  const spacing = hypothesis.subcarrierSpacingHz;
  const reference = residueHz + centreHz;
  return {
    startSample: startSample + start * decimation,
    usefulSamples: hypothesis.usefulS * rate,
    prefixSamples: hypothesis.prefixesS.map((p) => p * rate),
    subcarrierSpacingHz: spacing,
    referenceHz: reference - spacing * Math.round(reference / spacing),
    placed: false,
  };
}

/** Against chance, against the next lag, and against the next prefix at the same lag. */
function confidenceOf(groups: readonly LagGroup[], { chosen, group, blocksOnly }: Choice): number {
  const chance = Math.min(1, 3e4 * Math.exp(-Math.max(0, chosen.score)));
  const next = groups.find((g) => g !== group);
  const otherLag = next ? Math.max(0, next.merit) / Math.max(1e-9, Math.abs(group.merit)) : 0;
  const prefixes = group.scored.filter((s) => Math.abs(s.hypothesis.cyclicPrefixS / chosen.hypothesis.cyclicPrefixS - 1) > 0.1);
  const otherPrefix = prefixes.length > 0 ? Math.exp(Math.min(0, Math.max(...prefixes.map((s) => s.score)) - chosen.score)) : 0;
  const doubt = chance + 0.15 * Math.min(1, otherLag) ** 2 + 0.5 * otherPrefix + (blocksOnly ? 0.3 : 0);
  return Math.min(0.999, Math.max(0.05, 1 - doubt));
}

function candidatesOf(groups: readonly LagGroup[]): BlindOfdm['candidates'] {
  return groups.flatMap((g) => g.scored)
    .sort((a, b) => b.score - a.score)
    .slice(0, 24)
    .map(({ hypothesis, score }) => ({
      subcarrierSpacingHz: hypothesis.subcarrierSpacingHz, cyclicPrefixS: hypothesis.cyclicPrefixS, label: hypothesis.label, score,
    }));
}
