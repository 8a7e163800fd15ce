/**
 * Cellular prefixes are whole numbers of samples where the transform is a multiple of 128
 * (9/128 of it: TS 38.211 clause 5.3.1, TS 36.211 clause 6.12).
 */
export function isNativeRate(rateHz: number, spacingHz: number): boolean {
  return Number.isInteger(rateHz / spacingHz / 128);
}

/** `minimumHz` itself if native, else the next power of two times 128·`spacingHz`. */
export function nativeRate(minimumHz: number, spacingHz: number): number {
  if (isNativeRate(minimumHz, spacingHz)) return minimumHz;
  return 128 * spacingHz * 2 ** Math.max(0, Math.ceil(Math.log2(minimumHz / (128 * spacingHz))));
}
