/** Global frequency raster, TS 38.104 Table 5.4.2.1-1. */
const RASTER = [
  { below: 3e9, stepHz: 5000, offsetHz: 0, offsetN: 0 },
  { below: 24.25e9, stepHz: 15000, offsetHz: 3e9, offsetN: 600000 },
  { below: Infinity, stepHz: 60000, offsetHz: 24_250_080_000, offsetN: 2016667 },
];

/** Nearest NR-ARFCN. */
export function nrArfcn(frequencyHz: number): number {
  const row = RASTER.find((r) => frequencyHz < r.below)!;
  return row.offsetN + Math.round((frequencyHz - row.offsetHz) / row.stepHz);
}

export function nrArfcnHz(n: number): number {
  const row = n < 600000 ? RASTER[0] : n < 2016667 ? RASTER[1] : RASTER[2];
  return row.offsetHz + (n - row.offsetN) * row.stepHz;
}

/** SS_REF of a GSCN, TS 38.104 Table 5.4.3.1-1. */
export function gscnHz(gscn: number): number {
  if (gscn >= 22256) return 24_250_080_000 + (gscn - 22256) * 17_280_000;
  if (gscn >= 7499) return 3e9 + (gscn - 7499) * 1_440_000;
  // GSCN = 3N + (M − 3)/2 with M of 1, 3, 5.
  const n = Math.floor((gscn + 1) / 3);
  const m = 2 * (gscn - 3 * n) + 3;
  return n * 1_200_000 + m * 50_000;
}

/** Synchronisation raster entries with SS_REF in the span, lowest first. */
export function gscnWithin(lowHz: number, highHz: number): number[] {
  const found: number[] = [];
  const from = lowHz < 3e9 ? Math.max(2, Math.floor((3 * lowHz) / 1.2e6) - 3) : lowHz < 24.25e9 ? 7499 + Math.floor((lowHz - 3e9) / 1.44e6) : 22256 + Math.floor((lowHz - 24.25008e9) / 17.28e6);
  for (let g = from; g <= 26639; g++) {
    const hz = gscnHz(g);
    if (hz > highHz) break;
    if (hz >= lowHz) found.push(g);
  }
  return found;
}
