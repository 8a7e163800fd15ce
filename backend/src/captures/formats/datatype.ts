import { CaptureError } from './captureError.js';

/** How one complex sample stands in the file: I first, then Q, each of `bits`. */
export interface Datatype {
  /** As SigMF writes it; `ci24_le` exists in WAV files only. */
  readonly name: string;
  readonly kind: 'float' | 'signed' | 'unsigned';
  readonly bits: 8 | 16 | 24 | 32 | 64;
  readonly littleEndian: boolean;
  /** Bytes of one complex sample. */
  readonly sampleBytes: number;
}

const GRAMMAR = /^(c|r)(f32|f64|i32|i24|i16|u32|u16|i8|u8)(_le|_be)?$/;
const KINDS = { f: 'float', i: 'signed', u: 'unsigned' } as const;
const KNOWN = 'cf32_le, cf64_le, ci32_le, ci16_le, cu32_le, cu16_le (or _be), ci8, cu8';

/**
 * Reads a SigMF datatype (SigMF 1.2.5, datatype grammar). A missing byte order on a wide
 * component is taken as little-endian, as recorders that leave it out do.
 */
export function parseDatatype(text: string, key = 'core:datatype'): Datatype {
  const name = text.trim().toLowerCase();
  const match = GRAMMAR.exec(name);
  if (!match) {
    throw new CaptureError('unsupported-datatype', `Datatype "${text.slice(0, 40)}" is not one that can be read. Use one of ${KNOWN}.`, { key });
  }
  if (match[1] === 'r') {
    throw new CaptureError('unsupported-datatype', `Datatype "${name}" holds real samples; the decode needs complex I and Q. Record or convert to a complex datatype such as ci16_le.`, { key });
  }
  return datatypeOf(match[2]!, match[3] !== '_be');
}

/** Name with its byte order, bytes worked out. `component` is such as `i16` or `f32`. */
export function datatypeOf(component: string, littleEndian: boolean): Datatype {
  const bits = Number(component.slice(1)) as Datatype['bits'];
  return {
    name: `c${component}${bits === 8 ? '' : littleEndian ? '_le' : '_be'}`,
    kind: KINDS[component[0] as 'f' | 'i' | 'u'],
    bits,
    littleEndian: bits === 8 || littleEndian,
    sampleBytes: bits / 4,
  };
}
