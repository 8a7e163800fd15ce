import { Random } from '../random.js';
import { HE, rotated, type Tone, type WifiBandwidthMhz } from './tones.js';

const signs = (text: string) => [...text].map((c) => (c === '+' ? 1 : c === '-' ? -1 : 0));
const real = (values: readonly number[], first: number, step = 1): Tone[] =>
  values.flatMap((v, i): Tone[] => (v === 0 ? [] : [[first + step * i, v, 0]]));

/** Short training field, every fourth subcarrier, times 1 + j (IEEE 802.11 clause 17.3.3). */
export const SHORT_TRAINING: readonly Tone[] = signs('+-+--+0--++++').flatMap((v, i): Tone[] => (v === 0 ? [] : [[4 * i - 24, v, v]]));

const LEFT = '++--++-+-++++++--++-+-++++';
const RIGHT = '+--++-+-+-----++--+-+-++++';

/** Long training field, subcarriers -26 to 26 (clause 17.3.3). */
export const LONG_TRAINING: readonly Tone[] = real(signs(`${LEFT}0${RIGHT}`), -26);

const PART = `${LEFT}+${RIGHT}`;
const GAP_80 = '---++-+-++-';
const VHT_80 = `${PART}${GAP_80}${PART}+-+-000+--+${PART}${GAP_80}${PART}`;

/** HT-LTF and VHT-LTF before the turn of the 20 MHz parts (clauses 19.3.9.4.6 and 21.3.8.3.5; 80 MHz from memory). */
const HT_VHT_TRAINING: Record<WifiBandwidthMhz, readonly Tone[]> = {
  20: real(signs(`++${LEFT}0${RIGHT}--`), -28),
  40: real(signs(`${PART}---+000-++-${PART}`), -58),
  80: real(signs(VHT_80), -122),
  160: [...real(signs(VHT_80), -250), ...real(signs(VHT_80), 6)],
};

export function htVhtTraining(mhz: WifiBandwidthMhz): Tone[] {
  return rotated(HT_VHT_TRAINING[mhz], mhz);
}

/** Tones of the HE formats are 78.125 kHz apart: four to one of the legacy ones. */
const M = '---+++-+++-++-+';
const MINUS_M = '+++---+---+--+-';

/** HE-STF, every sixteenth tone, times (1 + j)/√2 (clause 27.3.11.9; 40 and 80 MHz from memory). */
export function heShortTraining(mhz: WifiBandwidthMhz): Tone[] {
  const eighty = `${M}+${MINUS_M}0${MINUS_M}+${MINUS_M}`;
  const tones = (text: string, first: number) => signs(text).flatMap((v, i): Tone[] => {
    const k = first + 16 * i;
    return v === 0 || k === 0 ? [] : [[k, v * Math.SQRT1_2, v * Math.SQRT1_2]];
  });
  if (mhz === 20) return tones(M, -112);
  if (mhz === 40) return tones(`${M}0${MINUS_M}`, -240);
  if (mhz === 80) return tones(eighty, -496);
  return [...tones(eighty, -1008), ...tones(eighty, 16)];
}

/** HE-LTF of 12.8 µs for 20 MHz, tones -122 to -2 and 2 to 122 (clause 27.3.11.10; equal in three open code bases). */
const HE_LONG_20 = signs(
  '--+-+-+++-+++--+-----++----++-+-++++-+--++-++++--+---++++-++-' +
  '---+--++-+----+-+------++-----+--+++-+++-+-+-----+++---+-+++-' +
  '+-+-++-+++--+--+-+-+++-+++--+-----++------+-+----+-++--+----+' +
  '+-+++++++-++----+--++-+----+-+--++++--+++++-++---+---+-+-++',
);

/**
 * HE-LTF: every fourth, second or every tone. Only the 20 MHz, 12.8 µs sequence is the standard's; the
 * others carry signs of this generator's own on the standard's tones, for their tables were not at hand.
 */
export function heLongTraining(mhz: WifiBandwidthMhz, size: 1 | 2 | 4): Tone[] {
  const used = HE[mhz].used;
  if (mhz === 20 && size === 4) return used.map((k, i): Tone => [k, HE_LONG_20[i], 0]);
  const random = new Random('he-ltf', mhz, size);
  return used.filter((k) => k % (4 / size) === 0).map((k): Tone => [k, random.chance(0.5) ? 1 : -1, 0]);
}

