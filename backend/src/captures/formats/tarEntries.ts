import { asciiAt, type ByteSource } from './bytes.js';
import { CaptureError } from './captureError.js';

/** A regular file in a plain tar archive (POSIX.1-2001, ustar and pax; GNU long names). */
export interface TarEntry {
  readonly name: string;
  readonly offset: number;
  readonly size: number;
}

const BLOCK = 512;
const MAX_ENTRIES = 4096;
const MAX_EXTENSION_BYTES = 64 * 1024;

/**
 * Lists the regular files. Links, devices, absolute names and `..` are refused rather than
 * skipped: an archive that carries them was not made by a recorder.
 */
export function tarEntries(bytes: ByteSource): TarEntry[] {
  const entries: TarEntry[] = [];
  let overrides: { name?: string; size?: number } = {};
  let headers = 0;
  for (let at = 0; at < bytes.size;) {
    const block = bytes.read(at, BLOCK);
    if (block.length < BLOCK) throw new CaptureError('truncated', `The archive ends inside the header that starts at byte ${at}. Copy the archive again.`, { offset: at });
    if (block.every((byte) => byte === 0)) break;
    headers += 1;
    if (headers > MAX_ENTRIES) throw new CaptureError('unsafe-archive', `The archive has more than ${MAX_ENTRIES} entries. Give an archive with the one recording.`, { offset: at });
    checkSum(block, at);
    const type = String.fromCharCode(block[156]!) === '\0' ? '0' : String.fromCharCode(block[156]!);
    const size = overrides.size ?? sizeOf(block, at);
    const data = at + BLOCK;
    at = data + Math.ceil(size / BLOCK) * BLOCK;
    if (data + size > bytes.size) throw new CaptureError('truncated', `The archive ends at byte ${bytes.size}, inside the entry that starts at byte ${data} and needs ${size} bytes. Copy the archive again.`, { offset: bytes.size });
    if (type === 'x' || type === 'L') {
      overrides = { ...overrides, ...extension(bytes, { data, size, type }) };
      continue;
    }
    if (type !== 'g' && type !== '5') entries.push(regular({ name: overrides.name ?? nameOf(block), offset: data, size }, type));
    overrides = {};
  }
  return entries;
}

function regular(entry: TarEntry, type: string): TarEntry {
  if (type !== '0' && type !== '7') throw new CaptureError('unsafe-archive', `The archive entry "${entry.name.slice(0, 80)}" is not a regular file (type "${type}"). Pack the files themselves, without links.`, { offset: entry.offset - BLOCK });
  if (entry.name.startsWith('/') || entry.name.split('/').includes('..')) throw new CaptureError('unsafe-archive', `The archive entry "${entry.name.slice(0, 80)}" points outside the archive. Pack it with relative names.`, { offset: entry.offset - BLOCK });
  return entry;
}

function text(block: Uint8Array, offset: number, length: number): string {
  const bytes = block.subarray(offset, offset + length);
  const end = bytes.indexOf(0);
  return new TextDecoder().decode(end < 0 ? bytes : bytes.subarray(0, end));
}

function nameOf(block: Uint8Array): string {
  const prefix = asciiAt(block, 257, 5) === 'ustar' && asciiAt(block, 257, 6) !== 'ustar ' ? text(block, 345, 155) : '';
  return prefix ? `${prefix}/${text(block, 0, 100)}` : text(block, 0, 100);
}

/** Octal text, or base 256 where the first bit is set (GNU, sizes above 8 GiB). */
function sizeOf(block: Uint8Array, at: number): number {
  const field = block.subarray(124, 136);
  if (field[0]! & 0x80) return field.subarray(1).reduce((sum, byte) => sum * 256 + byte, 0);
  const digits = text(block, 124, 12).trim();
  if (!/^[0-7]*$/.test(digits)) throw new CaptureError('unreadable', `The archive's header at byte ${at} has no readable size. Pack the recording again as a plain tar.`, { offset: at });
  return digits === '' ? 0 : parseInt(digits, 8);
}

function checkSum(block: Uint8Array, at: number): void {
  const stated = parseInt(text(block, 148, 8).trim(), 8);
  const sum = block.reduce((total, byte, i) => total + (i >= 148 && i < 156 ? 32 : byte), 0);
  if (sum !== stated) throw new CaptureError('unreadable', `The archive's header at byte ${at} does not match its checksum: this is not a plain tar, or it is damaged. Pack the recording again as a plain tar.`, { offset: at });
}

function extension(bytes: ByteSource, entry: { data: number; size: number; type: string }): { name?: string; size?: number } {
  const body = bytes.read(entry.data, Math.min(entry.size, MAX_EXTENSION_BYTES));
  if (entry.type === 'L') return { name: text(body, 0, body.length) };
  return paxRecords(new TextDecoder().decode(body));
}

/** Records `LENGTH KEY=VALUE\n`; only the name and the size matter here. */
function paxRecords(body: string): { name?: string; size?: number } {
  const found: { name?: string; size?: number } = {};
  for (const line of body.split('\n')) {
    const match = /^\d+ ([^=]+)=(.*)$/.exec(line);
    if (match?.[1] === 'path') found.name = match[2]!;
    if (match?.[1] === 'size' && /^\d{1,15}$/.test(match[2]!)) found.size = Number(match[2]);
  }
  return found;
}
