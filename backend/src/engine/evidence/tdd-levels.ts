import type { Window } from '../types.js';

/** A downlink-uplink pattern of TS 38.213 clause 11.1, counted in slots of `referenceSpacingHz`. */
export interface TddPattern {
  readonly periodS: number;
  readonly downlinkSlots: number;
  readonly downlinkSymbols: number;
  readonly uplinkSlots: number;
  readonly uplinkSymbols: number;
  readonly referenceSpacingHz: number;
}

/** Level of every symbol of a frame-timed capture: on or off, and where it stands. */
export interface SymbolLevels {
  readonly spacingHz: number;
  /** 14, or 12 with the extended prefix. */
  readonly symbolsPerSlot: number;
  /** Index of each symbol, counted from a frame's start; may begin after 0. */
  readonly indices: readonly number[];
  readonly on: readonly boolean[];
  /** How far apart the two levels lie, dB; 0 where the signal never pauses. */
  readonly contrastDb: number;
  /** False where signal and pause could not be told apart: then nothing speaks for or against a pattern. */
  readonly decided: boolean;
}

/** Symbols of a slot (TS 38.211 Tables 4.3.2-1 and 4.3.2-2). */
const NORMAL = 14;
const EXTENDED_HZ = 60e3;
/** Less between the two levels is fading or load, not a pause. */
const LEAST_CONTRAST_DB = 6;

export interface Frame {
  /** Start of a frame, in samples of the window's rate from the capture's start. */
  readonly startSample: number;
  readonly spacingHz: number;
  readonly symbolsPerSlot: number;
  /** Power of the noise alone within the window's band; null where it is not known. */
  readonly noisePower: number | null;
}

/** Splits the window into symbols from a frame's start on and decides which are on. */
export function symbolLevels(window: Window, frame: Frame): SymbolLevels {
  const symbolS = (15e3 / frame.spacingHz) * (1e-3 / frame.symbolsPerSlot);
  const first = Math.ceil((window.startSample - frame.startSample) / (symbolS * window.sampleRateHz));
  const indices: number[] = [];
  const levels: number[] = [];
  for (let k = first; ; k += 1) {
    const from = frame.startSample + (k + 0.15) * symbolS * window.sampleRateHz - window.startSample;
    const to = from + 0.7 * symbolS * window.sampleRateHz;
    if (2 * Math.ceil(to) >= window.iq.length) break;
    if (from < 0) continue;
    indices.push(k);
    levels.push(power(window.iq, Math.floor(from), Math.floor(to)));
  }
  return { spacingHz: frame.spacingHz, symbolsPerSlot: frame.symbolsPerSlot, indices, ...onOrOff(levels, frame.noisePower) };
}

function power(iq: Float32Array, from: number, to: number): number {
  let sum = 0;
  for (let i = 2 * from; i < 2 * to; i += 1) sum += iq[i]! * iq[i]!;
  return sum / Math.max(1, to - from);
}

/** Two levels, low and high, and which symbols stand clear of the pauses' own scatter. */
function onOrOff(levels: readonly number[], noisePower: number | null): Pick<SymbolLevels, 'on' | 'contrastDb' | 'decided'> {
  const db = levels.map((level) => 10 * Math.log10(Math.max(level, 1e-20)));
  const sorted = [...db].sort((a, b) => a - b);
  const low = sorted[Math.floor(0.02 * sorted.length)] ?? 0;
  const high = sorted[Math.floor(0.9 * sorted.length)] ?? 0;
  const contrastDb = high - low;
  const aboveNoise = noisePower === null ? 0 : high - 10 * Math.log10(noisePower);
  // Never a pause: known only where the noise alone would be seen to be lower.
  if (contrastDb < LEAST_CONTRAST_DB) return { on: db.map(() => true), contrastDb: 0, decided: aboveNoise > LEAST_CONTRAST_DB + 2 };
  const threshold = low + Math.max(3, contrastDb / 2.5);
  return { on: db.map((level) => level > threshold), contrastDb, decided: true };
}

export interface PatternVerdict {
  /** Natural logarithm of the likelihood, 0 for a pattern that explains everything. */
  readonly logLikelihood: number;
  readonly reason: string;
}

/** What speaks against a pattern, as log likelihoods: the first symbol of a kind, and each further one. */
const ENERGY_OUTSIDE = [-8, -4] as const;
const QUIET_INSIDE = [-5, -1.5] as const;
/** Share of periods with energy in a position that counts: a longer true period fills some and not others. */
const OUTSIDE_SHARE = 0.2;
/** Periods that have to show the same edge. */
const LEAST_PERIODS = 2;

/**
 * How well the levels fit a declared pattern. Energy in a symbol that is declared uplink refutes
 * it; quiet in a declared downlink symbol counts only at the pattern's edge, where the rest of
 * the downlink is filled and every period shows the same.
 */
export function patternLikelihood(levels: SymbolLevels, pattern: TddPattern): PatternVerdict {
  if (!levels.decided) return { logLikelihood: 0, reason: 'signal and pauses cannot be told apart by level' };
  const seen = byPosition(levels, pattern);
  const outside = seen.filter((p) => p.kind === 'uplink' && p.onShare > OUTSIDE_SHARE);
  const downlink = seen.filter((p) => p.kind === 'downlink');
  const filled = downlink.filter((p) => p.onShare > 0.5).length / Math.max(1, downlink.length);
  const quietEdge = levels.contrastDb > 0 && filled > 0.6 ? edgeRun(downlink) : 0;
  const quiet = Math.max(penalty(QUIET_INSIDE, quietEdge), quietByChance(downlink, { quietEdge, symbolsPerSlot: levels.symbolsPerSlot }));
  const logLikelihood = Math.max(-40, penalty(ENERGY_OUTSIDE, outside.length) + quiet);
  return { logLikelihood, reason: reasonOf(outside.length, quietEdge) };
}

/** A slot that ends early is given to users this much more seldom than a whole one (common practice). */
const SHORT_SLOT = 0.8;

/** Natural logarithm of the chance that a loaded downlink leaves its last symbols empty in every period all the same. */
function quietByChance(downlink: readonly Position[], { quietEdge, symbolsPerSlot }: { quietEdge: number; symbolsPerSlot: number }): number {
  if (quietEdge === 0) return 0;
  const rest = downlink.slice(0, downlink.length - quietEdge);
  const fill = rest.reduce((sum, { onShare }) => sum + onShare, 0) / Math.max(1, rest.length);
  const slots = Math.ceil(quietEdge / symbolsPerSlot) * downlink.at(-1)!.count;
  return slots * Math.log(1 - SHORT_SLOT * fill);
}

function penalty([first, further]: readonly [number, number], count: number): number {
  return count === 0 ? 0 : first + further * (count - 1);
}

function reasonOf(outside: number, quiet: number): string {
  if (outside > 0) return `the transmitter sends in ${outside} symbol${outside > 1 ? 's' : ''} of the period that the pattern gives to the uplink`;
  if (quiet > 0) return `${quiet} symbol${quiet > 1 ? 's' : ''} at the end of the pattern's downlink stay silent in every period`;
  return 'the levels fit the pattern';
}

interface Position { readonly index: number; readonly kind: 'downlink' | 'uplink' | 'flexible'; readonly onShare: number; readonly count: number }

function byPosition(levels: SymbolLevels, pattern: TddPattern): Position[] {
  const perPeriod = Math.round((pattern.periodS / 1e-3) * (levels.spacingHz / 15e3) * levels.symbolsPerSlot);
  const on = new Float64Array(perPeriod);
  const count = new Float64Array(perPeriod);
  levels.indices.forEach((k, i) => {
    const at = ((k % perPeriod) + perPeriod) % perPeriod;
    count[at] += 1;
    if (levels.on[i]) on[at] += 1;
  });
  return Array.from(count, (n, index) => ({ index, kind: kindAt(index, perPeriod, { pattern, levels }), onShare: n > 0 ? on[index]! / n : 0, count: n })).filter((p) => p.count > 0);
}

/** Of a symbol, for what rounding does to whole ones. */
const HAIR = 1e-6;

/** Downlink, uplink or left open, for a symbol of the carrier's spacing within the pattern's period. */
function kindAt(index: number, perPeriod: number, { pattern, levels }: { pattern: TddPattern; levels: SymbolLevels }): Position['kind'] {
  const perSlot = (levels.spacingHz / pattern.referenceSpacingHz) * levels.symbolsPerSlot;
  // The pattern's own symbols: those of its reference spacing, which the extended prefix has at 60 kHz alone.
  const perReference = pattern.referenceSpacingHz === EXTENDED_HZ ? levels.symbolsPerSlot : NORMAL;
  const downlink = (pattern.downlinkSlots + pattern.downlinkSymbols / perReference) * perSlot;
  const uplink = (pattern.uplinkSlots + pattern.uplinkSymbols / perReference) * perSlot;
  // A symbol that a boundary cuts is neither's.
  if (index + 1 <= downlink + HAIR) return 'downlink';
  return index >= perPeriod - uplink - HAIR ? 'uplink' : 'flexible';
}

/** Silent symbols in a row at the end of the downlink, seen in at least two periods. */
function edgeRun(downlink: readonly Position[]): number {
  let run = 0;
  for (let i = downlink.length - 1; i >= 0 && downlink[i]!.onShare < 0.1 && downlink[i]!.count >= LEAST_PERIODS; i -= 1) run += 1;
  return run;
}
