import { randomPoint, type Modulation } from '../constellations.js';
import type { Random } from '../random.js';
import { convolve } from './coding.js';
import { heSignalBits, heSignalSymbol, htSignalBits, legacySignal, legacySignalBits, pilotTones, signalSymbol, vhtSignalB, vhtSignalBits } from './signal-fields.js';
import type { WifiSpec } from './spec.js';
import { duplicated, HE, HT_VHT, LEGACY, rotated, type Tone, type ToneSet } from './tones.js';
import { heLongTraining, heShortTraining, htVhtTraining, LONG_TRAINING, SHORT_TRAINING } from './training.js';

/** A stretch of a frame: tones at a spacing, sent for `usefulUs` after a guard that continues them backwards. */
export interface Field {
  readonly spacingHz: 312_500 | 78_125;
  readonly tones: readonly Tone[];
  readonly guardUs: number;
  readonly usefulUs: number;
}

const MODULATION: readonly Modulation[] = ['bpsk', 'qpsk', 'qpsk', '16qam', '16qam', '64qam', '64qam', '64qam', '256qam', '256qam'];
/** Data bits a symbol at 6 Mb/s and above, Table 17-4. */
const LEGACY_RATES: readonly { mbps: number; bits: number; modulation: Modulation }[] = [
  { mbps: 6, bits: 24, modulation: 'bpsk' }, { mbps: 12, bits: 48, modulation: 'qpsk' }, { mbps: 18, bits: 72, modulation: 'qpsk' }, { mbps: 24, bits: 96, modulation: '16qam' },
  { mbps: 36, bits: 144, modulation: '16qam' }, { mbps: 48, bits: 192, modulation: '64qam' }, { mbps: 54, bits: 216, modulation: '64qam' },
];

const legacy = (tones: readonly Tone[], spec: WifiSpec, usefulUs = 3.2, guardUs = 0.8): Field => ({ spacingHz: 312_500, tones: duplicated(tones, spec.mhz), guardUs, usefulUs });

/** The fields of one frame with `symbols` data symbols, in order of time (before any 10 or 5 MHz clocking). */
export function wifiFrame(spec: WifiSpec, symbols: number, random: Random): Field[] {
  const preamble = [legacy(SHORT_TRAINING, spec, 8, 0), legacy(LONG_TRAINING, spec, 6.4, 1.6)];
  if (spec.format === 'legacy') return [...preamble, ...legacyBody(spec, symbols, random)];
  const rest = spec.format === 'he' ? heBody(spec, symbols, random) : spec.format === 'vht' ? vhtBody(spec, symbols, random) : htBody(spec, symbols, random);
  const us = 20 + rest.reduce((sum, f) => sum + f.guardUs + f.usefulUs, 0);
  // LENGTH only tells others how long to wait: clauses 19.3.9.3.5, 21.3.8.2.4, 27.3.11.5.
  const length = 3 * Math.ceil((us - 20) / 4 - 1e-9) - 3 - (spec.format === 'he' ? 2 : 0);
  const signal = legacySignal(legacySignalBits(6, Math.min(4095, length)), { polarity: 0, extended: spec.format === 'he' });
  if (spec.format !== 'he') return [...preamble, legacy(signal, spec), ...rest];
  const repeat = legacySignal(legacySignalBits(6, Math.min(4095, length)), { polarity: 1, extended: true });
  return [...preamble, legacy(signal, spec), legacy(repeat, spec), ...rest.slice(1)];
}

function legacyBody(spec: WifiSpec, symbols: number, random: Random): Field[] {
  const rate = LEGACY_RATES[Math.min(spec.mcs, LEGACY_RATES.length - 1)];
  const length = Math.max(1, Math.min(4095, Math.floor((symbols * rate.bits - 22) / 8)));
  const data = Array.from({ length: Math.ceil((16 + 8 * length + 6) / rate.bits) }, (_, n) => legacy(dataTones(LEGACY, { modulation: rate.modulation, random, polarity: n + 1, n: 0 }), spec));
  return [legacy(legacySignal(legacySignalBits(rate.mbps, length), { polarity: 0, extended: false }), spec), ...data];
}

function htBody(spec: WifiSpec, symbols: number, random: Random): Field[] {
  const announced = spec.announced ?? spec;
  const length = Math.min(65535, symbols * 8);
  const coded = convolve(htSignalBits({ mcs: spec.mcs % 8, mhz: announced.mhz, length, shortGuard: announced.guardUs < 0.8 }));
  return [
    legacy(signalSymbol(coded.subarray(0, 48), { polarity: 1, quadrature: true }), spec),
    legacy(signalSymbol(coded.subarray(48), { polarity: 2, quadrature: true }), spec),
    legacy(SHORT_TRAINING, spec, 4, 0),
    { spacingHz: 312_500, tones: htVhtTraining(spec.mhz), guardUs: 0.8, usefulUs: 3.2 },
    ...htVhtData(spec, symbols, { random, firstPolarity: 3 }),
  ];
}

function vhtBody(spec: WifiSpec, symbols: number, random: Random): Field[] {
  const announced = spec.announced ?? spec;
  const coded = convolve(vhtSignalBits({ mcs: spec.mcs, mhz: announced.mhz, shortGuard: announced.guardUs < 0.8, symbols }));
  return [
    legacy(signalSymbol(coded.subarray(0, 48), { polarity: 1, quadrature: false }), spec),
    legacy(signalSymbol(coded.subarray(48), { polarity: 2, quadrature: true }), spec),
    legacy(SHORT_TRAINING, spec, 4, 0),
    { spacingHz: 312_500, tones: htVhtTraining(spec.mhz), guardUs: 0.8, usefulUs: 3.2 },
    { spacingHz: 312_500, tones: rotated(vhtSignalB(spec.mhz, symbols), spec.mhz), guardUs: 0.8, usefulUs: 3.2 },
    ...htVhtData(spec, symbols, { random, firstPolarity: 4 }),
  ];
}

function htVhtData(spec: WifiSpec, symbols: number, { random, firstPolarity }: { random: Random; firstPolarity: number }): Field[] {
  const set = HT_VHT[spec.mhz];
  return Array.from({ length: symbols }, (_, n): Field => ({
    spacingHz: 312_500,
    tones: rotated(dataTones(set, { modulation: MODULATION[spec.mcs], random, polarity: n + firstPolarity, n }), spec.mhz),
    guardUs: spec.guardUs,
    usefulUs: 3.2,
  }));
}

/** GI + LTF size of HE-SIG-A for one user (Table 27-18). */
export function guardAndTrainingCode(guardUs: number, training: 1 | 2 | 4): number {
  const code = [[1, 0.8], [2, 0.8], [2, 1.6], [4, 3.2]].findIndex(([t, g]) => t === training && g === guardUs);
  if (code < 0) throw new RangeError(`HE has no ${training}x training with a guard of ${guardUs} µs for one user`);
  return code;
}

/** First entry: the room of the repeated L-SIG. */
function heBody(spec: WifiSpec, symbols: number, random: Random): Field[] {
  const announced = spec.announced ?? spec;
  const training = spec.heTraining ?? 4;
  const coded = convolve(heSignalBits({ mcs: spec.mcs, mhz: announced.mhz, guardAndTraining: guardAndTrainingCode(announced.guardUs, announced.heTraining ?? 4) }));
  const set = HE[spec.mhz];
  return [
    legacy([], spec),
    legacy(heSignalSymbol(coded.subarray(0, 52), 2), spec),
    legacy(heSignalSymbol(coded.subarray(52), 3), spec),
    { spacingHz: 78_125, tones: heShortTraining(spec.mhz), guardUs: 0, usefulUs: 4 },
    { spacingHz: 78_125, tones: heLongTraining(spec.mhz, training), guardUs: spec.guardUs, usefulUs: 3.2 * training },
    ...Array.from({ length: symbols }, (_, n): Field => ({
      spacingHz: 78_125, tones: dataTones(set, { modulation: MODULATION[spec.mcs], random, polarity: n + 4, n }), guardUs: spec.guardUs, usefulUs: 12.8,
    })),
  ];
}

function dataTones(set: ToneSet, { modulation, random, polarity, n }: { modulation: Modulation; random: Random; polarity: number; n: number }): Tone[] {
  const point = new Float64Array(2);
  const data = set.used.filter((k) => !set.pilots.includes(k)).map((k): Tone => {
    randomPoint(point, 0, { modulation, random });
    return [k, point[0], point[1]];
  });
  return [...data, ...pilotTones(set.pilots, polarity, n)];
}
