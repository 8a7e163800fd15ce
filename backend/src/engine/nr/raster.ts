/** One span of the synchronisation raster, TS 38.104 Table 5.4.3.1-1: SS_REF = base + n·step (+ one of the offsets). */
const SYNC_SPANS = [
  { low: 0, high: 3e9, base: 0, step: 1.2e6, offsets: [50e3, 150e3, 250e3] },
  { low: 3e9, high: 24.25e9, base: 3e9, step: 1.44e6, offsets: [0] },
  { low: 24.25e9, high: 100e9, base: 24_250_080_000, step: 17.28e6, offsets: [0] },
];

/** Distance from a frequency to the nearest place of the synchronisation raster, Hz (signed: frequency less raster). */
export function syncRasterResidueHz(frequencyHz: number): number {
  const span = SYNC_SPANS.find(({ low, high }) => frequencyHz >= low && frequencyHz < high) ?? SYNC_SPANS[2];
  const residues = span.offsets.map((offset) => {
    const at = frequencyHz - span.base - offset;
    return at - Math.round(at / span.step) * span.step;
  });
  return residues.reduce((best, each) => (Math.abs(each) < Math.abs(best) ? each : best));
}

/** Step of the global frequency raster, TS 38.104 Table 5.4.2.1-1. */
export function globalRasterStepHz(frequencyHz: number): number {
  if (frequencyHz < 3e9) return 5e3;
  return frequencyHz < 24.25e9 ? 15e3 : 60e3;
}

/** Nearest place of the global frequency raster. */
export function nearestOnGlobalRaster(frequencyHz: number): number {
  const base = frequencyHz < 3e9 ? 0 : frequencyHz < 24.25e9 ? 3e9 : 24_250_080_000;
  const step = globalRasterStepHz(frequencyHz);
  return base + Math.round((frequencyHz - base) / step) * step;
}
