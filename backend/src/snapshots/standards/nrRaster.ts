/** TS 38.104 table 5.4.2.1-1: the global frequency raster. */
const GLOBAL = [
  { stepHz: 5e3, startHz: 0, first: 0, last: 599_999 },
  { stepHz: 15e3, startHz: 3000e6, first: 600_000, last: 2_016_666 },
  { stepHz: 60e3, startHz: 24_250.08e6, first: 2_016_667, last: 3_279_165 },
] as const;

/** Frequency of an NR-ARFCN, Hz; null outside 0 to 3279165. */
export function nrArfcnToHz(arfcn: number): number | null {
  const range = Number.isInteger(arfcn) ? GLOBAL.find((r) => arfcn >= r.first && arfcn <= r.last) : undefined;
  return range === undefined ? null : range.startHz + range.stepHz * (arfcn - range.first);
}

/** NR-ARFCN nearest to a frequency, fractional where it lies off the global raster; null outside it. */
export function hzToNrArfcnFraction(hz: number): number | null {
  if (!(hz >= 0 && hz <= 100e9)) return null;
  const range = GLOBAL.findLast((r) => hz >= r.startHz) ?? GLOBAL[0];
  return range.first + (hz - range.startHz) / range.stepHz;
}

/** NR-ARFCN of a frequency, Hz; null where the frequency is not on the global raster (to 1 Hz). */
export function hzToNrArfcn(hz: number): number | null {
  const nearest = Math.round(hzToNrArfcnFraction(hz) ?? Number.NaN);
  const back = nrArfcnToHz(nearest);
  return back !== null && Math.abs(back - hz) <= 1 ? nearest : null;
}

/** SS_REF of a synchronisation channel number, Hz (TS 38.104 table 5.4.3.1-1, carriers above 3 MHz); null outside 2 to 26639. */
export function gscnToHz(gscn: number): number | null {
  if (!Number.isInteger(gscn) || gscn < 2 || gscn > 26_639) return null;
  if (gscn >= 22_256) return 24_250.08e6 + 17.28e6 * (gscn - 22_256);
  if (gscn >= 7499) return 3000e6 + 1.44e6 * (gscn - 7499);
  // GSCN = 3N + (M - 3)/2 with M of 1, 3, 5.
  const n = Math.round(gscn / 3);
  const m = 2 * (gscn - 3 * n) + 3;
  return Math.round(1.2e6 * n + 50e3 * m);
}

/** Places of the synchronisation raster about a frequency, Hz: the nearest is among them. */
function syncRasterAround(hz: number): { gscn: number; hz: number }[] {
  const guess = hz >= 24_250.08e6 ? 22_256 + (hz - 24_250.08e6) / 17.28e6
    : hz >= 3000e6 ? 7499 + (hz - 3000e6) / 1.44e6
      : hz / 400e3;
  return [-2, -1, 0, 1, 2].map((step) => Math.round(guess) + step).flatMap((gscn) => {
    const at = gscnToHz(gscn);
    return at === null ? [] : [{ gscn, hz: at }];
  });
}

/** Synchronisation channel number of a frequency, Hz; null off the synchronisation raster (to 1 Hz). */
export function hzToGscn(hz: number): number | null {
  return syncRasterAround(hz).find((place) => Math.abs(place.hz - hz) <= 1)?.gscn ?? null;
}

/** How far a frequency is from the synchronisation raster, Hz. */
export function besideSyncRaster(hz: number): number {
  return Math.min(...syncRasterAround(hz).map((place) => Math.abs(place.hz - hz)), Infinity);
}

/** TS 38.104 table 5.1-1: frequency ranges. Null between and beyond them. */
export function frequencyRange(hz: number): 'FR1' | 'FR2-1' | 'FR2-2' | null {
  if (hz >= 410e6 && hz <= 7125e6) return 'FR1';
  if (hz >= 24_250e6 && hz <= 52_600e6) return 'FR2-1';
  return hz > 52_600e6 && hz <= 71_000e6 ? 'FR2-2' : null;
}
