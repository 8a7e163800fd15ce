import type { Datatype } from './datatype.js';

/**
 * Turns bytes into components at full scale 1: a signed integer is divided by 2^(bits-1), an
 * unsigned one is centred first (127.5 for 8 bits, common practice). `bytes` must hold a whole
 * number of components and start at an offset of 0 in its buffer.
 */
export function toComponents(bytes: Uint8Array, datatype: Datatype): Float32Array {
  const native = datatype.littleEndian ? bytes : swapped(bytes, datatype.bits / 8);
  if (datatype.kind === 'float') return floats(native, datatype.bits);
  if (datatype.bits === 24) return signed24(native);
  const values = integers(native, datatype);
  const out = new Float32Array(values.length);
  // A typed-array copy converts several times faster than a loop over unlike arrays.
  out.set(values);
  const half = 2 ** (datatype.bits - 1);
  const [scale, shift] = datatype.kind === 'signed' ? [1 / half, 0] : [1 / (half - 0.5), -1];
  for (let i = 0; i < out.length; i += 1) out[i] = out[i]! * scale + shift;
  return out;
}

function floats(bytes: Uint8Array, bits: number): Float32Array {
  if (bits === 32) return new Float32Array(bytes.buffer, bytes.byteOffset, bytes.length >> 2);
  const wide = new Float64Array(bytes.buffer, bytes.byteOffset, bytes.length >> 3);
  const out = new Float32Array(wide.length);
  out.set(wide);
  return out;
}

function integers(bytes: Uint8Array, { kind, bits }: Datatype): ArrayLike<number> {
  const at = [bytes.buffer, bytes.byteOffset, (bytes.length * 8) / bits] as const;
  if (kind === 'signed') return bits === 8 ? new Int8Array(...at) : bits === 16 ? new Int16Array(...at) : new Int32Array(...at);
  return bits === 8 ? new Uint8Array(...at) : bits === 16 ? new Uint16Array(...at) : new Uint32Array(...at);
}

function signed24(bytes: Uint8Array): Float32Array {
  const out = new Float32Array(Math.floor(bytes.length / 3));
  for (let i = 0, at = 0; i < out.length; i += 1, at += 3) {
    const value = bytes[at]! | (bytes[at + 1]! << 8) | (bytes[at + 2]! << 16);
    out[i] = ((value << 8) >> 8) / 8388608;
  }
  return out;
}

function swapped(bytes: Uint8Array, width: number): Uint8Array {
  const out = new Uint8Array(bytes.length);
  for (let at = 0; at + width <= bytes.length; at += width) {
    for (let i = 0; i < width; i += 1) out[at + i] = bytes[at + width - 1 - i]!;
  }
  return out;
}
