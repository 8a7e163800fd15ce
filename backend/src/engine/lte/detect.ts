import type { DetectionContext, TechnologyFinding, Tried } from '../types.js';
import { decodeBroadcasts } from './broadcast.js';
import type { DecodedBroadcast } from './broadcast.js';
import { chanceOf, lteFinding } from './finding.js';
import type { CellMeasurement } from './finding.js';
import { readNative } from './native.js';
import type { NativeWindow } from './native.js';
import { prefixSamples, symbolStart, symbolsPerSlot, SPACING_HZ } from './numerology.js';
import type { Duplex, Prefix } from './numerology.js';
import { searchPrefix } from './prefix-search.js';
import type { PrefixFit } from './prefix-search.js';
import { searchPrimary } from './primary.js';
import { measureBlocks, portCombs, referenceError, residualOffset } from './quality.js';
import { neighbourCoherence, ReferenceSymbols, slotCoherence } from './reference.js';
import type { FramePlace } from './reference.js';
import { resolveSecondary } from './secondary.js';
import type { CellSync } from './secondary.js';
import { detectUplink } from './uplink.js';
import { symbolRows, transformStart } from './rows.js';
import type { Cut, Rows } from './rows.js';

/** Seconds read at first: four half frames and two broadcast transmissions at any start. */
const FIRST_LOOK_S = 0.0215;
/** Seconds read where the first look was not enough: four broadcast transmissions. */
const LONG_LOOK_S = 0.0435;

/** Below this nothing repeats at 15 kHz: chance reaches it once in some 10⁴ captures of noise. */
const LEAST_PREFIX_SCORE = 4.5;
/** Chance over 12 candidates, 4 readings and 336 sequences: 16,000·exp(−score²), 4 % at 3.6. */
const LEAST_SECONDARY_SCORE = 3.6;
/**
 * Chance (1 + score²)·exp(−score²) for one cell, place and port. What is left of both chances
 * together has to be below 10⁻⁸.
 */
const LEAST_REFERENCE_SCORE = 4;
const MOST_CHANCE = 1e-8;
/** Readings that are taken as far as the reference symbols. */
const MOST_READINGS = 2;

const CANDIDATES = 12;

export interface LteSurvey {
  readonly finding: TechnologyFinding | null;
  readonly tried: readonly Tried[];
}

/** LTE in the capture, or null; see `surveyLte`. */
export function detectLte(context: DetectionContext): TechnologyFinding | null {
  return surveyLte(context).finding;
}

/**
 * Looks for an LTE downlink carrier anywhere in the band, of either duplex mode, prefix and
 * sense: prefix repetition, primary and secondary synchronisation signals, cell-specific
 * reference symbols, broadcast channel; where there is none, for a terminal's uplink. `tried`
 * says what was found or missed on the way.
 */
export function surveyLte(context: DetectionContext): LteSurvey {
  const { source } = context;
  const seconds = source.samples / source.sampleRateHz;
  let survey = look(context, { startSample: 0, seconds: FIRST_LOOK_S });
  if (survey.again && seconds > FIRST_LOOK_S) {
    const longer = look(context, { startSample: 0, seconds: LONG_LOOK_S });
    if (longer.finding || !survey.finding) survey = longer;
  }
  return survey;
}

interface Look extends LteSurvey {
  /** Whether more of the capture could show more. */
  readonly again: boolean;
}

function look(context: DetectionContext, at: { startSample: number; seconds: number }): Look {
  const tried: Tried[] = [];
  const window = readNative(context.source, { ...at, occupied: context.occupied });
  if (!window) return { finding: null, tried: [{ what: 'LTE', result: 'the capture is narrower than the synchronisation signals' }], again: false };
  context.onProgress?.('lte', 0.2);
  const fits = searchPrefix(window);
  if (!fits[0] || fits[0].score < LEAST_PREFIX_SCORE) {
    return { finding: null, tried: [{ what: 'LTE', result: 'no cyclic prefix of 15 kHz symbols' }], again: true };
  }
  const readings = findCells(window, fits, tried);
  context.onProgress?.('lte', 0.7);
  for (const { rows, sync } of readings) {
    const measured = measureCell(window, rows, sync);
    if (measured) return { finding: lteFinding(context, window, measured), tried, again: measured.broadcast === null };
    tried.push({ what: `LTE cell ${sync.cellId}`, result: 'synchronisation signals may fit, reference symbols do not' });
  }
  const uplink = detectUplink(context, window, fits);
  if (!uplink) tried.push({ what: 'LTE uplink', result: 'no reference symbols of a single-carrier allocation' });
  return { finding: uplink, tried, again: uplink === null };
}

interface Found { readonly rows: Rows; readonly sync: CellSync }

/** Readings of both synchronisation signals above the threshold, best first. */
function findCells(window: NativeWindow, fits: readonly PrefixFit[], tried: Tried[]): Found[] {
  const found: Found[] = [];
  for (const fit of fits) {
    // The other prefix overlaps the true one and may come out ahead in a short or noisy window.
    if (fit.score < Math.max(LEAST_PREFIX_SCORE, 0.5 * fits[0].score)) continue;
    const rows = symbolRows(window, { ...fit, offsetHz: fit.fractionHz, early: halfPrefix(fit.prefix, window.size) });
    const candidates = searchPrimary(rows, 10 * symbolsPerSlot(fit.prefix), CANDIDATES);
    const syncs = candidates.flatMap((candidate) => resolveSecondary(rows, candidate) ?? []).sort((a, b) => b.score - a.score);
    if (!syncs[0] || syncs[0].score < LEAST_SECONDARY_SCORE) {
      tried.push({ what: `LTE, ${fit.prefix} prefix`, result: `synchronisation signals below the threshold (${(syncs[0]?.score ?? 0).toFixed(1)} against ${LEAST_SECONDARY_SCORE})` });
    }
    found.push(...syncs.slice(0, MOST_READINGS).filter(({ score }) => score >= LEAST_SECONDARY_SCORE).map((sync) => ({ rows, sync })));
  }
  return found.sort((a, b) => b.sync.score - a.sync.score).slice(0, MOST_READINGS);
}

/** Cuts the symbols anew on the cell's own timing, then measures reference symbols and reads the broadcast. */
function measureCell(window: NativeWindow, coarse: Rows, sync: CellSync): CellMeasurement | null {
  const references = new ReferenceSymbols(sync.cellId, coarse.cut.prefix);
  const perSlot = symbolsPerSlot(coarse.cut.prefix);
  const half = visibleHalf(window, sync);
  let cut = alignedCut(coarse, sync, window.size);
  const place = { shift: 0, inverted: sync.inverted, frameSymbol: 0, duplex: sync.duplex };
  let rows = symbolRows(window, cut);
  const { port, first, score } = strongestPort(rows, references, place, Math.min(half, 36));
  if (score < LEAST_REFERENCE_SCORE || chanceOf(sync.score, score) > MOST_CHANCE) return null;
  const offsetHz = residualOffset(first, perSlot);
  cut = { ...cut, offsetHz: cut.offsetHz + (sync.inverted ? -offsetHz : offsetHz) };
  rows = symbolRows(window, cut);
  const combs = portCombs(rows, references, { ...place, port, half });
  const { angle } = neighbourCoherence(combs, { inner: 0, outer: 36 });
  const measured = measureBlocks(combs, angle, half);
  const halfUsed = Math.min(half, 6 * measured.blocks);
  const inside = portCombs(rows, references, { ...place, port, half: halfUsed });
  const error = referenceError(inside, angle, perSlot);
  const broadcast: DecodedBroadcast | null = decodeBroadcasts(rows, references, {
    ...place, half: halfUsed, delayTurns: -angle / (2 * Math.PI * 3),
    noise: Math.min(10, Math.max(1e-4, error.noise / Math.max(1e-30, error.power - error.noise))),
  });
  return { rows, sync, port, place, references, combs: inside, angleOfThree: angle, error, blocks: measured, broadcast, referenceScore: score, halfSeen: half };
}

/** Of ports 0 and 1 the one that is received better: either may stand in a fade. */
function strongestPort(rows: Rows, references: ReferenceSymbols, place: FramePlace & { duplex: Duplex }, half: number) {
  const [zero, one] = [0, 1].map((port) => {
    const first = portCombs(rows, references, { ...place, port, half });
    const neighbours = neighbourCoherence(first, { inner: 0, outer: half });
    const slots = slotCoherence(first, symbolsPerSlot(rows.cut.prefix));
    return { port, first, score: Math.hypot(neighbours.score, slots.score) };
  });
  return one.score > zero.score ? one : zero;
}

/** The cut with slot 0 at a frame's start, which `symbolRows` then counts from. */
function alignedCut(coarse: Rows, sync: CellSync, size: number): Cut {
  const { cut } = coarse;
  const perSlot = symbolsPerSlot(cut.prefix);
  // Where the synchronisation signal's useful part was received, less where it lies in its frame.
  const primary = sync.duplex === 'fdd' ? perSlot - 1 : 2 * perSlot + 2;
  const useful = cut.slotStart + transformStart(cut, sync.frameSymbol + primary, size) + sync.delaySamples;
  const inFrame = symbolStart(cut.prefix, primary + 1, size) - size;
  const frame = 150 * size;
  const start = Math.round(useful - inFrame);
  // Half a normal prefix early even where the prefix is longer: six subcarriers must not turn by more than half a turn.
  // With the carrier moved to zero, no symbol turns against another.
  const offsetHz = cut.offsetHz + centredBin(sync.shift, size) * SPACING_HZ;
  return { ...cut, offsetHz, slotStart: ((start % frame) + frame) % frame, early: halfPrefix('normal', size) };
}

/** How many subcarriers on each side of DC the capture shows without loss. */
function visibleHalf(window: NativeWindow, sync: CellSync): number {
  const pass = Math.min(window.size / 2 - 1, Math.floor((0.97 * window.passHz) / SPACING_HZ));
  return Math.max(36, Math.min(660, pass - Math.abs(centredBin(sync.shift, window.size))));
}

function centredBin(bin: number, size: number): number {
  return bin < size / 2 ? bin : bin - size;
}

function halfPrefix(prefix: Prefix, size: number): number {
  return Math.round(prefixSamples(prefix, 1, size) / 2);
}
