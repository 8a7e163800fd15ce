import { transformOf } from '../fourier/fft.js';
import { BLOCK_SUBCARRIERS, BLOCK_SYMBOLS, REFERENCE_SUBCARRIER } from './block-layout.js';
import { mixed } from './primary-fix.js';
import type { WorkSignal } from './work-signal.js';

/** Where a block lies in an upright work signal. */
export interface BlockPlace {
  readonly spacingHz: number;
  /** First sample of the useful part of its first symbol, fractional. */
  readonly sample: number;
  /** SS_REF, Hz in the work signal. */
  readonly referenceHz: number;
}

/** Prefix of every symbol of a block, in useful parts: no candidate block holds a longer symbol. */
export const BLOCK_PREFIX = 9 / 128;

/** Start of the useful part of a block's symbol after that of its first, s. */
export function blockSymbolS(spacingHz: number, symbol: number): number {
  return (symbol * (1 + BLOCK_PREFIX)) / spacingHz;
}

/**
 * The block's 4 symbols of 240 subcarriers, interleaved. Phases are those at the start of each
 * useful part of a signal whose SS_REF was moved to zero by a mixer that starts with the work
 * signal; white noise of the power p gives elements of the power p. Null where the block is not
 * wholly inside.
 */
export function blockGrid(work: WorkSignal, place: BlockPlace): Float64Array[] | null {
  const size = Math.round(work.rateHz / place.spacingHz);
  const first = Math.floor(place.sample - (size * BLOCK_PREFIX) / 2);
  const last = place.sample + (BLOCK_SYMBOLS - 1) * size * (1 + BLOCK_PREFIX) + size;
  if (first < 0 || 2 * last > work.iq.length) return null;
  return Array.from({ length: BLOCK_SYMBOLS }, (_, symbol) => blockSymbol(work, place, symbol));
}

/** One symbol; its window starts in the middle of the prefix, and the phases are brought to the useful part's start. */
function blockSymbol(work: WorkSignal, place: BlockPlace, symbol: number): Float64Array {
  const size = Math.round(work.rateHz / place.spacingHz);
  const useful = place.sample + symbol * size * (1 + BLOCK_PREFIX);
  const start = Math.floor(useful - (size * BLOCK_PREFIX) / 2);
  const spectrum = new Float64Array(2 * size);
  transformOf(size).forward(mixed(work, { start, count: size, referenceHz: place.referenceHz }), spectrum);
  const turns = (place.referenceHz * start) / work.rateHz;
  const common = -2 * Math.PI * (turns - Math.round(turns));
  const ramp = (2 * Math.PI * (useful - start)) / size;
  const scale = 1 / Math.sqrt(size);
  const points = new Float64Array(2 * BLOCK_SUBCARRIERS);
  for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
    const bin = k - REFERENCE_SUBCARRIER;
    const from = 2 * ((bin + size) % size);
    const cos = scale * Math.cos(common + ramp * bin);
    const sin = scale * Math.sin(common + ramp * bin);
    points[2 * k] = spectrum[from] * cos - spectrum[from + 1] * sin;
    points[2 * k + 1] = spectrum[from] * sin + spectrum[from + 1] * cos;
  }
  return points;
}
