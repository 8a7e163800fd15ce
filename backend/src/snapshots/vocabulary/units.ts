export type Dimension = 'frequency' | 'time' | 'count' | 'samples' | 'level' | 'ratio';

export interface Unit { readonly dimension: Dimension; /** Power of ten to the SI unit. */ readonly exponent: number; /** Further factor, where the unit is no power of ten. */ readonly factor?: number }

/** TS 38.211 clause 4.1: T_c = 1/(480 kHz · 4096), T_s = 64 T_c = 1/(15 kHz · 2048). */
export const TC_S = 1 / (480e3 * 4096);
export const TS_S = 1 / (15e3 * 2048);

const frequency = (exponent: number): Unit => ({ dimension: 'frequency', exponent });
const time = (exponent: number): Unit => ({ dimension: 'time', exponent });
const COUNT: Unit = { dimension: 'count', exponent: 0 };

/** A sample rate is a frequency: `msps` and `mhz` scale alike. */
const UNITS: Readonly<Record<string, Unit>> = {
  hz: frequency(0), khz: frequency(3), mhz: frequency(6), ghz: frequency(9),
  sps: frequency(0), ksps: frequency(3), msps: frequency(6), gsps: frequency(9),
  'sa/s': frequency(0), 'ksa/s': frequency(3), 'msa/s': frequency(6), 'gsa/s': frequency(9), 's/s': frequency(0), 'ks/s': frequency(3), 'ms/s': frequency(6),
  s: time(0), sec: time(0), seconds: time(0), ms: time(-3), msec: time(-3), us: time(-6), usec: time(-6), ns: time(-9), nsec: time(-9), ps: time(-12),
  tc: { dimension: 'time', exponent: 0, factor: TC_S }, ts: { dimension: 'time', exponent: 0, factor: TS_S },
  samples: { dimension: 'samples', exponent: 0 }, sample: { dimension: 'samples', exponent: 0 },
  prb: COUNT, prbs: COUNT, rb: COUNT, rbs: COUNT, blocks: COUNT, slots: COUNT, symbols: COUNT, bit: COUNT, bits: COUNT, points: COUNT,
  db: { dimension: 'level', exponent: 0 }, dbm: { dimension: 'level', exponent: 0 },
  ppm: { dimension: 'ratio', exponent: -6 }, ppb: { dimension: 'ratio', exponent: -9 },
};

/** Unit words that may end a key, longest first, so that `khz` is not taken for `hz`. */
export const UNIT_SUFFIXES: readonly string[] = Object.keys(UNITS).filter((u) => !u.includes('/')).sort((a, b) => b.length - a.length);

export const unitOf = (word: string): Unit | null => UNITS[word.trim().toLowerCase().replace(/[µμ]/g, 'u').replace(/^t_([cs])$/, 't$1')] ?? null;

/** Decimal text times a power of ten, rounded once: "3489.42" and 6 give exactly 3489420000. */
export function scaleDecimal(text: string, exponent: number): number {
  const found = /^([-+]?(?:\d+\.?\d*|\.\d+))(?:e([-+]?\d+))?$/i.exec(text.replace(/_/g, ''));
  if (found === null) return Number.NaN;
  return Number(`${found[1]}e${Number(found[2] ?? 0) + exponent}`);
}

/** The value in the SI unit. */
export const toSi = (text: string, unit: Unit): number => scaleDecimal(text, unit.exponent) * (unit.factor ?? 1);
