import { addDcOffset, addImage, addPhaseNoise, clip, dropSamples, exchangeIq, invertSpectrum, setLevel } from '../impairments/front-end.js';
import { PROFILES, throughChannel, type ProfileName } from '../impairments/multipath.js';
import { addNoise, noisePower } from '../impairments/noise.js';
import { lteCarrier } from '../lte/carrier.js';
import type { LteSpec } from '../lte/spec.js';
import { lteUplink, type UplinkSpec } from '../lte/uplink.js';
import { nrCarrier } from '../nr/carrier.js';
import type { NrSpec } from '../nr/spec.js';
import { ownOfdm, type OwnOfdmSpec } from '../plain/own-ofdm.js';
import { singleCarrier, type SingleCarrierSpec } from '../plain/single-carrier.js';
import { silence, tone } from '../plain/tone.js';
import type { Datatype } from '../quantise.js';
import { Random } from '../random.js';
import { receive, type Receiver } from '../receive.js';
import { raw, sigmfArchive, sigmfPair, wav, type NamedBytes, type Recording } from '../recording.js';
import type { Emission, Signal } from '../signal.js';
import { wifiBursts } from '../wifi/bursts.js';
import type { WifiSpec } from '../wifi/spec.js';

export type SignalSpec =
  | { readonly kind: 'nr'; readonly spec: NrSpec }
  | { readonly kind: 'lte'; readonly spec: LteSpec }
  | { readonly kind: 'lte-uplink'; readonly spec: UplinkSpec }
  | { readonly kind: 'wifi'; readonly spec: WifiSpec }
  | { readonly kind: 'ofdm'; readonly spec: OwnOfdmSpec }
  | { readonly kind: 'single-carrier'; readonly spec: SingleCarrierSpec }
  | { readonly kind: 'tone' | 'noise'; readonly spec: { readonly carrierHz: number } };

export function emissionOf(signal: SignalSpec): Emission {
  switch (signal.kind) {
    case 'nr': return nrCarrier(signal.spec);
    case 'lte': return lteCarrier(signal.spec);
    case 'lte-uplink': return lteUplink(signal.spec);
    case 'wifi': return wifiBursts(signal.spec);
    case 'ofdm': return ownOfdm(signal.spec);
    case 'single-carrier': return singleCarrier(signal.spec);
    case 'tone': return tone(signal.spec.carrierHz);
    case 'noise': return silence(signal.spec.carrierHz);
  }
}

export interface Impairments {
  /** In the occupied bandwidth while the signal is on; null: no noise. */
  readonly snrDb: number | null;
  readonly channel?: { readonly profile: ProfileName; readonly dopplerHz: number };
  readonly phaseNoiseHz?: number;
  /** Image against signal. */
  readonly imageDb?: number;
  /** DC against signal. */
  readonly dcDb?: number;
  readonly sense: 'upright' | 'conjugated' | 'exchanged';
  readonly rmsDbfs: number;
  readonly gaps?: readonly { readonly atS: number; readonly count: number }[];
}

export interface CaptureSpec {
  readonly signal: SignalSpec;
  readonly receiver: Receiver;
  readonly impairments: Impairments;
  readonly recording: {
    readonly format: 'sigmf' | 'archive' | 'wav' | 'wav-float' | 'raw';
    readonly datatype: Datatype;
    readonly stated?: Recording['stated'];
  };
  readonly seed: number;
}

/** Samples as the recorder holds them, full scale 1. */
export function recordedSignal(capture: CaptureSpec): Signal {
  const { impairments, receiver, signal } = capture;
  const emission = emissionOf(signal);
  const received = receive(emission, receiver);
  const random = (part: string) => new Random(capture.seed, part);
  const { sampleRateHz } = receiver;
  let iq = received.iq;
  if (impairments.channel) {
    const paths = PROFILES[impairments.channel.profile];
    iq = throughChannel(iq, { channel: { paths, dopplerHz: impairments.channel.dopplerHz }, sampleRateHz, random: random('channel') });
  }
  if (impairments.phaseNoiseHz) addPhaseNoise(iq, { linewidthHz: impairments.phaseNoiseHz, sampleRateHz, random: random('oscillator') });
  const isSilent = signal.kind === 'noise';
  if (impairments.snrDb !== null || isSilent) {
    const occupiedHz = Math.min(sampleRateHz, Math.max(emission.highHz - emission.lowHz, sampleRateHz / 100));
    addNoise(iq, isSilent ? 1 : noisePower({ snrDb: impairments.snrDb ?? 0, onPower: emission.onPower, occupiedHz, sampleRateHz }), random('noise'));
  }
  if (impairments.imageDb !== undefined) addImage(iq, impairments.imageDb, random('image').uniform(0, 2 * Math.PI));
  if (impairments.dcDb !== undefined) addDcOffset(iq, impairments.dcDb, random('dc').uniform(0, 2 * Math.PI));
  if (impairments.sense === 'conjugated') invertSpectrum(iq);
  if (impairments.sense === 'exchanged') exchangeIq(iq);
  setLevel(iq, impairments.rmsDbfs);
  clip(iq);
  if (impairments.gaps) iq = dropSamples(iq, impairments.gaps.map((g) => ({ at: Math.round(g.atS * sampleRateHz), count: g.count })));
  return { iq, sampleRateHz };
}

/** The recording's files, the one to name on the command line first, and the options that it needs. */
export function captureFiles(capture: CaptureSpec): { files: NamedBytes[]; options: string[] } {
  const { recording, receiver } = capture;
  const { iq, sampleRateHz } = recordedSignal(capture);
  const what: Recording = { iq, datatype: recording.datatype, sampleRateHz, centreHz: receiver.centreHz, stated: recording.stated };
  const rate = String(recording.stated?.sampleRateHz ?? sampleRateHz);
  const centre = String(recording.stated?.centreHz ?? receiver.centreHz);
  switch (recording.format) {
    case 'sigmf': return { files: sigmfPair('capture', what), options: [] };
    case 'archive': return { files: [sigmfArchive('capture', what)], options: [] };
    case 'wav': return { files: [wav('capture', what)], options: ['--sample-rate', rate, '--centre-frequency', centre] };
    case 'wav-float': return { files: [wav('capture', what, 'float32')], options: ['--sample-rate', rate, '--centre-frequency', centre] };
    case 'raw': return { files: [raw('capture', what)], options: ['--datatype', recording.stated?.datatype ?? recording.datatype, '--sample-rate', rate, '--centre-frequency', centre] };
  }
}
