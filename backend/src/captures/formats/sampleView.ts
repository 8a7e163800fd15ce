import type { SampleSource } from '#engine/types';
import type { ByteSource } from './bytes.js';
import { toComponents } from './components.js';
import type { Datatype } from './datatype.js';

/** How the payload's bytes are to be read. */
export interface SampleLabel {
  readonly datatype: Datatype;
  readonly sampleRateHz: number;
  readonly centreFrequencyHz: number | null;
  /** Take the first component as Q and the second as I. */
  readonly swapIq: boolean;
}

export interface Payload {
  readonly bytes: ByteSource;
  /** Channels interleaved sample by sample; the first is read. */
  readonly channels: number;
}

export interface SampleView extends SampleSource {
  readonly label: SampleLabel;
  /** Components that were NaN or infinite in what was read so far; each was read as zero. */
  readonly notFinite: () => number;
}

/** Windows of the payload under one label. Only the window asked for is ever in memory. */
export function viewSamples(payload: Payload, label: SampleLabel): SampleView {
  const frameBytes = label.datatype.sampleBytes * payload.channels;
  const samples = Math.floor(payload.bytes.size / frameBytes);
  let bad = 0;
  const read = (start: number, count: number): Float32Array => {
    const from = Math.max(0, Math.min(samples, Math.floor(start)));
    const take = Math.max(0, Math.min(samples - from, Math.floor(count)));
    const bytes = firstChannel(whole(payload.bytes.read(from * frameBytes, take * frameBytes)), label, payload.channels);
    const iq = toComponents(bytes, label.datatype);
    if (label.datatype.kind === 'float') bad += silenceNotFinite(iq);
    if (label.swapIq) exchange(iq);
    return iq;
  };
  return { sampleRateHz: label.sampleRateHz, centreFrequencyHz: label.centreFrequencyHz, samples, read, label, notFinite: () => bad };
}

/** Typed arrays need their bytes at an aligned place. */
function whole(bytes: Uint8Array): Uint8Array {
  return bytes.byteOffset % 8 === 0 ? bytes : bytes.slice();
}

function firstChannel(bytes: Uint8Array, label: SampleLabel, channels: number): Uint8Array {
  if (channels === 1) return bytes;
  const width = label.datatype.sampleBytes;
  const out = new Uint8Array(bytes.length / channels);
  for (let at = 0, to = 0; to < out.length; at += width * channels, to += width) out.set(bytes.subarray(at, at + width), to);
  return out;
}

function silenceNotFinite(iq: Float32Array): number {
  let found = 0;
  for (let i = 0; i < iq.length; i += 1) {
    if (!Number.isFinite(iq[i]!)) {
      iq[i] = 0;
      found += 1;
    }
  }
  return found;
}

function exchange(iq: Float32Array): void {
  for (let i = 0; i + 1 < iq.length; i += 2) {
    const first = iq[i]!;
    iq[i] = iq[i + 1]!;
    iq[i + 1] = first;
  }
}
