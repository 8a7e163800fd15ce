import type { CaptureFacts } from '#shared/decode';
import { look, type Look, type LookOptions } from './look.js';
import { from, type Recording } from './recording.js';
import { DOUBLINGS, fitsItsMib, inItsRange, misfitOf, standsBetter } from './doubled-cell.js';
import { suspectRate } from './rate-label.js';
import { oneScale, plausible } from './plausible.js';
import { chooseWindows, isSameLevel, readWindow } from '../level/windows.js';
import { spectrumOf } from '../spectrum/spectrum.js';
import { meanPower } from '../vector/power.js';
import { estimateOfdm } from '../sync/estimate.js';
import type { SampleSource, Tried, Window } from '../types.js';

/** A label that had to be changed before the capture decoded. */
export interface ChangedLabel {
  readonly property: 'format' | 'rate';
  readonly stated: string;
  readonly found: string;
  readonly ratio?: number;
  readonly proof: string;
  readonly confidence: number;
}

export interface Doubted {
  readonly look: Look;
  readonly labels: readonly ChangedLabel[];
  readonly tried: readonly Tried[];
}

/**
 * The label is tried, not believed: the plain reading first; where nothing is found, later places
 * of a long capture, then other datatypes; and another rate where the prefixes' pattern speaks
 * against the stated one.
 */
export function readThroughDoubt(recording: Recording, options: LookOptions): Doubted {
  const plain = lookAround(recording.source, recording.facts, options);
  const rate = otherRate(recording, plain, options);
  if (rate) return rate;
  if (plain.choice.technology !== null && plausible(recording.source)) return { look: plain, labels: [], tried: plain.tried };
  return otherFormat(recording, plain, options) ?? { look: plain, labels: [], tried: [...plain.tried, ...formatsTried(recording)] };
}

const FURTHER_PLACES = 2;

/** The start of the capture, then the strongest places further on. */
function lookAround(source: SampleSource, facts: CaptureFacts, options: LookOptions): Look {
  const first = look(source, facts, options);
  if (first.choice.finding !== null) return first;
  // Where no window showed a repetition, the same windows would show none again.
  const known = first.repetition.found ? options : { ...options, repetition: first.repetition };
  for (const start of chooseWindows(source).slice(1, 1 + FURTHER_PLACES)) {
    if (isAlike(first, readWindow(source, start))) continue;
    const later = look(from(source, start), facts, known);
    if (later.choice.finding !== null || (first.choice.technology === null && later.choice.technology !== null)) return later;
  }
  return first;
}

/** Nothing stands out there either, and the level is the same: another window of the same noise. */
function isAlike({ window, spectrum }: Look, later: Window): boolean {
  return isSameLevel(meanPower(window.iq), meanPower(later.iq)) && spectrumOf(later.iq, later.sampleRateHz).occupied === null && spectrum.occupied === null;
}

/** Spacings of the standards, Hz, that a wrong rate label would hide. */
const STANDARD_HZ = [15e3, 30e3, 60e3, 120e3, 312.5e3, 78.125e3];
const RATE_RATIOS = [3 / 4, 4 / 3, 2 / 3, 3 / 2, 4 / 5, 5 / 4];
const CELLULAR_HZ = [15e3, 30e3, 60e3, 120e3];

function otherRate(recording: Recording, plain: Look, options: LookOptions): Doubted | null {
  const suspicion = suspectRate(plain.blind);
  if (suspicion) {
    const other = relabelled(recording, { plain, ...suspicion, sure: true }, options);
    return other && standsBetter(plain, other.look) ? null : other;
  }
  const misfit = misfitOf(plain);
  if (misfit) {
    const other = relabelled(recording, { plain, ...misfit, sure: false }, options);
    if (other && fitsItsMib(other.look)) return other;
  }
  if (plain.choice.technology !== 'ofdm' || !plain.blind) return null;
  const spacing = plain.blind.subcarrierSpacingHz;
  const ratio = RATE_RATIOS.find((r) => isOneOf(STANDARD_HZ, spacing * r));
  if (ratio !== undefined) return relabelled(recording, { plain, ratio, sure: false, proof: `at the stated rate the symbols would be those of ${(spacing / 1e3).toFixed(3)} kHz, which no standard has` }, options);
  return isOneOf(CELLULAR_HZ, spacing) ? doubled(recording, plain, options) : null;
}

/** A cellular spacing without any synchronisation may be another one under a rate label off by 2: shown only by what then decodes. */
function doubled(recording: Recording, plain: Look, options: LookOptions): Doubted | null {
  const spacing = plain.blind!.subcarrierSpacingHz;
  for (const ratio of DOUBLINGS.filter((r) => isOneOf(CELLULAR_HZ, spacing * r))) {
    const proof = `at the stated rate the symbols look like those of ${(spacing / 1e3).toFixed(3)} kHz, but nothing of a cell is found; at ${ratio} times the rate a cell's own signals decode`;
    const found = relabelled(recording, { plain, ratio, sure: false, proof }, options);
    if (found && inItsRange(found.look)) return found;
  }
  return null;
}

function isOneOf(list: readonly number[], hz: number): boolean {
  return list.some((each) => Math.abs(hz / each - 1) < 0.004);
}

interface RateTrial { readonly plain: Look; readonly ratio: number; readonly proof: string; readonly sure: boolean }

function relabelled(recording: Recording, trial: RateTrial, options: LookOptions): Doubted | null {
  const stated = recording.source.sampleRateHz;
  const sampleRateHz = stated * trial.ratio;
  const facts = { ...recording.facts, sampleRateHz, durationS: recording.source.samples / sampleRateHz };
  const found = lookAround(recording.under({ sampleRateHz }), facts, options);
  const synchronised = found.choice.finding !== null;
  const what = { what: `sample rate ${rate(sampleRateHz)}`, result: synchronised ? `${found.choice.technology} decodes` : 'no synchronisation found' };
  if (!synchronised && !(trial.sure && found.choice.technology !== null)) return null;
  const label: ChangedLabel = { property: 'rate', stated: rate(stated), found: rate(sampleRateHz), ratio: trial.ratio, proof: trial.proof, confidence: synchronised ? 0.96 : 0.85 };
  return { look: found, labels: [label], tried: [...trial.plain.tried, what, ...found.tried] };
}

function rate(hz: number): string {
  return `${Number((hz / 1e6).toFixed(6))} Msps`;
}

/** Milliseconds of each other reading that are tried before one is looked at in full. */
const GLANCE_S = 0.006;
const GLANCE_CONFIDENCE = 0.9;

/** Other readings that are looked at in full. */
const LOOKED_AT = 3;

function otherFormat(recording: Recording, plain: Look, options: LookOptions): Doubted | null {
  const formats = candidates(recording, plain);
  for (const datatype of formats) {
    const found = readAs(recording, datatype, options);
    if (found.choice.technology === null) continue;
    const decodes = { confidence: found.choice.finding ? 0.97 : 0.93, proof: 'nothing repeats as a symbol does', result: `${found.choice.technology} decodes`, reads: 'it decodes' };
    return relabelledFormat(recording, { plain, found, datatype, ...decodes });
  }
  // Nothing decodes, but the stated format makes values of every size of the bytes, and one other as wide does not.
  const [datatype] = formats.filter((each) => widthOf(each) === widthOf(recording.facts.datatype ?? ''));
  if (formats.length !== 1 || datatype === undefined || oneScale(recording.source)) return null;
  const looks = { confidence: 0.8, proof: 'the values are no received signal\'s', result: 'values like a received signal\'s', reads: 'they are' };
  return relabelledFormat(recording, { plain, found: readAs(recording, datatype, options), datatype, ...looks });
}

/** Readings worth a full look, likeliest first: in which symbols repeat, then, where the stated one makes no sense, any that does. */
function candidates(recording: Recording, plain: Look): string[] {
  // What was decoded is as long as its symbols say: only a reading of as many samples can be the right one.
  const decoded = plain.choice.finding !== null;
  const formats = likelyFormats(recording).filter((datatype) => !decoded || widthOf(datatype) === widthOf(recording.facts.datatype ?? ''));
  const glances = formats.map((datatype) => ({ datatype, ...glance(recording.under({ datatype })) })).sort((x, y) => y.score - x.score);
  const repeating = glances.filter((g) => g.confidence > GLANCE_CONFIDENCE).slice(0, 2);
  const others = plausible(recording.source) ? [] : glances.filter((g) => !repeating.includes(g));
  return [...repeating, ...others].slice(0, LOOKED_AT).map(({ datatype }) => datatype);
}

function readAs(recording: Recording, datatype: string, options: LookOptions): Look {
  const source = recording.under({ datatype });
  return lookAround(source, { ...recording.facts, datatype, samples: source.samples, durationS: source.samples / source.sampleRateHz }, options);
}

interface FormatTrial { plain: Look; found: Look; datatype: string; confidence: number; proof: string; result: string; reads: string }

function relabelledFormat(recording: Recording, { plain, found, datatype, confidence, proof, result, reads }: FormatTrial): Doubted {
  const stated = recording.facts.datatype ?? 'another format';
  const label: ChangedLabel = { property: 'format', stated, found: datatype, proof: `read as ${stated} ${proof}; read as ${datatype} ${reads}`, confidence };
  return { look: found, labels: [label], tried: [...plain.tried, { what: `samples read as ${datatype}`, result }, ...found.tried] };
}

/**
 * Datatypes under which the bytes look like a received signal. Narrow samples read as wide ones
 * look like one too (the upper half decides), wide ones read as narrow do not: so a plausible
 * plain reading leaves only narrower ones to try.
 */
function likelyFormats(recording: Recording): readonly string[] {
  const most = plausible(recording.source) ? widthOf(recording.facts.datatype ?? '') - 1 : Infinity;
  return recording.datatypes.filter((datatype) => widthOf(datatype) <= most && plausible(recording.under({ datatype })));
}

function widthOf(datatype: string): number {
  return Number(/\d+/.exec(datatype)?.[0] ?? 64);
}

function glance(source: SampleSource): { confidence: number; score: number } {
  const count = Math.min(source.samples, Math.round(GLANCE_S * source.sampleRateHz));
  const iq = source.read(0, count);
  const short: SampleSource = { ...source, samples: count, read: (start, n) => iq.slice(2 * start, 2 * (start + n)) };
  const blind = estimateOfdm(short, { further: 0 });
  return { confidence: blind?.confidence ?? 0, score: blind?.candidates[0]?.score ?? 0 };
}

function formatsTried(recording: Recording): Tried[] {
  return recording.datatypes.length === 0 ? [] : [{ what: `samples read as ${recording.datatypes.join(', ')}`, result: 'the values do not look like a received signal, or nothing repeats as a symbol does' }];
}
