import { bitsOf, crcBits } from '../crc.js';
import { goldSequence, qpsk } from '../gold.js';
import type { LtePrefix } from './timing.js';

/** Master information, TS 36.331 clause 6.2.2. */
export interface LteMib {
  readonly resourceBlocks: number;
  readonly phichDuration: 'normal' | 'extended';
  /** In sixths: oneSixth, half, one, two. */
  readonly phichResource: 0 | 1 | 2 | 3;
  readonly systemFrameNumber: number;
}

const BANDWIDTHS = [6, 15, 25, 50, 75, 100];
/** CRC16 of TS 36.212 clause 5.1.1, D^16 + D^12 + D^5 + 1. */
const CRC16 = 0x1021;
/** Mask of the number of antenna ports, TS 36.212 Table 5.3.1.1-1. */
const PORT_MASK: Record<number, number> = { 1: 0, 2: 0xffff, 4: 0x5555 };

/** Master information and its masked CRC, 40 bits. */
export function mibTransportBits(mib: LteMib, ports: number): Uint8Array {
  const a = [
    ...bitsOf(BANDWIDTHS.indexOf(mib.resourceBlocks), 3),
    mib.phichDuration === 'extended' ? 1 : 0,
    ...bitsOf(mib.phichResource, 2),
    ...bitsOf(mib.systemFrameNumber >> 2, 8),
    ...bitsOf(0, 10),
  ];
  const crc = crcBits(a, CRC16, 16);
  const mask = bitsOf(PORT_MASK[ports], 16);
  return Uint8Array.from([...a, ...crc.map((bit, i) => bit ^ mask[i])]);
}

/** Octal 133, 171, 165 (TS 36.212 Figure 5.1.3-1); the newest bit stands first. */
const TAPS = [[0, 2, 3, 5, 6], [0, 1, 2, 3, 6], [0, 1, 2, 4, 6]];

/** Tail-biting convolutional code of rate 1/3: three streams as long as the input. */
export function tailBiting(bits: Uint8Array): Uint8Array[] {
  const n = bits.length;
  return TAPS.map((taps) => Uint8Array.from({ length: n }, (_, i) => taps.reduce((sum, back) => sum ^ bits[(i - back + n) % n], 0)));
}

/** Column order of TS 36.212 Table 5.1.4-2. */
const COLUMNS = [1, 17, 9, 25, 5, 21, 13, 29, 3, 19, 11, 27, 7, 23, 15, 31, 0, 16, 8, 24, 4, 20, 12, 28, 2, 18, 10, 26, 6, 22, 14, 30];

/** Rate matching of clause 5.1.4.2: each stream by columns, the three one after another, round and round. */
export function rateMatch(streams: readonly Uint8Array[], e: number): Uint8Array {
  const ring = streams.flatMap((stream) => {
    const rows = Math.ceil(stream.length / 32);
    const empty = 32 * rows - stream.length;
    const out: number[] = [];
    for (const column of COLUMNS) for (let row = 0; row < rows; row++) {
      const at = 32 * row + column - empty;
      if (at >= 0) out.push(stream[at]);
    }
    return out;
  });
  return Uint8Array.from({ length: e }, (_, k) => ring[k % ring.length]);
}

/** QPSK points that one frame carries: a quarter of the 40 ms word (TS 36.211 clause 6.6), interleaved. */
export function ltePbchPoints(mib: LteMib, { cellId, prefix, ports }: { cellId: number; prefix: LtePrefix; ports: number }): Float64Array {
  const quarter = prefix === 'normal' ? 480 : 432;
  const word = rateMatch(tailBiting(mibTransportBits(mib, ports)), 4 * quarter);
  const c = goldSequence(cellId, 4 * quarter);
  const from = quarter * (mib.systemFrameNumber % 4);
  return qpsk(word.map((bit, i) => bit ^ c[i]).subarray(from, from + quarter));
}
