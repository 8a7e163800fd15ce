import { transformOf } from '../fourier/fft.js';
import { SYNC_FIRST, REFERENCE_SUBCARRIER } from './block-layout.js';
import { primarySequence, SYNC_LENGTH } from './sequences.js';
import type { WorkSignal } from './work-signal.js';

/** A primary synchronisation signal with its place: coherent correlation in time and frequency. */
export interface PrimaryFix {
  readonly nId2: number;
  /** First sample of the useful part in the work signal, fractional. */
  readonly sample: number;
  /** SS_REF in the work signal, Hz. */
  readonly referenceHz: number;
  /** |Σ r·s*|² over the power in the signal's band: 127 for a clean signal, about Exp(1) at a place of noise. */
  readonly statistic: number;
}

/** Offsets tried around the coarse frequency, in spacings. */
const OFFSETS = [-0.375, -0.25, -0.125, 0, 0.125, 0.25, 0.375];
/** The correlation is computed at this many samples a useful symbol: twice the signal's band. */
const FINE = 256;

/**
 * The best place within half a useful symbol around a window that starts at `sample`. The work
 * signal must be upright. Null where the window lies too close to an end.
 */
export function fixPrimary(work: WorkSignal, spacingHz: number, coarse: { sample: number; referenceHz: number; nId2: number }): PrimaryFix | null {
  const size = Math.round(work.rateHz / spacingHz);
  const span = { size, start: coarse.sample - size / 2 };
  if (span.start < 0 || 2 * (span.start + 2 * size) > work.iq.length) return null;
  const template = templateSpectrum(coarse.nId2);
  if (!promising(correlate(work, span, { template, referenceHz: coarse.referenceHz }))) return null;
  let best: { power: number; lag: number; offset: number; row: Float64Array } | null = null;
  for (const offset of OFFSETS) {
    const row = correlate(work, span, { template, referenceHz: coarse.referenceHz + offset * spacingHz });
    for (let lag = 0; lag < 2 * FINE - FINE; lag++) {
      if (!best || row[lag] > best.power) best = { power: row[lag], lag, offset, row };
    }
  }
  if (!best || best.power === 0) return null;
  const lag = best.lag + vertex(best.row[best.lag - 1] ?? 0, best.power, best.row[best.lag + 1] ?? 0);
  const fix = { nId2: coarse.nId2, sample: span.start + (lag * size) / FINE, referenceHz: coarse.referenceHz + best.offset * spacingHz };
  const refined = { ...fix, referenceHz: fix.referenceHz + halvesOffset(work, spacingHz, fix) };
  return { ...refined, statistic: alignedStatistic(work, spacingHz, refined) };
}

/** A quick look at the coarse frequency alone: of 256 lags of noise the best exceeds the mean so far once in 60 tries. */
function promising(powers: Float64Array): boolean {
  let sum = 0;
  let top = 0;
  for (let lag = 0; lag < FINE; lag++) {
    sum += powers[lag];
    top = Math.max(top, powers[lag]);
  }
  return top > (9.6 * sum) / FINE;
}

/** Abscissa of a parabola's vertex through (−1, a), (0, b), (1, c). */
function vertex(a: number, b: number, c: number): number {
  const bend = a - 2 * b + c;
  return bend >= 0 ? 0 : Math.max(-0.5, Math.min(0.5, (0.5 * (a - c)) / bend));
}

const templates: Float64Array[] = [];

/** Conjugate spectrum of the signal's useful part, zero-padded to twice its length, in `FINE` samples a symbol. */
function templateSpectrum(nId2: number): Float64Array {
  return (templates[nId2] ??= makeTemplate(nId2));
}

function makeTemplate(nId2: number): Float64Array {
  const bins = new Float64Array(2 * FINE);
  primarySequence(nId2).forEach((chip, n) => { bins[2 * ((n + SYNC_FIRST - REFERENCE_SUBCARRIER + FINE) % FINE)] = chip; });
  const time = new Float64Array(2 * FINE);
  transformOf(FINE).inverse(bins, time);
  const padded = new Float64Array(4 * FINE);
  padded.set(time);
  const spectrum = new Float64Array(4 * FINE);
  transformOf(2 * FINE).forward(padded, spectrum);
  for (let i = 1; i < spectrum.length; i += 2) spectrum[i] = -spectrum[i];
  return spectrum;
}

/** Power of the correlation at lags of 1/FINE symbol from the span's start. */
function correlate(work: WorkSignal, { size, start }: { size: number; start: number }, { template, referenceHz }: { template: Float64Array; referenceHz: number }): Float64Array {
  const spectrum = new Float64Array(4 * size);
  transformOf(2 * size).forward(mixed(work, { start, count: 2 * size, referenceHz }), spectrum);
  // Only the bins that the template fills: the rest of the band is left out, which also decimates.
  const narrow = new Float64Array(4 * FINE);
  for (let k = -FINE; k < FINE; k++) {
    const from = 2 * ((k + 2 * size) % (2 * size));
    const at = 2 * ((k + 2 * FINE) % (2 * FINE));
    if (Math.abs(k) > SYNC_LENGTH + 9) continue;
    narrow[at] = spectrum[from] * template[at] - spectrum[from + 1] * template[at + 1];
    narrow[at + 1] = spectrum[from] * template[at + 1] + spectrum[from + 1] * template[at];
  }
  const lags = new Float64Array(4 * FINE);
  transformOf(2 * FINE).inverse(narrow, lags);
  return Float64Array.from({ length: 2 * FINE }, (_, i) => lags[2 * i] ** 2 + lags[2 * i + 1] ** 2);
}

/** `count` samples from `start` on with SS_REF moved to zero; phase zero at the first. */
export function mixed(work: WorkSignal, { start, count, referenceHz }: { start: number; count: number; referenceHz: number }): Float64Array {
  const out = new Float64Array(2 * count);
  const step = (-2 * Math.PI * referenceHz) / work.rateHz;
  const stepRe = Math.cos(step);
  const stepIm = Math.sin(step);
  let re = 1;
  let im = 0;
  for (let i = 0, from = 2 * start; i < 2 * count; i += 2) {
    const a = work.iq[from + i];
    const b = work.iq[from + i + 1];
    out[i] = a * re - b * im;
    out[i + 1] = a * im + b * re;
    const next = re * stepRe - im * stepIm;
    im = re * stepIm + im * stepRe;
    re = next;
  }
  return out;
}

/** Time-domain primary signal of `size` samples, unit power. */
function primaryWaveform(nId2: number, size: number): Float64Array {
  const bins = new Float64Array(2 * size);
  primarySequence(nId2).forEach((chip, n) => { bins[2 * ((n + SYNC_FIRST - REFERENCE_SUBCARRIER + size) % size)] = chip; });
  const time = new Float64Array(2 * size);
  transformOf(size).inverse(bins, time);
  return time;
}

/** Remaining frequency error from the phase between the two halves of the symbol, Hz. */
function halvesOffset(work: WorkSignal, spacingHz: number, fix: { nId2: number; sample: number; referenceHz: number }): number {
  const size = Math.round(work.rateHz / spacingHz);
  const start = Math.round(fix.sample);
  if (start < 0 || 2 * (start + size) > work.iq.length) return 0;
  const signal = mixed(work, { start, count: size, referenceHz: fix.referenceHz });
  const wave = primaryWaveform(fix.nId2, size);
  const sums = [0, 0, 0, 0];
  for (let n = 0; n < size; n++) {
    const half = n < size / 2 ? 0 : 2;
    sums[half] += signal[2 * n] * wave[2 * n] + signal[2 * n + 1] * wave[2 * n + 1];
    sums[half + 1] += signal[2 * n + 1] * wave[2 * n] - signal[2 * n] * wave[2 * n + 1];
  }
  const re = sums[2] * sums[0] + sums[3] * sums[1];
  const im = sums[3] * sums[0] - sums[2] * sums[1];
  return (Math.atan2(im, re) / Math.PI) * spacingHz;
}

/** The statistic of a window that starts at the place found. */
function alignedStatistic(work: WorkSignal, spacingHz: number, fix: { nId2: number; sample: number; referenceHz: number }): number {
  const size = Math.round(work.rateHz / spacingHz);
  const start = Math.floor(fix.sample);
  if (start < 0 || 2 * (start + size) > work.iq.length) return 0;
  const spectrum = new Float64Array(2 * size);
  transformOf(size).forward(mixed(work, { start, count: size, referenceHz: fix.referenceHz }), spectrum);
  const ramp = (2 * Math.PI * (fix.sample - start)) / size;
  let re = 0;
  let im = 0;
  let power = 0;
  primarySequence(fix.nId2).forEach((chip, n) => {
    const k = n + SYNC_FIRST - REFERENCE_SUBCARRIER;
    const at = 2 * ((k + size) % size);
    const cos = chip * Math.cos(ramp * k);
    const sin = chip * Math.sin(ramp * k);
    re += spectrum[at] * cos - spectrum[at + 1] * sin;
    im += spectrum[at] * sin + spectrum[at + 1] * cos;
    power += spectrum[at] ** 2 + spectrum[at + 1] ** 2;
  });
  return power > 0 ? (re * re + im * im) / power : 0;
}
