const HALF_TAPS = 32;
const PHASES = 512;
/** Kaiser shape for about 80 dB (Kaiser 1974: β = 0.1102(A − 8.7)). */
const BETA = 7.86;

/** Where output sample m stands among the input samples: `start + m·step`. */
export interface Timing {
  readonly start: number;
  readonly step: number;
  readonly count: number;
}

/**
 * Band-limited interpolation with a Kaiser-windowed sine: any ratio, fractional start. Frequencies
 * up to 0.46 of the slower rate pass, images and aliases beyond 0.54 lie 80 dB down. Input samples
 * outside the array count as zero.
 */
export function resample(iq: Float32Array, { start, step, count }: Timing): Float32Array {
  const scale = Math.max(1, step);
  const taps = 2 * Math.ceil(HALF_TAPS * scale);
  const table = kernel(taps, scale);
  const out = new Float32Array(2 * count);
  const length = iq.length / 2;
  for (let m = 0; m < count; m++) {
    const at = start + m * step;
    const base = Math.floor(at);
    const phase = (at - base) * PHASES;
    const row = Math.floor(phase);
    const mix = phase - row;
    const from = base - taps / 2 + 1;
    const low = Math.max(0, -from);
    const high = Math.min(taps, length - from);
    let re = 0;
    let im = 0;
    for (let k = low, t = row * taps + low, s = 2 * (from + low); k < high; k++, t++, s += 2) {
      const h = table[t] + mix * (table[t + taps] - table[t]);
      re += h * iq[s];
      im += h * iq[s + 1];
    }
    out[2 * m] = re;
    out[2 * m + 1] = im;
  }
  return out;
}

/** Input samples needed on each side of the first and the last output. */
export function reach(step: number): number {
  return Math.ceil(HALF_TAPS * Math.max(1, step)) + 1;
}

const tables = new Map<string, Float64Array>();

/** Row p holds the taps for a fraction p/PHASES; one row more, so that neighbours may be mixed. */
function kernel(taps: number, scale: number): Float64Array {
  const key = `${taps}/${scale}`;
  const made = tables.get(key);
  if (made) return made;
  const table = new Float64Array((PHASES + 1) * taps);
  for (let p = 0; p <= PHASES; p++) {
    for (let k = 0; k < taps; k++) {
      const x = k - taps / 2 + 1 - p / PHASES;
      const edge = (2 * x) / taps;
      table[p * taps + k] = Math.abs(edge) >= 1 ? 0 : (sinc(x / scale) / scale) * (bessel0(BETA * Math.sqrt(1 - edge * edge)) / bessel0(BETA));
    }
  }
  if (tables.size > 16) tables.clear();
  tables.set(key, table);
  return table;
}

function sinc(x: number): number {
  return x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x);
}

/** Modified Bessel function of order 0, by its power series. */
function bessel0(x: number): number {
  let sum = 1;
  let term = 1;
  for (let k = 1; term > 1e-12 * sum; k++) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}
