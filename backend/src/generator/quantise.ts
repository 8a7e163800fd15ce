/** Sample formats of SigMF's core grammar that the writers know. */
export const DATATYPES = ['cf32_le', 'cf32_be', 'cf64_le', 'ci32_le', 'ci16_le', 'ci16_be', 'cu16_le', 'ci8', 'cu8'] as const;
export type Datatype = (typeof DATATYPES)[number];

const BYTES: Record<string, number> = { f32: 4, f64: 8, i32: 4, i16: 2, u16: 2, i8: 1, u8: 1 };

/** Bytes of one component, I or Q. */
export function componentBytes(datatype: Datatype): number {
  return BYTES[datatype.slice(1).split('_')[0]];
}

/**
 * Samples at full scale 1 to bytes. Signed integers scale by 2^(n−1) and saturate; unsigned ones
 * are centred between their two middle codes (127.5 for 8 bits; common practice).
 */
export function toBytes(iq: Float32Array, datatype: Datatype): Uint8Array {
  const kind = datatype.slice(1).split('_')[0];
  const little = !datatype.endsWith('_be');
  const width = componentBytes(datatype);
  const bytes = new Uint8Array(iq.length * width);
  const view = new DataView(bytes.buffer);
  const writers: Record<string, (at: number, x: number) => void> = {
    f32: (at, x) => view.setFloat32(at, x, little),
    f64: (at, x) => view.setFloat64(at, x, little),
    i32: (at, x) => view.setInt32(at, rounded(x, 2147483648), little),
    i16: (at, x) => view.setInt16(at, rounded(x, 32768), little),
    i8: (at, x) => view.setInt8(at, rounded(x, 128)),
    u16: (at, x) => view.setUint16(at, Math.max(0, Math.min(65535, Math.round(x * 32767.5 + 32767.5))), little),
    u8: (at, x) => view.setUint8(at, Math.max(0, Math.min(255, Math.round(x * 127.5 + 127.5)))),
  };
  const write = writers[kind];
  for (let i = 0; i < iq.length; i++) write(i * width, iq[i]);
  return bytes;
}

function rounded(x: number, scale: number): number {
  return Math.max(-scale, Math.min(scale - 1, Math.round(x * scale)));
}
