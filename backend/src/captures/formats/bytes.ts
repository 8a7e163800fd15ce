/**
 * Bytes that can be read at any place. `read` is synchronous, returns fewer than `length` bytes
 * only at the end, and the returned array belongs to the caller.
 */
export interface ByteSource {
  readonly size: number;
  read(offset: number, length: number): Uint8Array;
}

/** The part of `source` from `offset`, `size` bytes long; a read never leaves it. */
export function part(source: ByteSource, offset: number, size: number): ByteSource {
  const end = Math.max(0, Math.min(size, source.size - offset));
  return {
    size: end,
    read: (at, length) => source.read(offset + at, Math.max(0, Math.min(length, end - at))),
  };
}

/** Bytes already in memory. */
export function memoryBytes(bytes: Uint8Array): ByteSource {
  return {
    size: bytes.length,
    read: (offset, length) => bytes.slice(offset, offset + length),
  };
}

/** ASCII text of `length` bytes at `offset`; used for four-letter marks. */
export function asciiAt(bytes: Uint8Array, offset: number, length: number): string {
  let text = '';
  for (let i = offset; i < Math.min(offset + length, bytes.length); i += 1) text += String.fromCharCode(bytes[i]!);
  return text;
}
