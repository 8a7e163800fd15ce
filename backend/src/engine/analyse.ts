import type { AirValue, CaptureFacts, Plots } from '#shared/decode';
import { betweenGaps } from './evidence/between-gaps.js';
import { complete } from './evidence/air-values.js';
import { airFrom } from './evidence/air-from-look.js';
import { readThroughDoubt, type ChangedLabel, type Doubted } from './evidence/doubt.js';
import type { Look } from './evidence/look.js';
import type { Recording } from './evidence/recording.js';
import { findGap, type Gap } from './evidence/sample-gaps.js';
import { declaredPatterns, type SidedPattern } from './evidence/declared-patterns.js';
import type { TddPattern } from './evidence/tdd-levels.js';
import { levelFacts } from './level/front-end.js';
import { demodulations } from './plots/demodulations.js';
import { errorOfData, plotsOf } from './plots/plots.js';
import type { LevelFacts, Tried } from './types.js';

/** What one side declares of the signal; null where it is silent. */
export interface DeclaredSettings {
  readonly technology: string | null;
  readonly subcarrierSpacingHz: number | null;
  readonly cyclicPrefix: string | null;
  readonly guardIntervalS: number | null;
  readonly fftSize: number | null;
  readonly carrierFrequencyHz: number | null;
  readonly tddPattern: TddPattern | null;
}

export interface AnalyseOptions {
  readonly declared: { readonly a: DeclaredSettings | null; readonly b: DeclaredSettings | null };
  readonly onProgress?: ((step: string, fraction: number) => void) | undefined;
}

export interface Analysis {
  readonly facts: CaptureFacts;
  readonly air: Record<string, AirValue>;
  readonly announced: Readonly<Record<string, string | number | boolean>>;
  readonly labels: readonly ChangedLabel[];
  readonly gaps: Gap | null;
  readonly patterns: readonly SidedPattern[];
  readonly tried: readonly Tried[];
  readonly plots: Plots;
}

/**
 * Samples in, evidence out: read (through doubt of the label), measure, hold the declared settings
 * against what was read, and draw. No declared value enters `air`.
 */
export function analyse(recording: Recording, given: AnalyseOptions): Analysis {
  const options = { ...given, onProgress: forwards(given.onProgress) };
  options.onProgress('reading', 0.02);
  const doubted = readThroughDoubt(recording, options);
  const gaps = gapsIn(recording, doubted.look);
  const look = betweenGaps(doubted.look, gaps, options);
  const level = levelFacts(doubted.look.raw.iq);
  const measured = airFrom(look, level);
  const demodulated = demodulations(look, measured, options);
  const air = complete(measured['evmPercent']?.value == null ? { ...measured, ...errorOfData(demodulated) } : measured);
  // Across a loss of samples the frame's start is not where it was: levels say nothing of a pattern.
  const patterns = gaps && look === doubted.look ? [] : declaredPatterns(look, options.declared);
  const plots = plotsOf(look, demodulated);
  return {
    facts: factsOf(recording, doubted, level),
    air,
    announced: look.choice.finding?.announced ?? {},
    labels: doubted.labels,
    gaps,
    patterns,
    tried: doubted.tried,
    plots,
  };
}

/** Steps as they are first reached: a second reading under another label is no step back. */
function forwards(onProgress: AnalyseOptions['onProgress']): (step: string, fraction: number) => void {
  const behind = new Set<string>();
  let current: string | null = null;
  return (step, fraction) => {
    if (step !== current && behind.has(step)) return;
    behind.add(step);
    current = step;
    onProgress?.(step, fraction);
  };
}

/** The label as it stands, with the level of what was read. */
function factsOf(recording: Recording, { labels, look }: Doubted, level: LevelFacts): CaptureFacts {
  const found = labels.some((label) => label.property === 'format') ? { samples: look.source.samples, durationS: look.source.samples / look.source.sampleRateHz } : {};
  return { ...recording.facts, ...found, rmsDbfs: Math.round(level.rmsDbfs * 100) / 100, clippedFraction: level.clippedFraction };
}

/** What the recorder says is missing, else what the symbols' timing shows. */
function gapsIn(recording: Recording, look: Look): Gap | null {
  const [first] = recording.announcedGaps;
  if (first) {
    return { atSample: first.atSample, lostSamples: first.missing, count: recording.announcedGaps.length, places: recording.announcedGaps.map((g) => g.atSample), confidence: 0.97, proof: 'the recorder\'s own count of samples jumps (core:global_index)' };
  }
  const grid = look.choice.finding?.grid ?? look.blind?.grid ?? null;
  return grid === null || look.choice.technology === 'wifi' || look.choice.technology === null ? null : findGap(look.window, grid);
}
