import type { ByteSource } from './bytes.js';
import { CaptureError } from './captureError.js';
import { parseDatatype, type Datatype } from './datatype.js';
import { jsonFault } from './jsonFault.js';

/** What the decode needs of a SigMF metadata file (SigMF 1.2.5). */
export interface SigmfMetadata {
  readonly datatype: Datatype;
  readonly sampleRateHz: number | null;
  readonly centreFrequencyHz: number | null;
  readonly channels: number;
  /** Name of the data file where it is not the metadata's own with `.sigmf-data`. */
  readonly dataset: string | null;
  readonly headerBytes: number;
  readonly trailingBytes: number;
  /** First sample (from the data's start) that belongs to another tuning or stands behind more header bytes. */
  readonly endSample: number | null;
  readonly sha512: string | null;
  /** Samples that the recorder itself says are missing (`core:global_index` jumps). */
  readonly announcedGaps: readonly { readonly atSample: number; readonly missing: number }[];
  readonly warnings: readonly string[];
}

type Json = Record<string, unknown>;
const MAX_METADATA_BYTES = 32 * 1024 * 1024;

export function readSigmfMetadata(bytes: ByteSource): SigmfMetadata {
  const root = parseObject(bytes);
  const global = objectAt(root, 'global');
  const segments = segmentsOf(root);
  const warnings: string[] = [];
  if (global['core:metadata_only'] === true) throw new CaptureError('missing-data-file', 'The metadata says that it has no data file (core:metadata_only). Give the recording itself.', { key: 'global/core:metadata_only' });
  return {
    datatype: parseDatatype(required(global, 'core:datatype'), 'global/core:datatype'),
    sampleRateHz: positive(global, 'core:sample_rate'),
    centreFrequencyHz: typeof segments[0]?.['core:frequency'] === 'number' ? segments[0]['core:frequency'] : null,
    channels: channelsOf(global, warnings),
    dataset: typeof global['core:dataset'] === 'string' ? global['core:dataset'] : null,
    headerBytes: count(segments[0], 'core:header_bytes'),
    trailingBytes: count(global, 'core:trailing_bytes'),
    endSample: endOfFirstTuning(segments, warnings),
    sha512: typeof global['core:sha512'] === 'string' ? global['core:sha512'].toLowerCase() : null,
    announcedGaps: announcedGaps(segments),
    warnings,
  };
}

function parseObject(bytes: ByteSource): Json {
  if (bytes.size === 0) throw new CaptureError('empty', 'The metadata file is empty. Give the .sigmf-meta file that belongs to the recording.', { offset: 0 });
  if (bytes.size > MAX_METADATA_BYTES) throw new CaptureError('too-large', `The metadata file has ${bytes.size} bytes; at most ${MAX_METADATA_BYTES} are read. Remove annotations or give the recording as raw I/Q.`, { offset: MAX_METADATA_BYTES });
  const text = decoded(bytes.read(0, bytes.size));
  const root = parsed(text);
  if (!isObject(root)) throw new CaptureError('malformed-metadata', 'The metadata must be a JSON object with "global" and "captures". Give the .sigmf-meta file of the recording.', { key: '' });
  return root;
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    const fault = jsonFault(text) ?? { offset: 0, line: 1, column: 1, what: 'it cannot be parsed' };
    const where = `line ${fault.line}, column ${fault.column}`;
    throw new CaptureError('malformed-metadata', `The metadata is not valid JSON at ${where}: ${fault.what}. Mend that line or export the metadata again.`, { offset: fault.offset, key: `line ${fault.line}` });
  }
}

function decoded(bytes: Uint8Array): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new CaptureError('malformed-metadata', 'The metadata is not UTF-8 text (SigMF asks for UTF-8). Save it again as UTF-8, or give the recording as raw I/Q.', { offset: 0 });
  }
}

function isObject(value: unknown): value is Json {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

function objectAt(root: Json, key: string): Json {
  const value = root[key];
  if (!isObject(value)) throw new CaptureError('incomplete-metadata', `The metadata has no "${key}" object. Add it with core:datatype and core:sample_rate.`, { key });
  return value;
}

/** Sorted by their first sample, as SigMF asks; none at all is read as one from the start. */
function segmentsOf(root: Json): Json[] {
  const list = Array.isArray(root['captures']) ? root['captures'].filter(isObject) : [];
  return list.sort((a, b) => startOf(a) - startOf(b));
}

function startOf(segment: Json): number {
  return count(segment, 'core:sample_start');
}

function required(global: Json, key: string): string {
  const value = global[key];
  if (typeof value === 'string') return value;
  throw new CaptureError('incomplete-metadata', `The metadata's global/${key} is missing or not text. Add it, for example "ci16_le", or give the data file as raw I/Q with --datatype.`, { key: `global/${key}` });
}

function positive(global: Json, key: string): number | null {
  const value = global[key];
  if (value === undefined || value === null) return null;
  if (typeof value === 'number' && value > 0 && Number.isFinite(value)) return value;
  throw new CaptureError('malformed-metadata', `The metadata's global/${key} must be a number of hertz above zero. Correct it, or remove it and give --sample-rate.`, { key: `global/${key}` });
}

function count(holder: Json | undefined, key: string): number {
  const value = holder?.[key] ?? 0;
  if (typeof value === 'number' && Number.isSafeInteger(value) && value >= 0) return value;
  throw new CaptureError('malformed-metadata', `The metadata's ${key} must be a whole number, zero or more. Correct it.`, { key });
}

function channelsOf(global: Json, warnings: string[]): number {
  const channels = global['core:num_channels'] === undefined ? 1 : count(global, 'core:num_channels');
  if (channels < 1 || channels > 1024) throw new CaptureError('malformed-metadata', `The metadata's global/core:num_channels is ${channels}; it must lie between 1 and 1024. Correct it.`, { key: 'global/core:num_channels' });
  if (channels > 1) warnings.push(`the recording has ${channels} channels; the first is read`);
  return channels;
}

/** A later segment on another frequency, or behind header bytes, is a recording of its own. */
function endOfFirstTuning(segments: readonly Json[], warnings: string[]): number | null {
  const first = segments[0];
  if (!first) return null;
  const next = segments.slice(1).find((s) => s['core:frequency'] !== undefined && s['core:frequency'] !== first['core:frequency'] || count(s, 'core:header_bytes') > 0);
  if (!next) return null;
  warnings.push(`the recording changes its tuning at sample ${startOf(next)}; what stands before is read`);
  return startOf(next);
}

function announcedGaps(segments: readonly Json[]): { atSample: number; missing: number }[] {
  const gaps: { atSample: number; missing: number }[] = [];
  segments.forEach((segment, i) => {
    const before = segments[i - 1];
    if (!before || typeof before['core:global_index'] !== 'number' || typeof segment['core:global_index'] !== 'number') return;
    const missing = segment['core:global_index'] - before['core:global_index'] - (startOf(segment) - startOf(before));
    if (missing > 0) gaps.push({ atSample: startOf(segment), missing });
  });
  return gaps;
}
