import { inverseTransform } from './transform.js';

/** A run of samples of the transmitter's time, being filled. */
export interface Canvas {
  readonly iq: Float32Array;
  readonly first: number;
  readonly rateHz: number;
}

export interface PlacedSymbol {
  /** Bins of the transform, interleaved, unshifted; its length/2 is the transform's size. */
  readonly bins: Float64Array;
  /** First sample of the prefix, in the transmitter's time. */
  readonly start: number;
  readonly prefix: number;
  /** Samples after the prefix where not one transform long: training fields go on or stop early. */
  readonly useful?: number;
  /** Common factor e^{jφ}, rad; counts at the first sample of the useful part. */
  readonly phase?: number;
  /** Frequency of the bins' zero, Hz; its phase is zero at the first sample of the useful part. */
  readonly offsetHz?: number;
  /** Half the length of the raised-cosine edges, samples: a symbol reaches so far into its neighbours. */
  readonly taper?: number;
}

/** Half of an edge of `taperS`, in whole samples. */
export function taperSamples(taperS: number | undefined, canvas: Canvas): number {
  return Math.round(((taperS ?? 0) * canvas.rateHz) / 2);
}

const scratch = new Map<number, Float64Array>();

/** Adds prefix and useful part of one OFDM symbol to the canvas, where the two overlap. */
export function addSymbol(canvas: Canvas, symbol: PlacedSymbol): void {
  const size = symbol.bins.length / 2;
  const taper = symbol.taper ?? 0;
  let useful = scratch.get(size);
  if (!useful) scratch.set(size, useful = new Float64Array(2 * size));
  inverseTransform(size).run(symbol.bins, useful);
  const count = canvas.iq.length / 2;
  const begin = symbol.start - canvas.first;
  const length = symbol.prefix + (symbol.useful ?? size);
  const step = (2 * Math.PI * (symbol.offsetHz ?? 0)) / canvas.rateHz;
  const phase = symbol.phase ?? 0;
  const turning = step !== 0;
  let c = Math.cos(phase);
  let s = Math.sin(phase);
  for (let n = Math.max(-taper, -begin); n < length + taper && begin + n < count; n++) {
    if (turning) {
      c = Math.cos(phase + step * (n - symbol.prefix));
      s = Math.sin(phase + step * (n - symbol.prefix));
    }
    const weight = taper === 0 ? 1 : edge(n, length, taper);
    const from = 2 * ((n - symbol.prefix + 4 * size) % size);
    const to = 2 * (begin + n);
    canvas.iq[to] += weight * (useful[from] * c - useful[from + 1] * s);
    canvas.iq[to + 1] += weight * (useful[from] * s + useful[from + 1] * c);
  }
}

/** Raised cosine across the boundaries at 0 and `length`, each 2·taper wide; neighbours add up to 1. */
function edge(n: number, length: number, taper: number): number {
  const inside = Math.min(n + 0.5, length - n - 0.5);
  if (inside >= taper) return 1;
  return 0.5 * (1 + Math.sin((Math.PI * inside) / (2 * taper)));
}
