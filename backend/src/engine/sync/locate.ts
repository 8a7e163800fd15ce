import type { SymbolGrid } from '../types.js';
import type { Hypothesis } from './hypotheses.js';
import { periodOf } from './hypotheses.js';
import { lagSums } from './lag-sums.js';
import type { Prepared } from './prepare.js';
import { refine } from './refine.js';
import { scoreBursts, scoreCoherent, stretchOf, type Scored } from './score.js';

/** Evidence from which on the timing that a pattern finds for itself is trusted over a borrowed one. */
const OWN = 12;
const MOST_BLOCKS = 140_000;

/**
 * The symbol grid of a pattern in a window: by its own prefixes where they show, else from the
 * start and the frequency of a grid that is known. Null where the window is shorter than a period.
 */
export function locate(window: Prepared, pattern: Hypothesis, known: SymbolGrid | null): SymbolGrid | null {
  if (known && sameAs(window, known, pattern)) return known;
  const lag = pattern.usefulS * window.rateHz;
  const rate = window.rateHz * window.decimation;
  if (lag * 3 > window.iq.length >> 1) return null;
  const own = scoredAlone(window, pattern, lag);
  if (own && own.score > OWN) {
    const { start, residueHz } = refine(window, own);
    return gridAt(pattern, { rate, startSample: window.startSample + start * window.decimation, referenceHz: residueHz + window.centreHz });
  }
  return gridAt(pattern, { rate, startSample: known?.startSample ?? window.startSample, referenceHz: known?.referenceHz ?? 0 });
}

function scoredAlone(window: Prepared, pattern: Hypothesis, lag: number): Scored | null {
  const hop = Math.max(1, Math.floor(lag / 64));
  const sums = lagSums(window, lag, hop);
  if (sums.re.length < 64) return null;
  const products = { sums, rateHz: window.rateHz };
  const whole = scoreCoherent(products, pattern, stretchOf(sums, [{ from: 0, to: Math.min(sums.re.length, MOST_BLOCKS) }]));
  const spans = window.on.map(({ start, end }) => ({ from: Math.max(0, Math.ceil(start / hop)), to: Math.min(sums.re.length, Math.floor((end - lag) / hop)) }))
    .filter((s) => s.to - s.from > (periodOf(pattern) * window.rateHz) / hop)
    .sort((a, b) => b.to - b.from - (a.to - a.from)).slice(0, 1);
  if (spans.length === 0) return whole;
  const burst = scoreBursts(products, pattern, spans.map((s) => stretchOf(sums, [s])));
  return burst.score > whole.score ? burst : whole;
}

function sameAs({ rateHz, decimation }: Prepared, grid: SymbolGrid, pattern: Hypothesis): boolean {
  const rate = rateHz * decimation;
  const shortest = Math.min(...grid.prefixSamples) / rate;
  return Math.abs(grid.usefulSamples / rate / pattern.usefulS - 1) < 1e-4 && Math.abs(shortest / pattern.cyclicPrefixS - 1) < 0.03;
}

function gridAt(pattern: Hypothesis, { rate, startSample, referenceHz }: { rate: number; startSample: number; referenceHz: number }): SymbolGrid {
  const spacing = pattern.subcarrierSpacingHz;
  return {
    startSample, usefulSamples: pattern.usefulS * rate, prefixSamples: pattern.prefixesS.map((p) => p * rate), subcarrierSpacingHz: spacing,
    referenceHz: referenceHz - spacing * Math.round(referenceHz / spacing), placed: false,
  };
}
