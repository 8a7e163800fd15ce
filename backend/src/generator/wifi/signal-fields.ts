import { convolve, field, interleave, PILOT_POLARITY, signalCrc } from './coding.js';
import { LEGACY, pilotPattern, HT_VHT, type Tone, type WifiBandwidthMhz } from './tones.js';

/** RATE bits R1 to R4, Table 17-6. */
const RATES: Record<number, readonly number[]> = {
  6: [1, 1, 0, 1], 9: [1, 1, 1, 1], 12: [0, 1, 0, 1], 18: [0, 1, 1, 1], 24: [1, 0, 0, 1], 36: [1, 0, 1, 1], 48: [0, 0, 0, 1], 54: [0, 0, 1, 1],
};

/** The 24 bits of L-SIG (IEEE 802.11 clause 17.3.4). */
export function legacySignalBits(rateMbps: number, length: number): Uint8Array {
  const head = [...RATES[rateMbps], 0, ...field(length, 12)];
  const parity = head.reduce((sum, bit) => sum ^ bit, 0);
  return Uint8Array.from([...head, parity, ...field(0, 6)]);
}

/** 24 coded bits' tones of L-SIG, BPSK; the HE formats add four more (clause 27.3.11.5). */
export function legacySignal(bits: Uint8Array, { polarity, extended }: { polarity: number; extended: boolean }): Tone[] {
  const data = LEGACY.used.filter((k) => !LEGACY.pilots.includes(k));
  const tones = [...bpsk(interleave(convolve(bits), 16), data), ...pilotTones(LEGACY.pilots, polarity, 0)];
  return extended ? [...tones, [-28, -1, 0], [-27, -1, 0], [27, -1, 0], [28, 1, 0]] : tones;
}

export function bpsk(bits: ArrayLike<number>, subcarriers: readonly number[]): Tone[] {
  return subcarriers.map((k, i): Tone => [k, 2 * bits[i] - 1, 0]);
}

/** Pilots of the symbol with index `n`: their pattern moves by one each symbol, times the polarity. */
export function pilotTones(pilots: readonly number[], polarity: number, n: number): Tone[] {
  const pattern = pilotPattern(pilots.length);
  return pilots.map((k, i): Tone => [k, pattern[(i + n) % pattern.length] * PILOT_POLARITY[polarity % 127], 0]);
}

/** Bits of HT-SIG, 48 (clause 19.3.9.4.3). */
export function htSignalBits({ mcs, mhz, length, shortGuard }: { mcs: number; mhz: WifiBandwidthMhz; length: number; shortGuard: boolean }): Uint8Array {
  const bits = [...field(mcs, 7), mhz === 40 ? 1 : 0, ...field(length, 16), 1, 1, 1, 0, ...field(0, 2), 0, shortGuard ? 1 : 0, ...field(0, 2)];
  return Uint8Array.from([...bits, ...signalCrc(bits), ...field(0, 6)]);
}

/** Bits of VHT-SIG-A, 48, for one user and one stream (clause 21.3.8.3.3). */
export function vhtSignalBits({ mcs, mhz, shortGuard, symbols }: { mcs: number; mhz: WifiBandwidthMhz; shortGuard: boolean; symbols: number }): Uint8Array {
  const first = [...field(Math.log2(mhz / 20), 2), 1, 0, ...field(63, 6), ...field(0, 3), ...field(0, 9), 0, 1];
  const second = [shortGuard ? 1 : 0, shortGuard && symbols % 10 === 9 ? 1 : 0, 0, 0, ...field(mcs, 4), 0, 1];
  const bits = [...first, ...second];
  return Uint8Array.from([...bits, ...signalCrc(bits), ...field(0, 6)]);
}

/** Bits of HE-SIG-A for one user, 52 (clause 27.3.11.7): the CRC's first four bits only. */
export function heSignalBits({ mcs, mhz, guardAndTraining }: { mcs: number; mhz: WifiBandwidthMhz; guardAndTraining: number }): Uint8Array {
  const first = [1, 0, 0, ...field(mcs, 4), 0, ...field(1, 6), 1, ...field(0, 4), ...field(Math.log2(mhz / 20), 2), ...field(guardAndTraining, 2), ...field(0, 3)];
  const second = [...field(127, 7), 0, 1, 0, 0, ...field(0, 2), 0, 1, 0];
  const bits = [...first, ...second];
  return Uint8Array.from([...bits, ...signalCrc(bits).subarray(0, 4), ...field(0, 6)]);
}

/** One of the two symbols of HT-SIG and VHT-SIG-A: 48 data tones; `quadrature` turns them by a quarter. */
export function signalSymbol(coded: Uint8Array, { polarity, quadrature }: { polarity: number; quadrature: boolean }): Tone[] {
  const data = LEGACY.used.filter((k) => !LEGACY.pilots.includes(k));
  const tones = bpsk(interleave(coded, 16), data);
  return [...(quadrature ? tones.map(([k, re]): Tone => [k, 0, re]) : tones), ...pilotTones(LEGACY.pilots, polarity, 0)];
}

/** One symbol of HE-SIG-A: 52 data tones, interleaved by 13 columns. */
export function heSignalSymbol(coded: Uint8Array, polarity: number): Tone[] {
  const { used, pilots } = HT_VHT[20];
  return [...bpsk(interleave(coded, 13), used.filter((k) => !pilots.includes(k))), ...pilotTones(pilots, polarity, 0)];
}

const SIG_B: Record<WifiBandwidthMhz, { length: number; reserved: number; repeats: number; columns: number }> = {
  20: { length: 17, reserved: 3, repeats: 1, columns: 13 },
  40: { length: 19, reserved: 2, repeats: 2, columns: 18 },
  80: { length: 21, reserved: 2, repeats: 4, columns: 26 },
  160: { length: 21, reserved: 2, repeats: 8, columns: 26 },
};

/** VHT-SIG-B for one user (clause 21.3.8.3.6); at 80 MHz and above a zero fills the last place. */
export function vhtSignalB(mhz: WifiBandwidthMhz, length: number): Tone[] {
  const { used, pilots } = HT_VHT[mhz];
  const data = used.filter((k) => !pilots.includes(k));
  const plan = SIG_B[mhz];
  const word = [...field(length, plan.length), ...field((1 << plan.reserved) - 1, plan.reserved), ...field(0, 6)];
  const segments = mhz === 160 ? 2 : 1;
  const coded = convolve(Array.from({ length: plan.repeats / segments }, () => word).flat());
  const part = Uint8Array.from({ length: data.length / segments }, (_, i) => coded[i] ?? 0);
  const mixed = interleave(part, plan.columns);
  return [...bpsk(segments === 2 ? [...mixed, ...mixed] : mixed, data), ...pilotTones(pilots, 3, 0)];
}
