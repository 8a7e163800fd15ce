/** One way in which the symbols of an OFDM signal can follow each other. Times in seconds. */
export interface Hypothesis {
  readonly label: string;
  readonly family: 'cellular' | 'wifi' | 'free';
  readonly subcarrierSpacingHz: number;
  readonly cyclicPrefix: 'normal' | 'extended' | null;
  readonly usefulS: number;
  /** The prefixes of one period, in order; the period is their sum and that of their useful parts. */
  readonly prefixesS: readonly number[];
  /** The ordinary (shorter) prefix. */
  readonly cyclicPrefixS: number;
  /** Every how many symbols a longer prefix stands; null where all are equal. */
  readonly longEvery: number | null;
}

/** Sampling period of LTE, 1/(15 kHz · 2048) (TS 36.211 clause 4); NR's κ·T_c (TS 38.211 clause 4.1). */
const TS = 1 / 30.72e6;

/**
 * Normal prefix, TS 38.211 clause 5.3.1 (µ = 0: also TS 36.211 Table 6.12-1): 144·2^−µ T_s, and
 * 16 T_s more at the start of each half subframe. With `stretch`, all times are multiplied: a
 * capture whose rate label is wrong shows the pattern of one numerology at another's spacing.
 */
export function normalPrefix(mu: number, stretch = 1): Hypothesis {
  const ordinary = 144 * 2 ** -mu * TS * stretch;
  const symbols = 7 * 2 ** mu;
  const prefixesS = Array.from({ length: symbols }, (_, l) => (l === 0 ? ordinary + 16 * TS * stretch : ordinary));
  const spacing = (15e3 * 2 ** mu) / stretch;
  const label = stretch === 1 ? `${name(spacing)}, normal prefix` : `${name(spacing)}, longer prefix every ${symbols} symbols`;
  return {
    label, family: 'cellular', subcarrierSpacingHz: spacing, cyclicPrefix: 'normal', usefulS: 2048 * 2 ** -mu * TS * stretch,
    prefixesS, cyclicPrefixS: ordinary, longEvery: symbols,
  };
}

/** Extended prefix, a quarter of the useful symbol: 60 kHz in NR, 15 and 7.5 kHz in LTE (TS 36.211 Table 6.12-1). */
export function extendedPrefix(spacingHz: number): Hypothesis {
  const usefulS = 1 / spacingHz;
  const symbols = Math.round(0.5e-3 / (1.25 * usefulS));
  return {
    label: `${name(spacingHz)}, extended prefix`, family: 'cellular', subcarrierSpacingHz: spacingHz, cyclicPrefix: 'extended', usefulS,
    prefixesS: Array.from({ length: symbols }, () => usefulS / 4), cyclicPrefixS: usefulS / 4, longEvery: null,
  };
}

/** How many equal symbols one fold of a uniform hypothesis spans: lines between the symbol rate's harmonics then show the scatter. */
const FOLDED_SYMBOLS = 8;

export interface Uniform {
  readonly usefulS: number;
  readonly cyclicPrefixS: number;
  readonly family: 'wifi' | 'free';
  readonly symbols?: number;
}

/** Equal prefixes: every OFDM outside the cellular standards. */
export function uniformPrefix({ usefulS, cyclicPrefixS, family, symbols = FOLDED_SYMBOLS }: Uniform): Hypothesis {
  return {
    label: `${name(1 / usefulS)}, prefix ${Number((cyclicPrefixS * 1e6).toPrecision(4))} µs`, family,
    subcarrierSpacingHz: 1 / usefulS, cyclicPrefix: null, usefulS, cyclicPrefixS, longEvery: null,
    prefixesS: Array.from({ length: symbols }, () => cyclicPrefixS),
  };
}

export function periodOf(hypothesis: Hypothesis): number {
  return hypothesis.prefixesS.reduce((sum, p) => sum + p, 0) + hypothesis.prefixesS.length * hypothesis.usefulS;
}

export const CELLULAR: readonly Hypothesis[] = [
  ...[0, 1, 2, 3, 4, 5, 6].map((mu) => normalPrefix(mu)),
  ...[7.5e3, 15e3, 30e3, 60e3, 120e3].map((hz) => extendedPrefix(hz)),
];

/** IEEE 802.11: 312.5 kHz with 0.8 or 0.4 µs, 78.125 kHz with 0.8, 1.6 or 3.2 µs, and the half clock of 10 MHz channels. */
export const WIFI: readonly Hypothesis[] = [
  [3.2, 0.8], [3.2, 0.4], [12.8, 0.8], [12.8, 1.6], [12.8, 3.2], [6.4, 1.6], [6.4, 0.8],
].map(([useful, prefix]) => uniformPrefix({ usefulS: useful * 1e-6, cyclicPrefixS: prefix * 1e-6, family: 'wifi' }));

function name(spacingHz: number): string {
  return `${Number((spacingHz / 1e3).toPrecision(6))} kHz`;
}
