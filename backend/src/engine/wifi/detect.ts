import type { DetectionContext, TechnologyFinding, Tried } from '../types.js';
import { findTraining } from './bursts.js';
import { nameOtherFrames } from './dsss.js';
import { credibleFrames } from './evidence.js';
import { wifiFinding } from './finding.js';
import { readFrame } from './frame.js';
import type { Frame } from './frame.js';
import { readPiece } from './piece.js';
import type { ClockDivisor } from './piece.js';
import { synchronise } from './synchronise.js';

/** Samples are searched in windows of this length; overlapping by the preamble's. */
const WINDOW_S = 0.02;
const MOST_WINDOWS = 5;
/** Enough frames to say what there is to say. */
const ENOUGH_FRAMES = 12;
const MOST_CANDIDATES = 40;
/** The best of the candidates are tried first: where none of so many is a frame, the rest are none either. */
const MOST_MISSES = 16;
/** Preamble and every signalling field, nominal µs. */
const PREAMBLE_US = 52;

export interface WifiSurvey {
  readonly finding: TechnologyFinding | null;
  readonly tried: readonly Tried[];
}

/** IEEE 802.11 OFDM frames in the capture, or null; see `surveyWifi`. */
export function detectWifi(context: DetectionContext): TechnologyFinding | null {
  return surveyWifi(context).finding;
}

/**
 * Looks for frames of the OFDM PHYs with the clocks of 20, 10 and 5 MHz channels, anywhere in
 * the band and in both senses. `tried` names frames that are not OFDM, and what was missed.
 */
export function surveyWifi(context: DetectionContext): WifiSurvey {
  const { source } = context;
  const tried: Tried[] = [];
  for (const clock of [1, 2, 4] as const) {
    if (source.sampleRateHz < 18e6 / clock) continue;
    const frames = framesWithClock(context, clock);
    context.onProgress?.('wifi', clock / 4);
    if (frames.length > 0) return { finding: wifiFinding(context, frames), tried };
    tried.push({ what: `802.11 OFDM, ${20 / clock} MHz clock`, result: 'no short and long training that fit' });
  }
  if (tried.length === 0) tried.push({ what: '802.11 OFDM', result: 'the capture is narrower than a 5 MHz channel' });
  return { finding: null, tried: [...tried, ...nameOtherFrames(source)] };
}

function framesWithClock(context: DetectionContext, clock: ClockDivisor): Frame[] {
  const { source } = context;
  const span = Math.round(WINDOW_S * source.sampleRateHz);
  const overlap = Math.round(PREAMBLE_US * 1e-6 * clock * source.sampleRateHz);
  let frames: Frame[] = [];
  for (let w = 0, start = 0; w < MOST_WINDOWS && start < source.samples; w++, start += span) {
    const iq = source.read(start, Math.min(span + overlap, source.samples - start));
    if (w > 0 && frames.length === 0 && isSteady(iq)) break;
    frames.push(...framesIn(context, { iq, start, clock }));
    const believed = credibleFrames(frames);
    if (believed.length >= ENOUGH_FRAMES || (w > 0 && believed.length > 0)) break;
    frames = [...frames].slice(0, 4 * ENOUGH_FRAMES);
  }
  return credibleFrames(frames);
}

/** A level without gaps: the frames of a shared channel come in bursts, so looking on is of no use. */
function isSteady(iq: Float32Array): boolean {
  const blocks = 64;
  const size = Math.floor(iq.length / blocks);
  let low = Number.POSITIVE_INFINITY, high = 0;
  for (let b = 0; b < blocks; b++) {
    let sum = 0;
    for (let i = b * size; i < (b + 1) * size; i++) sum += iq[i] * iq[i];
    low = Math.min(low, sum);
    high = Math.max(high, sum);
  }
  return high < 1.3 * low;
}

function framesIn({ source }: DetectionContext, at: { iq: Float32Array; start: number; clock: ClockDivisor }): Frame[] {
  const candidates = findTraining(at.iq, source.sampleRateHz, at.clock, MOST_CANDIDATES);
  const perUs = source.sampleRateHz * 1e-6 * at.clock;
  const frames: Frame[] = [];
  let misses = 0;
  for (const candidate of candidates) {
    if (frames.length === 0 && misses >= MOST_MISSES) break;
    const place = at.start + candidate.at;
    if (frames.some((frame) => Math.abs(startSample(frame, perUs) - place) < SAME_FRAME_US * perUs)) continue;
    const lead = Math.min(place, 4 * perUs);
    const piece = readPiece(source, { startSample: place - lead, nominalUs: PREAMBLE_US + 8, clock: at.clock });
    const preamble = synchronise(piece, (place - piece.startSample) / perUs);
    const frame = preamble && readFrame(preamble);
    if (!frame) misses++;
    if (frame && !frames.some((other) => Math.abs(startSample(frame, perUs) - startSample(other, perUs)) < SAME_FRAME_US * perUs)) frames.push(frame);
    if (frames.length >= 2 * ENOUGH_FRAMES) break;
  }
  return frames;
}

/** A preamble's parts may each look like a start. */
const SAME_FRAME_US = 16;

function startSample({ preamble }: Frame, perUs: number): number {
  return preamble.piece.startSample + preamble.startUs * perUs;
}
