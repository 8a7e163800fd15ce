/** Time units of TS 38.211 clauses 4.1 and 5.3.1 in samples of a 1/(15 kHz·2048) clock, T_s. */
const TS_PER_SUBFRAME = 30_720;
export const TS_HZ = 30_720_000;

/** µ of a spacing of 15·2^µ kHz within half a percent, 0 to 6; null for any other spacing. */
export function numerologyOf(spacingHz: number): number | null {
  const mu = Math.round(Math.log2(spacingHz / 15_000));
  return mu >= 0 && mu <= 6 && Math.abs(spacingHz / (15_000 * 2 ** mu) - 1) < 0.005 ? mu : null;
}

/** Length of the useful part, T_s. */
export function usefulTs(mu: number): number {
  return 2048 / 2 ** mu;
}

/** Prefix of symbol l, counted from the start of the subframe, T_s (TS 38.211 clause 5.3.1). */
export function prefixTs(mu: number, l: number, extended = false): number {
  if (extended) return 512 / 2 ** mu;
  return 144 / 2 ** mu + (l % (7 * 2 ** mu) === 0 ? 16 : 0);
}

/** Start of the useful part of symbol l, counted in symbols and T_s from the start of any subframe. */
export function usefulStartTs(mu: number, l: number, extended = false): number {
  const perHalf = (extended ? 6 : 7) * 2 ** mu;
  const half = Math.floor(l / perHalf);
  const inHalf = l - half * perHalf;
  const ordinary = prefixTs(mu, 1, extended);
  return half * (TS_PER_SUBFRAME / 2) + prefixTs(mu, 0, extended) + inHalf * (ordinary + usefulTs(mu));
}

/** Prefix lengths of one half-subframe at a sample rate: the first is the longer one. */
export function prefixSamples(mu: number, rateHz: number, extended = false): number[] {
  const perHalf = (extended ? 6 : 7) * 2 ** mu;
  return Array.from({ length: perHalf }, (_, l) => (prefixTs(mu, l, extended) * rateHz) / TS_HZ);
}
