import { SnapshotError } from '../error.js';
import { LIMITS } from './tree.js';

export interface DecodedText { readonly text: string; readonly encoding: 'utf-8' | 'utf-16le' | 'utf-16be' }

const SAVE_AS = 'Save the file as UTF-8 text and send it again.';

const ARCHIVES: readonly [string, readonly number[]][] = [
  ['a zip archive', [0x50, 0x4b, 0x03, 0x04]],
  ['gzip-compressed', [0x1f, 0x8b]],
  ['a PDF document', [0x25, 0x50, 0x44, 0x46, 0x2d]],
  ['xz-compressed', [0xfd, 0x37, 0x7a, 0x58, 0x5a]],
];

const startsWith = (bytes: Uint8Array, magic: readonly number[]): boolean => magic.every((b, i) => bytes[i] === b);

/**
 * Bytes to text with `\n` line ends: UTF-8, with or without its mark, and UTF-16 with its mark.
 * Throws SnapshotError for anything else, with the byte offset of the first bad byte.
 */
export function decodeText(bytes: Uint8Array): DecodedText {
  refuseBySize(bytes);
  for (const [what, magic] of ARCHIVES) {
    if (startsWith(bytes, magic)) throw new SnapshotError('binary', `The file is ${what}, not configuration text. Unpack or export it as text first.`, { offset: 0 });
  }
  const decoded = byMark(bytes);
  const text = decoded.text.replace(/\r\n?/g, '\n');
  refuseControls(text, decoded.encoding);
  refuseLongLines(text);
  if (text.trim() === '') throw new SnapshotError('empty', 'The file holds no text. Send the configuration snapshot itself.', { offset: 0 });
  return { text, encoding: decoded.encoding };
}

function refuseBySize(bytes: Uint8Array): void {
  if (bytes.length === 0) throw new SnapshotError('empty', 'The file is empty (0 bytes). Send the configuration snapshot itself.', { offset: 0 });
  if (bytes.length > LIMITS.bytes) {
    throw new SnapshotError('too-large', `The file has ${bytes.length} bytes; a snapshot may have ${LIMITS.bytes}. Send the part with the radio settings.`);
  }
}

function byMark(bytes: Uint8Array): DecodedText {
  if (startsWith(bytes, [0xff, 0xfe, 0, 0]) || startsWith(bytes, [0, 0, 0xfe, 0xff])) {
    throw new SnapshotError('encoding', `Byte 0: the file is UTF-32 text, which is not read. ${SAVE_AS}`, { offset: 0 });
  }
  if (startsWith(bytes, [0xff, 0xfe])) return utf16(bytes, 'utf-16le');
  if (startsWith(bytes, [0xfe, 0xff])) return utf16(bytes, 'utf-16be');
  const body = startsWith(bytes, [0xef, 0xbb, 0xbf]) ? bytes.subarray(3) : bytes;
  if (looksLikeUnmarkedUtf16(body)) {
    throw new SnapshotError('encoding', `Byte ${body[0] === 0 ? 0 : 1}: every other byte is zero, so the file seems to be UTF-16 without a byte-order mark. ${SAVE_AS}`, { offset: body[0] === 0 ? 0 : 1 });
  }
  return utf8(bytes, body);
}

function utf16(bytes: Uint8Array, encoding: 'utf-16le' | 'utf-16be'): DecodedText {
  if (bytes.length % 2 === 1) {
    throw new SnapshotError('encoding', `Byte ${bytes.length - 1}: UTF-16 text with half a character at its end. ${SAVE_AS}`, { offset: bytes.length - 1 });
  }
  try {
    return { text: new TextDecoder(encoding, { fatal: true }).decode(bytes), encoding };
  } catch {
    throw new SnapshotError('encoding', `The file is marked as UTF-16 but holds half a surrogate pair. ${SAVE_AS}`, { offset: 2 });
  }
}

function utf8(bytes: Uint8Array, body: Uint8Array): DecodedText {
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(body), encoding: 'utf-8' };
  } catch {
    const offset = firstBadUtf8(body) + bytes.length - body.length;
    const line = lineAt(bytes, offset);
    throw new SnapshotError('encoding', `Byte ${offset} (line ${line}): 0x${bytes[offset].toString(16).padStart(2, '0')} does not belong to UTF-8 text. ${SAVE_AS}`, { offset, line });
  }
}

/** Offset of the first byte at which strict decoding fails, by halving. */
function firstBadUtf8(body: Uint8Array): number {
  let good = 0;
  let bad = body.length;
  while (bad - good > 1) {
    const middle = (good + bad) >> 1;
    if (prefixIsUtf8(body, middle)) good = middle; else bad = middle;
  }
  // A sequence that breaks off was good until its next byte came: its first byte is the bad one.
  for (let start = good - 1; start >= 0 && good - start <= 3; start -= 1) {
    if ((body[start] & 0xc0) === 0xc0) return prefixIsWhole(body, good) ? good : start;
    if (body[start] < 0x80) break;
  }
  return good;
}

function prefixIsUtf8(body: Uint8Array, end: number): boolean {
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(body.subarray(0, end), { stream: true });
    return true;
  } catch {
    return false;
  }
}

function prefixIsWhole(body: Uint8Array, end: number): boolean {
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(body.subarray(0, end));
    return true;
  } catch {
    return false;
  }
}

function lineAt(bytes: Uint8Array, offset: number): number {
  let line = 1;
  for (let i = 0; i < offset; i += 1) if (bytes[i] === 0x0a) line += 1;
  return line;
}

function looksLikeUnmarkedUtf16(body: Uint8Array): boolean {
  const pairs = Math.min(body.length >> 1, 512);
  if (pairs < 2) return false;
  let even = 0;
  let odd = 0;
  for (let i = 0; i < pairs; i += 1) {
    if (body[2 * i] === 0) even += 1;
    if (body[2 * i + 1] === 0) odd += 1;
  }
  return (even > 0.7 * pairs && odd === 0) || (odd > 0.7 * pairs && even === 0);
}

function refuseControls(text: string, encoding: DecodedText['encoding']): void {
  // oxlint-disable-next-line no-control-regex -- control characters are what is looked for
  const at = text.search(/[\u0000-\u0008\u000b\u000e-\u001f]/);
  if (at < 0) return;
  const before = text.slice(0, at);
  const line = before.split('\n').length;
  const offset = encoding === 'utf-8' ? new TextEncoder().encode(before).length : 2 + 2 * at;
  throw new SnapshotError('binary', `Line ${line}, about byte ${offset}: a control character (code ${text.charCodeAt(at)}), so this is not configuration text. Export the settings as text.`, { offset, line });
}

function refuseLongLines(text: string): void {
  let line = 1;
  for (let start = 0; start <= text.length; line += 1) {
    const found = text.indexOf('\n', start);
    const end = found < 0 ? text.length : found;
    if (end - start > LIMITS.lineChars) {
      throw new SnapshotError('line-too-long', `Line ${line} has ${end - start} characters; ${LIMITS.lineChars} are read. Break the file into lines (pretty-print it).`, { line });
    }
    start = end + 1;
  }
}
