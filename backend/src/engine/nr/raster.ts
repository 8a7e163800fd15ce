/** One span of the synchronisation raster, TS 38.104 Table 5.4.3.1-1: SS_REF = base + n·step (+ one of the offsets). */
const SYNC_SPANS = [
  { low: 0, high: 3e9, base: 0, step: 1.2e6, offsets: [50e3, 150e3, 250e3] },
  { low: 3e9, high: 24.25e9, base: 3e9, step: 1.44e6, offsets: [0] },
  { low: 24.25e9, high: 100e9, base: 24_250_080_000, step: 17.28e6, offsets: [0] },
];

/** Places of the synchronisation raster between two frequencies, Hz. */
export function syncRasterWithin(lowHz: number, highHz: number): number[] {
  const { base, step, offsets } = syncSpan((lowHz + highHz) / 2);
  const first = Math.floor((lowHz - base) / step) - 1;
  const count = Math.ceil((highHz - lowHz) / step) + 3;
  return Array.from({ length: count }, (_, i) => offsets.map((offset) => base + (first + i) * step + offset)).flat()
    .filter((hz) => hz >= lowHz && hz <= highHz);
}

/** Distance to the nearest of them. */
export function syncRasterDistanceHz(frequencyHz: number): number {
  const { step } = syncSpan(frequencyHz);
  return Math.min(...syncRasterWithin(frequencyHz - step, frequencyHz + step).map((hz) => Math.abs(hz - frequencyHz)));
}

/** Mean distance of its places. */
export function syncRasterStepHz(frequencyHz: number): number {
  const { step, offsets } = syncSpan(frequencyHz);
  return step / offsets.length;
}

function syncSpan(frequencyHz: number): (typeof SYNC_SPANS)[number] {
  return SYNC_SPANS.find(({ low, high }) => frequencyHz >= low && frequencyHz < high) ?? SYNC_SPANS[2];
}

/** Places of the global frequency raster between two frequencies, Hz. */
export function globalRasterWithin(lowHz: number, highHz: number): number[] {
  const step = globalRasterStepHz((lowHz + highHz) / 2);
  const first = nearestOnGlobalRaster(lowHz);
  return Array.from({ length: Math.floor((highHz - first) / step) + 1 }, (_, i) => first + i * step).filter((hz) => hz >= lowHz);
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
