import { createHash } from 'node:crypto';
import { componentBytes, toBytes, type Datatype } from './quantise.js';

/** Samples and what their recorder says of them, right or wrong. */
export interface Recording {
  readonly iq: Float32Array;
  readonly datatype: Datatype;
  readonly sampleRateHz: number;
  /** Null: the metadata does not say. */
  readonly centreHz: number | null;
  /** What the label claims where it is not the truth. */
  readonly stated?: { readonly datatype?: string; readonly sampleRateHz?: number; readonly centreHz?: number };
  readonly description?: string;
}

export interface NamedBytes {
  readonly name: string;
  readonly bytes: Uint8Array;
}

const utf8 = (text: string) => new TextEncoder().encode(text);

/** A pair of SigMF 1.2 files, `NAME.sigmf-meta` and `NAME.sigmf-data`. */
export function sigmfPair(name: string, recording: Recording): NamedBytes[] {
  const data = toBytes(recording.iq, recording.datatype);
  return [
    { name: `${name}.sigmf-meta`, bytes: utf8(`${JSON.stringify(metadata(recording, data), null, 2)}\n`) },
    { name: `${name}.sigmf-data`, bytes: data },
  ];
}

function metadata(recording: Recording, data: Uint8Array): unknown {
  const centre = recording.stated?.centreHz ?? recording.centreHz;
  return {
    global: {
      'core:datatype': recording.stated?.datatype ?? recording.datatype,
      'core:sample_rate': recording.stated?.sampleRateHz ?? recording.sampleRateHz,
      'core:version': '1.2.0',
      'core:description': recording.description ?? 'generated signal',
      'core:sha512': createHash('sha512').update(data).digest('hex'),
    },
    captures: [{ 'core:sample_start': 0, ...(centre === null ? {} : { 'core:frequency': centre }) }],
    annotations: [],
  };
}

/** A SigMF archive: plain POSIX tar that holds the pair in a folder of its name. */
export function sigmfArchive(name: string, recording: Recording): NamedBytes {
  const files = sigmfPair(name, recording).map((file) => ({ name: `${name}/${file.name}`, bytes: file.bytes }));
  return { name: `${name}.sigmf`, bytes: tar(files) };
}

function tar(files: readonly NamedBytes[]): Uint8Array {
  const blocks = files.reduce((sum, f) => sum + 1 + Math.ceil(f.bytes.length / 512), 0);
  // Two empty blocks end an archive.
  const bytes = new Uint8Array((blocks + 2) * 512);
  let at = 0;
  for (const file of files) {
    bytes.set(tarHeader(file), at);
    bytes.set(file.bytes, at + 512);
    at += 512 * (1 + Math.ceil(file.bytes.length / 512));
  }
  return bytes;
}

/** POSIX.1-2001 ustar header. */
function tarHeader({ name, bytes }: NamedBytes): Uint8Array {
  const header = new Uint8Array(512);
  const put = (at: number, text: string) => header.set(utf8(text), at);
  const octal = (value: number, width: number) => `${value.toString(8).padStart(width - 1, '0')}\0`;
  put(0, name);
  put(100, octal(0o644, 8));
  put(108, octal(0, 8));
  put(116, octal(0, 8));
  put(124, octal(bytes.length, 12));
  put(136, octal(0, 12));
  put(148, '        ');
  put(156, '0');
  put(257, 'ustar\x0000');
  const sum = header.reduce((total, b) => total + b, 0);
  put(148, `${sum.toString(8).padStart(6, '0')}\0 `);
  return header;
}

/** RIFF/WAVE with two channels, I left and Q right: 16-bit integers, or 32-bit floats (format code 3). */
export function wav(name: string, recording: Recording, encoding: 'int16' | 'float32' = 'int16'): NamedBytes {
  const samples = toBytes(recording.iq, encoding === 'int16' ? 'ci16_le' : 'cf32_le');
  const width = encoding === 'int16' ? 2 : 4;
  const rate = Math.round(recording.stated?.sampleRateHz ?? recording.sampleRateHz);
  const bytes = new Uint8Array(44 + samples.length);
  const view = new DataView(bytes.buffer);
  bytes.set(utf8('RIFF'), 0);
  view.setUint32(4, 36 + samples.length, true);
  bytes.set(utf8('WAVEfmt '), 8);
  view.setUint32(16, 16, true);
  view.setUint16(20, encoding === 'int16' ? 1 : 3, true);
  view.setUint16(22, 2, true);
  view.setUint32(24, rate, true);
  view.setUint32(28, rate * 2 * width, true);
  view.setUint16(32, 2 * width, true);
  view.setUint16(34, 8 * width, true);
  bytes.set(utf8('data'), 36);
  view.setUint32(40, samples.length, true);
  bytes.set(samples, 44);
  return { name: `${name}.wav`, bytes };
}

const RAW_ENDING: Partial<Record<Datatype, string>> = { cf32_le: 'cf32', ci16_le: 'sc16', ci8: 'cs8', cu8: 'cu8' };

/** Samples alone. */
export function raw(name: string, recording: Recording): NamedBytes {
  return { name: `${name}.${RAW_ENDING[recording.datatype] ?? 'iq'}`, bytes: toBytes(recording.iq, recording.datatype) };
}

/** Bytes that a recording of so many samples takes, without its metadata. */
export function recordingBytes(samples: number, datatype: Datatype): number {
  return 2 * samples * componentBytes(datatype);
}
