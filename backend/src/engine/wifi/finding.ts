import type { AirValue } from '#shared/decode';
import type { DetectionContext, SymbolGrid, TechnologyFinding, Tried } from '../types.js';
import { encodedTones, knownSymbolFit, softSymbol } from './field.js';
import type { CarrierRest, Frame } from './frame.js';
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
  const carrier = carrierOffset(group, guard);
  const bursts = `${frames.length} preamble${frames.length > 1 ? 's' : ''}`;
  const air: Record<string, AirValue> = {
    technology: known('wifi', `short and long training of ${bursts}`),
    subcarrierSpacingHz: known(spacingHz, wide ? 'repeated L-SIG: HE or EHT data' : `training at ${20 / clock} MHz clock, ${formatName(lead)} frames`),
    usefulSymbolS: known(1 / spacingHz, 'format of the frames'),
    ...prefixValues(guard, { clock, known, absent }),
    carrierOffsetHz: known(carrier.hz, carrier.method),
    spectrumInverted: known(inverted, 'sense in which the long training fits'),
    ...qualityValues(group, known, absent),
    sampleClockOffsetPpm: absent('the frames are too short to measure a drift of their symbols'),
    frameFormat: known(formatName(lead), 'rotation, repetition and parity of the signalling fields'),
  };
  if (carrier.channelHz !== null) air.channelBandwidthHz = known(carrier.channelHz, 'subchannels that carry the preamble');
  return {
    technology: 'wifi', confidence, spectrumInverted: inverted, air,
    announced: announced(lead), grid: grid(context, lead, { guard, carrierHz: carrier.hz, spacingHz }), tried: notes(frames, lead, guard),
  };
}

/** Frames of the format that counts: the newest present, and of it the variant with the most data time. */
function mainGroup(frames: readonly Frame[]): Frame[] {
  const newer = frames.filter((frame) => frame.format !== 'legacy');
  const groups = new Map<string, Frame[]>();
  for (const frame of newer.length > 0 ? newer : frames) {
    const key = JSON.stringify([frame.format, announced(frame)]);
    groups.set(key, [...(groups.get(key) ?? []), frame]);
  }
  const time = (group: readonly Frame[]) => group.reduce((sum, { dataStartUs, dataEndUs }) => sum + dataEndUs - dataStartUs, 0);
  const best = [...groups.values()].reduce((a, b) => (time(b) > time(a) ? b : a));
  return [...best].sort((a, b) => b.preamble.score - a.preamble.score);
}

/** Against chance: long training of a frame among 40 candidates and 150 places, L-SIG's checks an eighth; frames are independent. */
function presence(frames: readonly Frame[]): number {
  const log = frames.reduce((sum, frame) => sum + Math.min(0, Math.log(6000) - frame.preamble.score ** 2 - (frame.legacy ? 2 : 0) - (frame.signal ? 3 : 0)), 0);
  return Math.min(0.9995, 1 - 0.0005 - Math.min(0.5, Math.exp(log)));
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

function channelsAnnounced(frame: Frame): number | null {
  return frame.signal ? frame.signal.channels : null;
}

/** DC tone of the whole channel: the middle of its subchannels; the data's prefix refines the frequency. Median over frames. */
function carrierOffset(group: readonly Frame[], guard: GuardMeasurement | null): { hz: number; method: string; channelHz: number | null } {
  const { piece, channels } = group[0].preamble;
  const width = 20e6 / piece.clock;
  const told = channelsAnnounced(group[0]) ?? channels.length;
  const hz = weightedMean(group.slice(0, MOST_MEASURED).flatMap((frame, i) => {
    const seen = told < frame.preamble.channels.length ? [0] : frame.preamble.channels;
    const coarse = frame.preamble.piece.offsetHz + ((seen[0] + seen[seen.length - 1]) / 2) * width;
    return [frame.rest, guard?.rest[i]].flatMap((rest) => (rest ? [{ hz: coarse + rest.hz, varianceHz2: rest.varianceHz2 }] : [{ hz: coarse, varianceHz2: 1e8 }]));
  }));
  if (told > channels.length) {
    const raster = TONE_SPACING_HZ / piece.clock;
    return { hz: hz - raster * Math.round(hz / raster), method: 'fractional: the channel reaches beyond what the capture shows', channelHz: null };
  }
  return { hz, method: 'DC tone of the long training, refined by the data\'s guard intervals', channelHz: told * width };
}

/** Frames that lie elsewhere (another transmitter, a subchannel missed) are left out: the mean is of those near the median. */
function weightedMean(values: readonly CarrierRest[]): number {
  const sorted = values.map(({ hz }) => hz).sort((a, b) => a - b);
  const middle = sorted[sorted.length >> 1];
  let sum = 0, weights = 0;
  for (const { hz, varianceHz2 } of values) {
    if (Math.abs(hz - middle) > 20_000) continue;
    sum += hz / (varianceHz2 + 1);
    weights += 1 / (varianceHz2 + 1);
  }
  return sum / weights;
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

function grid(context: DetectionContext, frame: Frame, at: { guard: GuardMeasurement | null; carrierHz: number; spacingHz: number }): SymbolGrid | null {
  if (!at.guard || at.guard.confidence < 0.8) return null;
  const rate = context.source.sampleRateHz;
  const { piece, startUs } = frame.preamble;
  const perUs = rate * 1e-6 * piece.clock;
  return {
    startSample: piece.startSample + (startUs + frame.dataStartUs) * perUs,
    usefulSamples: rate / at.spacingHz,
    prefixSamples: [at.guard.hypothesis.guardUs * perUs],
    subcarrierSpacingHz: at.spacingHz,
    referenceHz: at.carrierHz,
    placed: true,
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
