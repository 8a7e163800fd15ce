import { transformOf } from '../fourier/fft.js';
import type { SymbolGrid, Window } from '../types.js';
import { resample } from '../vector/resample.js';

/** Subcarrier values of consecutive symbols. */
export interface Symbols {
  /** Interleaved complex, symbol after symbol, `width` subcarriers each. */
  readonly values: Float64Array;
  readonly width: number;
  readonly count: number;
  /** Number of the first subcarrier, counted in spacings from the grid's reference frequency. */
  readonly first: number;
  readonly subcarrierSpacingHz: number;
  readonly referenceHz: number;
}

export interface SymbolRange {
  /** First sample of the stretch, and how many samples it has, in the capture. */
  readonly from: number;
  readonly to: number;
  /** Band whose subcarriers are wanted, Hz against the capture's zero. */
  readonly lowHz: number;
  readonly highHz: number;
}

/**
 * Symbols of a grid that lie wholly within a stretch of a window. The stretch is brought to a
 * rate at which the useful symbol is a whole power of two; the transform begins half-way
 * through the prefix, and the phase ramp of that is taken out again.
 */
export function symbolsOf(window: Window, grid: SymbolGrid, range: SymbolRange): Symbols {
  const spacing = grid.subcarrierSpacingHz;
  const size = transformSize(window.sampleRateHz, spacing, range);
  const middle = grid.referenceHz + spacing * Math.round(((range.lowHz + range.highHz) / 2 - grid.referenceHz) / spacing);
  const rate = size * spacing;
  const origin = range.from;
  const part = window.iq.subarray(2 * (origin - window.startSample), 2 * (range.to - window.startSample));
  // At a native rate about a centre at zero the samples serve as they are.
  const asTheyAre = middle === 0 && Math.abs(rate / window.sampleRateHz - 1) < 1e-12;
  const iq = asTheyAre ? part : resample(part, window.sampleRateHz, rate, { shiftHz: -middle, startSample: origin });
  const lowest = Math.max(-size / 2 + 1, Math.ceil((range.lowHz - middle) / spacing));
  const highest = Math.min(size / 2 - 1, Math.floor((range.highHz - middle) / spacing));
  const width = Math.max(0, highest - lowest + 1);
  const scale = rate / window.sampleRateHz;
  const places = symbolPlaces(grid, range).map(({ at, prefix }) => ({ at: (at - origin) * scale, prefix: prefix * scale }));
  const values = transformed(iq, places, { size, lowest, width });
  return {
    values, width, count: values.length / (2 * width || 1), first: lowest + Math.round((middle - grid.referenceHz) / spacing),
    subcarrierSpacingHz: spacing, referenceHz: grid.referenceHz,
  };
}

function transformSize(rateHz: number, spacing: number, { lowHz, highHz }: SymbolRange): number {
  const needed = Math.min(rateHz, 1.3 * (highHz - lowHz)) / spacing;
  // A native rate stays as it is, whatever the last digit of its quotient.
  return 2 ** Math.max(4, Math.ceil(Math.log2(needed) - 1e-6));
}

/** Where symbols begin (their prefixes) and how long these are, in the capture's samples. */
export function symbolPlaces(grid: SymbolGrid, { from, to }: { from: number; to: number }): { at: number; prefix: number; index: number }[] {
  const { prefixSamples, usefulSamples, startSample } = grid;
  const period = prefixSamples.reduce((a, b) => a + b, 0) + prefixSamples.length * usefulSamples;
  const out: { at: number; prefix: number; index: number }[] = [];
  let round = Math.floor((from - startSample) / period) - 1;
  for (let at = startSample + round * period; at < to; round++, at = startSample + round * period) {
    let place = at;
    prefixSamples.forEach((prefix, l) => {
      if (place >= from && place + prefix + usefulSamples <= to) out.push({ at: place, prefix, index: round * prefixSamples.length + l });
      place += prefix + usefulSamples;
    });
  }
  return out;
}

interface Cut { size: number; lowest: number; width: number }

function transformed(iq: Float32Array, places: { at: number; prefix: number }[], { size, lowest, width }: Cut): Float64Array {
  const input = new Float64Array(2 * size);
  const output = new Float64Array(2 * size);
  const inside = places.filter(({ at, prefix }) => at >= 0 && Math.ceil(at + prefix) + size <= iq.length >> 1);
  const values = new Float64Array(2 * width * inside.length);
  inside.forEach(({ at, prefix }, s) => {
    const begin = Math.round(at + prefix / 2);
    input.set(iq.subarray(2 * begin, 2 * (begin + size)));
    transformOf(size).forward(input, output);
    copyTurned(output, values.subarray(2 * s * width, 2 * (s + 1) * width), { size, lowest, cycles: (at + prefix - begin) / size });
  });
  return values;
}

/** The bins from `lowest` on, turned by `cycles` for each subcarrier: the transform began that much before the useful part. */
function copyTurned(bins: Float64Array, out: Float64Array, { size, lowest, cycles }: { size: number; lowest: number; cycles: number }): void {
  const stepRe = Math.cos(2 * Math.PI * cycles);
  const stepIm = Math.sin(2 * Math.PI * cycles);
  let re = Math.cos(2 * Math.PI * cycles * lowest);
  let im = Math.sin(2 * Math.PI * cycles * lowest);
  for (let i = 0, bin = 2 * ((lowest + size) % size); i < out.length; i += 2, bin += 2) {
    if (bin === 2 * size) bin = 0;
    out[i] = bins[bin] * re - bins[bin + 1] * im;
    out[i + 1] = bins[bin] * im + bins[bin + 1] * re;
    const next = re * stepRe - im * stepIm;
    im = re * stepIm + im * stepRe;
    re = next;
  }
}
