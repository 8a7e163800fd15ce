import type { AirValue } from '#shared/decode';
import type { DetectionContext, SymbolGrid, TechnologyFinding, Tried } from '../types.js';
import { encodedTones, knownSymbolFit, softSymbol } from './field.js';
import { placeChannel } from './channel.js';
import type { ChannelPlace } from './channel.js';
import { frameEvidence } from './evidence.js';
import type { Frame } from './frame.js';
import { measureGuard } from './guard-interval.js';
import type { GuardMeasurement } from './guard-interval.js';
import { LAYOUT, TONE_SPACING_HZ } from './training.js';

const PREFIX_NAMES = { 0.4: 'short', 0.8: 'normal', 1.6: 'double', 3.2: 'quadruple' } as const;
/** As many frames' data are measured. */
const MOST_MEASURED = 6;

type Known = (value: AirValue['value'], method: string, sure?: number) => AirValue;

/** What the frames say, in the contract's names: the data's numerology is that of the newest format with the most time on the air. */
export function wifiFinding(context: DetectionContext, frames: readonly Frame[]): TechnologyFinding {
  const confidence = presence(frames);
  const known: Known = (value, method, sure = confidence) => ({ value, confidence: Math.min(confidence, sure), method });
  const absent = (reason: string): AirValue => ({ value: null, reason });
  const group = mainGroup(frames);
  const lead = group[0];
  const guard = measureGuard(context.source, group.slice(0, MOST_MEASURED));
  const { clock, inverted } = lead.preamble.piece;
  const wide = lead.format === 'he' || lead.format === 'eht';
  const spacingHz = (wide ? TONE_SPACING_HZ / 4 : TONE_SPACING_HZ) / clock;
  const place = placeChannel(group.slice(0, MOST_MEASURED), guard, lead.signal?.channels ?? null);
  const bursts = `${frames.length} preamble${frames.length > 1 ? 's' : ''}`;
  const air: Record<string, AirValue> = {
    technology: known('wifi', `short and long training of ${bursts}`),
    subcarrierSpacingHz: known(spacingHz, wide ? 'repeated L-SIG: HE or EHT data' : `training at ${20 / clock} MHz clock, ${formatName(lead)} frames`),
    usefulSymbolS: known(1 / spacingHz, 'format of the frames'),
    ...prefixValues(guard, { clock, known, absent }),
    carrierOffsetHz: known(place.hz, place.placed ? 'DC tone of the long training, refined by known symbols and guard intervals'
      : 'fractional: the capture does not show where in its channel the preamble lies'),
    spectrumInverted: known(inverted, 'sense in which the long training fits'),
    ...qualityValues(group, known, absent),
    sampleClockOffsetPpm: absent('the frames are too short to measure a drift of their symbols'),
    frameFormat: known(formatName(lead), 'rotation, repetition and parity of the signalling fields'),
  };
  if (place.widthHz !== null) air.channelBandwidthHz = known(place.widthHz, 'subchannels that carry the preamble');
  return {
    technology: 'wifi', confidence, spectrumInverted: inverted, air,
    announced: announced(lead), grid: grid(context, lead, { guard, place, spacingHz }), tried: notes(frames, lead, guard),
  };
}

/** Frames of the format that counts: the newest present, and of it the variant with the most data time; those whose field was not read go with it. */
function mainGroup(frames: readonly Frame[]): Frame[] {
  const newer = frames.filter((frame) => frame.format !== 'legacy');
  const groups = new Map<string, Frame[]>();
  for (const frame of newer.length > 0 ? newer : frames) {
    const key = JSON.stringify([frame.format, announced(frame)]);
    groups.set(key, [...(groups.get(key) ?? []), frame]);
  }
  const time = (group: readonly Frame[]) => group.reduce((sum, { dataStartUs, dataEndUs, signal }) => sum + (dataEndUs - dataStartUs) * (signal ? 1 : 0.01), 0);
  const best = [...groups.values()].reduce((a, b) => (time(b) > time(a) ? b : a));
  const unread = best[0].signal ? newer.filter((frame) => frame.format === best[0].format && !frame.signal) : [];
  const rank = ({ signal, preamble }: Frame) => (signal ? 100 : 0) + preamble.score;
  return [...best, ...unread].sort((a, b) => rank(b) - rank(a));
}

/** Frames are independent: their evidence adds. */
function presence(frames: readonly Frame[]): number {
  const nats = frames.reduce((sum, frame) => sum + Math.max(0, frameEvidence(frame)), 0);
  return 0.9995 - Math.min(0.5, Math.exp(-nats));
}

function prefixValues(guard: GuardMeasurement | null, at: { clock: number; known: Known; absent: (reason: string) => AirValue }): Record<string, AirValue> {
  if (!guard || guard.confidence < 0.8) {
    const reason = guard ? 'no guard interval stands out in the data' : 'fewer than three data symbols in the capture';
    return { cyclicPrefix: at.absent(reason), cyclicPrefixS: at.absent(reason) };
  }
  const { guardUs } = guard.hypothesis;
  const others = guard.all.map(({ hypothesis, coherence }) => `${hypothesis.guardUs} µs ${coherence.toFixed(2)}`).join(', ');
  const method = `measured in the data symbols: likeness ${others}`;
  return {
    cyclicPrefix: at.known(PREFIX_NAMES[guardUs], method, guard.confidence),
    cyclicPrefixS: at.known(guardUs * 1e-6 * at.clock, method, guard.confidence),
  };
}

function qualityValues(group: readonly Frame[], known: Known, absent: (reason: string) => AirValue): Record<string, AirValue> {
  const ratio = mean(group.map(({ channel, error }) => ((error ? error.gain ** 2 : 1) * channel.power) / Math.max(channel.noise, 1e-30)));
  const out: Record<string, AirValue> = { snrDb: ratio > 0 ? known(10 * Math.log10(ratio), 'difference of the two long training symbols') : absent('the training does not rise above the noise') };
  const errors = group.filter(({ error }) => error !== null && error.power > 0);
  if (errors.length === 0) return { ...out, evmPercent: absent('no L-SIG was read') };
  out.evmPercent = known(100 * Math.sqrt(mean(errors.map(({ error }) => error!.error / error!.power))), 'L-SIG against its re-encoded bits');
  out.evmRandomPercent = known(100 * Math.sqrt(mean(errors.map(randomError))), 'L-SIG against the bits of another');
  return out;
}

function mean(values: readonly number[]): number {
  return values.reduce((a, b) => a + b, 0) / values.length;
}

/** L-SIG's tones against a word that was not sent: what chance gives. */
function randomError(frame: Frame): number {
  const other = encodedTones(frame.legacy!.bits.map((bit, i) => (i < 18 ? bit ^ (i & 1) : bit)), 48)[0];
  const symbol = softSymbol(frame.preamble, frame.channel, { us: LAYOUT.signalUs, phase: 0 });
  if (!symbol) return 1;
  const fit = knownSymbolFit(symbol, other, frame.error!);
  return fit.error / fit.power;
}

/** By the snapshots' common names. */
function announced(frame: Frame): Record<string, string | number | boolean> {
  const { clock } = frame.preamble.piece;
  const out: Record<string, string | number | boolean> = {};
  if (!frame.signal) return out;
  out.channelBandwidth = (frame.signal.channels * 20e6) / clock;
  if (frame.signal.guardIntervalUs !== null) out.guardInterval = frame.signal.guardIntervalUs * 1e-6 * clock;
  return out;
}

function formatName(frame: Frame): string {
  const { signal } = frame;
  if (frame.format === 'he' && signal?.format === 'he') return `HE ${signal.kind}`;
  return { legacy: 'legacy', ht: 'HT mixed', 'ht-greenfield': 'HT greenfield', vht: 'VHT', he: 'HE', eht: 'EHT', unknown: 'unknown' }[frame.format];
}

function grid(context: DetectionContext, frame: Frame, at: { guard: GuardMeasurement | null; place: ChannelPlace; spacingHz: number }): SymbolGrid | null {
  if (!at.guard || at.guard.confidence < 0.8) return null;
  const rate = context.source.sampleRateHz;
  const { piece, startUs } = frame.preamble;
  const perUs = rate * 1e-6 * piece.clock;
  return {
    startSample: piece.startSample + (startUs + frame.dataStartUs) * perUs,
    usefulSamples: rate / at.spacingHz,
    prefixSamples: [at.guard.hypothesis.guardUs * perUs],
    subcarrierSpacingHz: at.spacingHz,
    referenceHz: at.place.hz,
    placed: at.place.placed,
  };
}

function notes(frames: readonly Frame[], lead: Frame, guard: GuardMeasurement | null): Tried[] {
  const counts = new Map<string, number>();
  for (const frame of frames) counts.set(formatName(frame), (counts.get(formatName(frame)) ?? 0) + 1);
  const out: Tried[] = [{ what: '802.11 OFDM frames', result: [...counts].map(([name, n]) => `${n} ${name}`).join(', ') }];
  const told = lead.signal?.guardIntervalUs;
  if (guard && told && told !== guard.hypothesis.guardUs) {
    out.push({ what: 'guard interval of the data', result: `announced ${told} µs, measured ${guard.hypothesis.guardUs} µs` });
  }
  return out;
}
