import { asciiAt, part, type ByteSource } from './bytes.js';
import { CaptureError } from './captureError.js';
import { datatypeOf, type Datatype } from './datatype.js';

/** A two-channel WAV file: first channel I, second Q (common practice). */
export interface WavFile {
  readonly datatype: Datatype;
  readonly sampleRateHz: number;
  readonly centreFrequencyHz: number | null;
  readonly payload: ByteSource;
  /** Pairs of channels: 1 for an ordinary I/Q file. */
  readonly pairs: number;
  readonly warnings: readonly string[];
}

interface Chunk {
  readonly id: string;
  readonly offset: number;
  readonly size: number;
}

const MAX_CHUNKS = 1000;
const PCM = 1, FLOAT = 3, EXTENSIBLE = 0xfffe;

export function readWav(bytes: ByteSource): WavFile {
  const warnings: string[] = [];
  const chunks = chunksOf(bytes, warnings);
  const fmt = chunks.find((chunk) => chunk.id === 'fmt ');
  const data = chunks.find((chunk) => chunk.id === 'data');
  if (!fmt || fmt.size < 16) throw new CaptureError('truncated', 'The WAV file has no complete "fmt " chunk, so its sample format is unknown. Give it as raw I/Q with --datatype and --sample-rate.', { offset: fmt?.offset ?? bytes.size });
  if (!data) throw new CaptureError('truncated', `The WAV file has no "data" chunk up to byte ${bytes.size}. Copy or record it again.`, { offset: bytes.size });
  const format = formatOf(bytes.read(fmt.offset, Math.min(fmt.size, 40)), fmt.offset, warnings);
  return { ...format, centreFrequencyHz: centreOf(bytes, chunks), payload: part(bytes, data.offset, data.size), warnings };
}

/** Walks the chunks; sizes that point past the end are cut to what is there. */
function chunksOf(bytes: ByteSource, warnings: string[]): Chunk[] {
  const head = bytes.read(0, 12);
  const form = asciiAt(head, 0, 4);
  if (head.length < 12 || asciiAt(head, 8, 4) !== 'WAVE') throw new CaptureError('truncated', 'The WAV file ends inside its 12-byte header. Copy or record it again.', { offset: head.length });
  if (form === 'RIFX') throw new CaptureError('unsupported-format', 'The WAV file is big-endian (RIFX). Convert it, or give it as raw I/Q with --datatype ci16_be and --sample-rate.', { offset: 0 });
  const chunks: Chunk[] = [];
  let longData: number | null = null;
  for (let at = 12; at + 8 <= bytes.size && chunks.length < MAX_CHUNKS;) {
    const view = dataView(bytes.read(at, 8));
    const id = asciiAt(bytes.read(at, 4), 0, 4);
    const stated = view.getUint32(4, true);
    if (id === 'ds64') longData = longSize(bytes, at + 8);
    const size = dataSize({ id, stated, longData, left: bytes.size - at - 8 }, warnings);
    chunks.push({ id, offset: at + 8, size });
    at += 8 + size + (size & 1);
  }
  return chunks;
}

/** RF64 (EBU Tech 3306) keeps the true size of `data` in `ds64`, as the second 64-bit number. */
function longSize(bytes: ByteSource, offset: number): number | null {
  const body = bytes.read(offset, 24);
  return body.length < 16 ? null : Number(dataView(body).getBigUint64(8, true));
}

function dataSize(chunk: { id: string; stated: number; longData: number | null; left: number }, warnings: string[]): number {
  if (chunk.id !== 'data') return Math.min(chunk.stated, chunk.left);
  const meant = chunk.stated === 0xffffffff && chunk.longData !== null ? chunk.longData : chunk.stated;
  // Recorders that were stopped hard leave 0 or all ones in the size.
  const open = meant === 0 || meant === 0xffffffff;
  if (meant <= chunk.left && !open) return meant;
  if (chunk.left > 0) warnings.push(`the WAV header states ${meant} bytes of samples, the file holds ${chunk.left}; what is there is read`);
  return chunk.left;
}

function formatOf(body: Uint8Array, offset: number, warnings: string[]): Pick<WavFile, 'datatype' | 'sampleRateHz' | 'pairs'> {
  const view = dataView(body);
  const channels = view.getUint16(2, true);
  if (channels < 2) throw new CaptureError('unsupported-format', `The WAV file has ${channels} channel; I/Q needs two (I, Q). Record in stereo, or give a complex format.`, { offset: offset + 2 });
  if (channels % 2 === 1) throw new CaptureError('unsupported-format', `The WAV file has ${channels} channels; I/Q needs two (I, Q) or pairs of them.`, { offset: offset + 2 });
  if (channels > 2) warnings.push(`the WAV file has ${channels} channels; the first two are read as I and Q`);
  const tag = view.getUint16(0, true);
  const code = tag === EXTENSIBLE && body.length >= 26 ? view.getUint16(24, true) : tag;
  const container = (view.getUint16(12, true) / channels) * 8 || view.getUint16(14, true);
  return { datatype: componentOf(code, container, offset), sampleRateHz: view.getUint32(4, true), pairs: channels / 2 };
}

function componentOf(code: number, bits: number, offset: number): Datatype {
  const name = code === FLOAT ? `f${bits}` : `${bits === 8 ? 'u' : 'i'}${bits}`;
  const known = code === FLOAT ? [32, 64] : code === PCM ? [8, 16, 24, 32] : [];
  if (known.includes(bits)) return datatypeOf(name, true);
  throw new CaptureError('unsupported-format', `The WAV file's sample format (code ${code}, ${bits} bits) is not linear PCM of 8, 16, 24 or 32 bits nor float. Convert it to 16-bit PCM.`, { offset });
}

/** `auxi`: two 16-byte times, then the centre in Hz as 32 bits (receiver programs; common practice). */
function centreOf(bytes: ByteSource, chunks: readonly Chunk[]): number | null {
  const auxi = chunks.find((chunk) => chunk.id === 'auxi');
  if (!auxi || auxi.size < 36) return null;
  const centre = dataView(bytes.read(auxi.offset + 32, 4)).getUint32(0, true);
  return centre > 0 ? centre : null;
}

function dataView(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.length);
}
