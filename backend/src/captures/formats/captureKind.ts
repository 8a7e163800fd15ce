import { asciiAt, type ByteSource } from './bytes.js';
import { CaptureError } from './captureError.js';

export type CaptureKind = 'sigmf-metadata' | 'sigmf-archive' | 'wav' | 'raw';

const PCAP_MARKS = ['a1b2c3d4', 'd4c3b2a1', 'a1b23c4d', '4d3cb2a1', 'a1b2cd34', '34cdb2a1', '0a0d0d0a'];
const COMPRESSED: readonly (readonly [string, string])[] = [
  ['1f8b', 'gzip'], ['425a68', 'bzip2'], ['fd377a58', 'xz'], ['28b52ffd', 'zstd'], ['504b0304', 'zip'], ['377abcaf', '7z'],
];

/**
 * Decides by content first, by name where the content leaves it open. `labelled` is true where a
 * datatype was given, so that bytes without any mark are raw I/Q.
 */
export function captureKind(name: string, bytes: ByteSource, labelled: boolean): CaptureKind {
  if (bytes.size === 0) throw new CaptureError('empty', 'The capture is empty (0 bytes). Record or copy it again.', { offset: 0 });
  const head = bytes.read(0, 512);
  const hex = Array.from(head.subarray(0, 4), (byte) => byte.toString(16).padStart(2, '0')).join('');
  const ending = (/\.([a-z0-9-]+)$/i.exec(name)?.[1] ?? '').toLowerCase();
  if (PCAP_MARKS.includes(hex) || ending === 'pcap' || ending === 'pcapng') {
    throw new CaptureError('not-yet-supported', 'Packet captures of the fronthaul are not decoded yet. Give an I/Q capture (SigMF, WAV or raw) of the same link.', { offset: 0 });
  }
  if (['RIFF', 'RF64', 'BW64', 'RIFX'].includes(asciiAt(head, 0, 4)) && 'WAVE'.startsWith(asciiAt(head, 8, 4))) return 'wav';
  if (asciiAt(head, 257, 5) === 'ustar') return 'sigmf-archive';
  if (ending === 'sigmf-meta') return 'sigmf-metadata';
  return unmarked({ hex, ending, labelled, looksJson: /^\uFEFF?\s*\{/.test(new TextDecoder().decode(head)) });
}

function unmarked(seen: { hex: string; ending: string; labelled: boolean; looksJson: boolean }): CaptureKind {
  const packed = COMPRESSED.find(([mark]) => seen.hex.startsWith(mark))?.[1];
  if (packed && (!seen.labelled || seen.ending === 'sigmf')) {
    throw new CaptureError('compressed', `The capture is compressed (${packed}). Unpack it first: only a plain tar or plain samples are read.`, { offset: 0 });
  }
  if (seen.labelled && seen.ending !== 'sigmf') return 'raw';
  if (seen.ending === 'wav') throw new CaptureError('mislabelled', 'The file is named .wav but does not start with RIFF or RF64. Give it as raw I/Q with --datatype and --sample-rate, or record it again.', { offset: 0 });
  if (seen.ending === 'sigmf') throw new CaptureError('mislabelled', 'The file is named .sigmf but is not a plain tar archive (no "ustar" mark at byte 257). Pack the metadata and data files into a plain tar.', { offset: 257 });
  if (seen.looksJson) return 'sigmf-metadata';
  throw new CaptureError('missing-label', 'Nothing in the file says how its samples are stored. For raw I/Q give --datatype (such as ci16_le) and --sample-rate in Hz.', { key: '--datatype' });
}
