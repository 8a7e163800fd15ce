import { decodeFromZero, WIFI_CODE } from '../coding/viterbi.js';

/** L-SIG as sent: IEEE 802.11-2016 clause 17.3.4. */
export interface LegacySignal {
  readonly rateMbps: number;
  /** Octets of the PSDU (or what spoofs the duration of newer frames). */
  readonly length: number;
  readonly bits: Uint8Array;
}

/** RATE bits R1 to R4 (R1 first) to Mb/s at the 20 MHz clock, IEEE 802.11-2016 Table 17-6. */
const RATES: Readonly<Record<string, number>> = {
  1101: 6, 1111: 9, '0101': 12, '0111': 18, 1001: 24, 1011: 36, '0001': 48, '0011': 54,
};
/** Data bits a symbol, IEEE 802.11-2016 Table 17-4. */
export const BITS_PER_SYMBOL: Readonly<Record<number, number>> = { 6: 24, 9: 36, 12: 48, 18: 72, 24: 96, 36: 144, 48: 192, 54: 216 };

/** 48 soft bits to the field, or null where parity, reserved bit or rate say that it is none. */
export function decodeLegacySignal(soft: Float64Array): LegacySignal | null {
  const { bits } = decodeFromZero(soft, WIFI_CODE, true);
  const rateMbps = RATES[[...bits.subarray(0, 4)].join('')];
  const ones = bits.subarray(0, 18).reduce((sum, bit) => sum + bit, 0);
  const length = numberOf(bits, 5, 12);
  if (rateMbps === undefined || bits[4] !== 0 || ones % 2 !== 0 || length === 0) return null;
  return { rateMbps, length, bits };
}

/** Bits from..from+count, least significant first. */
export function numberOf(bits: ArrayLike<number>, from: number, count: number): number {
  let value = 0;
  for (let i = count - 1; i >= 0; i--) value = 2 * value + bits[from + i];
  return value;
}

/** CRC of HT-SIG, IEEE 802.11-2016 clause 19.3.9.4.4: x⁸ + x² + x + 1, from all ones, complemented; c7 in bit 7. */
export function crc8(bits: ArrayLike<number>): number {
  let register = 0xff;
  for (let i = 0; i < bits.length; i++) {
    const feedback = (register >> 7) ^ bits[i];
    register = ((register << 1) & 0xff) ^ (feedback ? 0x07 : 0);
  }
  return register ^ 0xff;
}

/** Whether bits[at ...] carry the upper `count` bits of the CRC of all bits before them, c7 first. */
function crcFits(bits: Uint8Array, at: number, count: number): boolean {
  const crc = crc8(bits.subarray(0, at));
  for (let i = 0; i < count; i++) if (bits[at + i] !== ((crc >> (7 - i)) & 1)) return false;
  return true;
}

export interface HtSignal {
  readonly format: 'ht';
  readonly mcs: number;
  readonly channels: 1 | 2;
  readonly guardIntervalUs: 0.4 | 0.8;
  readonly longTrainings: number;
  readonly length: number;
  readonly bits: Uint8Array;
}

/** 96 soft bits, the two symbols of HT-SIG (IEEE 802.11-2016 clause 19.3.9.4.3). */
export function decodeHtSignal(soft: Float64Array): HtSignal | null {
  const { bits } = decodeFromZero(soft, WIFI_CODE, true);
  if (!crcFits(bits, 34, 8)) return null;
  const mcs = numberOf(bits, 0, 7);
  const stbc = numberOf(bits, 28, 2);
  if (mcs > 76 || bits[26] !== 1 || stbc === 3) return null;
  const streams = mcs < 32 ? Math.floor(mcs / 8) + 1 : mcs === 32 ? 1 : mcs < 39 ? 2 : mcs < 53 ? 3 : 4;
  // Tables 19-13, 19-14: three space-time streams are trained with four fields, three extension streams likewise.
  const spaceTime = streams + stbc;
  const extension = numberOf(bits, 32, 2);
  return {
    format: 'ht', mcs, channels: bits[7] ? 2 : 1, guardIntervalUs: bits[31] ? 0.4 : 0.8,
    longTrainings: (spaceTime === 3 ? 4 : spaceTime) + (extension === 3 ? 4 : extension), length: numberOf(bits, 8, 16), bits,
  };
}

export interface VhtSignal {
  readonly format: 'vht';
  readonly mcs: number | null;
  readonly channels: 1 | 2 | 4 | 8;
  readonly guardIntervalUs: 0.4 | 0.8;
  readonly longTrainings: number;
  readonly bits: Uint8Array;
}

/** 96 soft bits, the two symbols of VHT-SIG-A (IEEE 802.11-2016 clause 21.3.8.3.3). */
export function decodeVhtSignal(soft: Float64Array): VhtSignal | null {
  const { bits } = decodeFromZero(soft, WIFI_CODE, true);
  if (!crcFits(bits, 34, 8) || bits[2] !== 1 || bits[23] !== 1 || bits[33] !== 1) return null;
  const group = numberOf(bits, 4, 6);
  const single = group === 0 || group === 63;
  const perUser = [10, 13, 16, 19].map((at) => numberOf(bits, at, 3));
  const streams = single ? perUser[0] + 1 : perUser.reduce((a, b) => a + b, 0);
  return {
    format: 'vht', mcs: single ? numberOf(bits, 28, 4) : null, channels: ([1, 2, 4, 8] as const)[numberOf(bits, 0, 2)],
    guardIntervalUs: bits[24] ? 0.4 : 0.8, longTrainings: trainingsFor(streams), bits,
  };
}

/** IEEE 802.11-2016 Table 21-13: odd numbers above one are rounded up. */
function trainingsFor(streams: number): number {
  return streams <= 1 ? 1 : 2 * Math.ceil(Math.min(streams, 8) / 2);
}

export interface HeSignal {
  readonly format: 'he';
  readonly kind: 'single user' | 'extended range' | 'multi user' | 'trigger-based';
  readonly mcs: number | null;
  readonly channels: 1 | 2 | 4 | 8;
  /** Null where only the trigger frame says. */
  readonly guardIntervalUs: 0.8 | 1.6 | 3.2 | null;
  readonly ltfType: 1 | 2 | 4 | null;
  readonly longTrainings: number | null;
  /** Symbols of HE-SIG-B. */
  readonly sigBSymbols: number;
  readonly bits: Uint8Array;
}

/** Length of the two HE-SIG-A symbols' bits that the CRC covers: 26 + 16 (IEEE 802.11ax clause 27.3.11.7; from memory). */
const HE_CRC_AT = 42;

/** 104 soft bits, HE-SIG-A; `remainder` is L-SIG's LENGTH modulo 3 and `extended` says that its symbols were repeated. */
export function decodeHeSignal(soft: Float64Array, remainder: number, extended: boolean): HeSignal | null {
  const { bits } = decodeFromZero(soft, WIFI_CODE, true);
  if (!crcFits(bits, HE_CRC_AT, 4)) return null;
  if (remainder === 2 && !extended) return multiUser(bits);
  return bits[0] === 1 ? singleUser(bits, extended) : extended ? null : triggerBased(bits);
}

type GuardAndTraining = readonly [0.8 | 1.6 | 3.2, 1 | 2 | 4];

function singleUser(bits: Uint8Array, extended: boolean): HeSignal {
  // 4x training with 0.8 µs is announced by DCM and STBC together.
  const last: GuardAndTraining = bits[7] === 1 && bits[35] === 1 ? [0.8, 4] : [3.2, 4];
  const table: readonly GuardAndTraining[] = [[0.8, 1], [0.8, 2], [1.6, 2], last];
  const [guardIntervalUs, ltfType] = table[numberOf(bits, 21, 2)];
  const doppler = bits[41] === 1;
  const streams = doppler ? numberOf(bits, 23, 2) + 1 : numberOf(bits, 23, 3) + 1;
  return {
    format: 'he', kind: extended ? 'extended range' : 'single user', mcs: numberOf(bits, 3, 4),
    channels: extended ? 1 : ([1, 2, 4, 8] as const)[numberOf(bits, 19, 2)],
    guardIntervalUs, ltfType, longTrainings: trainingsFor(streams), sigBSymbols: 0, bits,
  };
}

function multiUser(bits: Uint8Array): HeSignal | null {
  const width = numberOf(bits, 15, 3);
  // 4 to 7 are 80 and 160 MHz with parts left out.
  const channels = ([1, 2, 4, 8, 4, 4, 8, 8] as const)[width];
  const table: readonly GuardAndTraining[] = [[0.8, 4], [0.8, 2], [1.6, 2], [3.2, 4]];
  const [guardIntervalUs, ltfType] = table[numberOf(bits, 23, 2)];
  const coded = numberOf(bits, 34, bits[25] ? 2 : 3);
  return {
    format: 'he', kind: 'multi user', mcs: null, channels, guardIntervalUs, ltfType,
    longTrainings: [1, 2, 4, 6, 8][coded] ?? null, sigBSymbols: numberOf(bits, 18, 4) + 1, bits,
  };
}

function triggerBased(bits: Uint8Array): HeSignal {
  return {
    format: 'he', kind: 'trigger-based', mcs: null, channels: ([1, 2, 4, 8] as const)[numberOf(bits, 24, 2)],
    guardIntervalUs: null, ltfType: null, longTrainings: null, sigBSymbols: 0, bits,
  };
}

