import { part, type ByteSource } from './bytes.js';
import { CaptureError } from './captureError.js';
import { captureKind } from './captureKind.js';
import { parseDatatype, type Datatype } from './datatype.js';
import { viewSamples, type Payload, type SampleLabel, type SampleView } from './sampleView.js';
import { readSigmfMetadata, type SigmfMetadata } from './sigmfMetadata.js';
import { tarEntries } from './tarEntries.js';
import { readWav } from './wavFile.js';

export interface CaptureRequest {
  /** The file's name, for its ending and for messages. */
  readonly name: string;
  readonly bytes: ByteSource;
  /** The bytes of a file that stands beside it (a SigMF data file), or null where there is none. */
  readonly beside: (name: string) => ByteSource | null;
  readonly datatype?: string | undefined;
  readonly sampleRateHz?: number | undefined;
  readonly centreFrequencyHz?: number | undefined;
}

/** A capture whose label was understood; no samples have been read yet. */
export interface OpenedCapture {
  readonly format: 'sigmf' | 'sigmf-archive' | 'wav' | 'raw';
  readonly label: SampleLabel;
  readonly payload: Payload;
  /** The samples under the label as it stands. */
  readonly samples: SampleView;
  /** The same bytes under a changed label. */
  readonly under: (change: Partial<SampleLabel>) => SampleView;
  /** Name of the data file where it is not the named file itself. */
  readonly dataFile: string | null;
  readonly statedSha512: string | null;
  /** The whole data file, over which `statedSha512` runs. */
  readonly dataBytes: ByteSource;
  readonly announcedGaps: SigmfMetadata['announcedGaps'];
  readonly warnings: readonly string[];
}

/** Opens a capture of any supported kind; throws CaptureError where it cannot be read. */
export function openCapture(request: CaptureRequest): OpenedCapture {
  const kind = captureKind(request.name, request.bytes, request.datatype !== undefined);
  if (kind === 'sigmf-metadata') return openPair(request);
  if (kind === 'sigmf-archive') return openArchive(request);
  return kind === 'wav' ? openWav(request) : openRaw(request);
}

function openPair(request: CaptureRequest): OpenedCapture {
  const metadata = readSigmfMetadata(request.bytes);
  const name = dataName(request.name, metadata);
  const data = request.beside(name);
  if (!data) throw new CaptureError('missing-data-file', `The data file "${name}" is not beside the metadata. Put it there, or name it in global/core:dataset.`, { key: 'global/core:dataset' });
  return openSigmf(request, metadata, { format: 'sigmf', data, name });
}

function openArchive(request: CaptureRequest): OpenedCapture {
  const entries = tarEntries(request.bytes);
  const metas = entries.filter((entry) => entry.name.endsWith('.sigmf-meta'));
  const meta = metas[0];
  if (!meta) throw new CaptureError('missing-data-file', 'The archive holds no .sigmf-meta file. Pack the metadata and its data file together.', { offset: 0 });
  const metadata = readSigmfMetadata(part(request.bytes, meta.offset, meta.size));
  const name = dataName(meta.name, metadata);
  const data = entries.find((entry) => entry.name === name);
  if (!data) throw new CaptureError('missing-data-file', `The archive holds "${meta.name}" but not its data file "${name}". Pack both.`, { offset: meta.offset });
  const opened = openSigmf(request, metadata, { format: 'sigmf-archive', data: part(request.bytes, data.offset, data.size), name: null });
  const others = metas.length > 1 ? [`the archive holds ${metas.length} recordings; "${meta.name}" is read`] : [];
  return { ...opened, warnings: [...opened.warnings, ...others] };
}

/** `core:dataset` names a file in the metadata's own folder; anything that leaves it is refused. */
function dataName(metaName: string, metadata: SigmfMetadata): string {
  if (metadata.dataset === null) return metaName.replace(/(\.sigmf-meta|\.[^./]*)?$/, '.sigmf-data');
  if (/[/\\\0]/.test(metadata.dataset) || metadata.dataset === '..') {
    throw new CaptureError('malformed-metadata', 'The metadata\'s global/core:dataset must be a plain file name in the same folder. Correct it.', { key: 'global/core:dataset' });
  }
  return metaName.replace(/[^/]*$/, metadata.dataset);
}

function openSigmf(request: CaptureRequest, metadata: SigmfMetadata, from: { format: OpenedCapture['format']; data: ByteSource; name: string | null }): OpenedCapture {
  const rate = metadata.sampleRateHz ?? request.sampleRateHz;
  if (rate === undefined) throw new CaptureError('incomplete-metadata', 'The metadata has no global/core:sample_rate. Add it in hertz, or give --sample-rate.', { key: 'global/core:sample_rate' });
  const label = { datatype: metadata.datatype, sampleRateHz: rate, centreFrequencyHz: metadata.centreFrequencyHz ?? request.centreFrequencyHz ?? null, swapIq: false };
  const frame = label.datatype.sampleBytes * metadata.channels;
  const room = from.data.size - metadata.headerBytes - metadata.trailingBytes;
  if (from.data.size > 0 && room <= 0) throw new CaptureError('truncated', `The data file has ${from.data.size} bytes, not more than its stated ${metadata.headerBytes} header and ${metadata.trailingBytes} trailing bytes. Correct the metadata or copy the data again.`, { offset: from.data.size });
  const wanted = metadata.endSample === null ? room : Math.min(room, metadata.endSample * frame);
  const bytes = part(from.data, metadata.headerBytes, wanted);
  return opened({ format: from.format, label, bytes, channels: metadata.channels }, {
    dataFile: from.name, statedSha512: metadata.sha512, dataBytes: from.data, announcedGaps: metadata.announcedGaps, warnings: metadata.warnings,
  });
}

function openWav(request: CaptureRequest): OpenedCapture {
  const wav = readWav(request.bytes);
  const sampleRateHz = request.sampleRateHz ?? wav.sampleRateHz;
  if (!(sampleRateHz > 0)) throw new CaptureError('incomplete-metadata', 'The WAV header states a sample rate of 0. Give --sample-rate in Hz.', { offset: 24 });
  const label = { datatype: wav.datatype, sampleRateHz, centreFrequencyHz: request.centreFrequencyHz ?? wav.centreFrequencyHz, swapIq: false };
  const whole = Math.floor(wav.payload.size / wav.datatype.sampleBytes) * wav.datatype.sampleBytes;
  return opened({ format: 'wav', label, bytes: part(wav.payload, 0, whole), channels: wav.pairs }, plain(request, wav.warnings));
}

function openRaw(request: CaptureRequest): OpenedCapture {
  const datatype = parseDatatype(request.datatype!, '--datatype');
  if (request.sampleRateHz === undefined) throw new CaptureError('missing-label', 'Raw I/Q does not say its sample rate. Give --sample-rate in Hz.', { key: '--sample-rate' });
  const label = { datatype, sampleRateHz: request.sampleRateHz, centreFrequencyHz: request.centreFrequencyHz ?? null, swapIq: false };
  return opened({ format: 'raw', label, bytes: request.bytes, channels: 1 }, plain(request, []));
}

function plain(request: CaptureRequest, warnings: readonly string[]): Extras {
  return { dataFile: null, statedSha512: null, dataBytes: request.bytes, announcedGaps: [], warnings };
}

type Extras = Pick<OpenedCapture, 'dataFile' | 'statedSha512' | 'dataBytes' | 'announcedGaps' | 'warnings'>;
interface Parts { format: OpenedCapture['format']; label: SampleLabel; bytes: ByteSource; channels: number }

function opened({ format, label, bytes, channels }: Parts, extras: Extras): OpenedCapture {
  if (bytes.size === 0) throw new CaptureError('empty', 'The capture holds no samples (its data part has 0 bytes). Record or copy it again.', { offset: 0 });
  const payload = { bytes, channels };
  const partial = checkWhole(bytes.size, label.datatype, channels);
  const under = (change: Partial<SampleLabel>): SampleView => viewSamples(payload, { ...label, ...change });
  return { format, label, payload, samples: under({}), under, ...extras, warnings: [...extras.warnings, ...partial] };
}

/**
 * A count of bytes that no whole number of samples fills is an error, save where another
 * datatype of at least 16 bits would fit it: then the label may be the fault, and is tried.
 */
function checkWhole(size: number, datatype: Datatype, channels: number): string[] {
  const rest = size % (datatype.sampleBytes * channels);
  if (rest === 0) return [];
  const what = `The capture's ${size} bytes are not a whole number of ${datatype.name} samples (${datatype.sampleBytes * channels} bytes each, ${rest} left over)`;
  if (size % 4 !== 0 || size < datatype.sampleBytes) throw new CaptureError(size % 2 === 1 ? 'odd-byte-count' : 'truncated', `${what}. The file is cut or its datatype is another: copy it again or correct the datatype.`, { offset: size - rest });
  return [`${what}; the rest is left out`];
}
