/** Basic time units T_c in a second: 480 kHz · 4096 (TS 38.211 clause 4.1). */
export const TC_PER_S = 1_966_080_000;
export const TC_PER_SUBFRAME = TC_PER_S / 1000;

export type NrPrefix = 'normal' | 'extended';

/** Symbols of one subframe in T_c (TS 38.211 clause 5.3.1); all whole numbers for µ = 0 to 6. */
export interface NrNumerology {
  readonly mu: number;
  readonly spacingHz: number;
  readonly symbolsPerSlot: number;
  readonly symbolsPerSubframe: number;
  readonly usefulTc: number;
  /** Start of symbol l's prefix, from the start of the subframe. */
  readonly startTc: readonly number[];
  readonly prefixTc: readonly number[];
}

/** κ = 64: 2048·κ·2^−µ useful, 144·κ·2^−µ prefix and 16·κ more at l = 0 and 7·2^µ, or 512·κ·2^−µ extended. */
export function nrNumerology(spacingHz: number, prefix: NrPrefix = 'normal'): NrNumerology {
  const mu = Math.log2(spacingHz / 15000);
  if (!Number.isInteger(mu) || mu < 0 || mu > 6) throw new RangeError(`no NR numerology has a spacing of ${spacingHz} Hz`);
  if (prefix === 'extended' && mu !== 2) throw new RangeError('the extended prefix exists at 60 kHz alone (TS 38.211 Table 4.2-1)');
  const symbolsPerSlot = prefix === 'extended' ? 12 : 14;
  const symbolsPerSubframe = symbolsPerSlot * 2 ** mu;
  const usefulTc = (2048 * 64) / 2 ** mu;
  const startTc: number[] = [];
  const prefixTc: number[] = [];
  let at = 0;
  for (let l = 0; l < symbolsPerSubframe; l++) {
    const long = l === 0 || l === 7 * 2 ** mu;
    const cp = prefix === 'extended' ? (512 * 64) / 2 ** mu : (144 * 64) / 2 ** mu + (long ? 16 * 64 : 0);
    startTc.push(at);
    prefixTc.push(cp);
    at += cp + usefulTc;
  }
  return { mu, spacingHz, symbolsPerSlot, symbolsPerSubframe, usefulTc, startTc, prefixTc };
}
