/** Samples at the working rate, DC removed, the signal's band about zero. */
export interface Working {
  readonly iq: Float32Array;
  readonly rateHz: number;
  /** Width of the signal's band, Hz: how fast the correlation falls beside the right lag. */
  readonly bandHz: number;
}

/** x[n + lag]·x*[n] summed over blocks of `hop` samples. */
export interface LagSums {
  readonly re: Float64Array;
  readonly im: Float64Array;
  /** |x|² summed over the same blocks. */
  readonly power: Float64Array;
  readonly hop: number;
  readonly lag: number;
}

/** A lag within this of a whole number of samples is taken as whole: it loses under 0.2 % of the correlation. */
const WHOLE = 0.03;
const TAPS = 6;

/**
 * Products at a lag in samples, fractional lags included: there the later sample is interpolated
 * for a flat band of the given width. A prefix shows as blocks with a common phase.
 */
export function lagSums(working: Working, lag: number, hop: number): LagSums {
  const nearest = Math.round(lag);
  if (Math.abs(lag - nearest) < WHOLE) return sums(working.iq, { late: working.iq, whole: nearest, hop, lag });
  const base = Math.floor(lag);
  const late = interpolated(working, lag - base);
  return sums(working.iq, { late, whole: base, hop, lag });
}

interface Plan { late: Float32Array; whole: number; hop: number; lag: number }

function sums(iq: Float32Array, { late, whole, hop, lag }: Plan): LagSums {
  const blocks = Math.max(0, Math.floor(((iq.length >> 1) - whole - TAPS) / hop));
  const re = new Float64Array(blocks);
  const im = new Float64Array(blocks);
  for (let b = 0, i = 0, j = 2 * whole; b < blocks; b++) {
    let sumRe = 0;
    let sumIm = 0;
    for (const end = i + 2 * hop; i < end; i += 2, j += 2) {
      const ar = iq[i];
      const ai = iq[i + 1];
      const br = late[j];
      const bi = late[j + 1];
      sumRe += br * ar + bi * ai;
      sumIm += bi * ar - br * ai;
    }
    re[b] = sumRe;
    im[b] = sumIm;
  }
  return { re, im, power: blockPower(iq, hop, blocks), hop, lag };
}

const running = new WeakMap<Float32Array, Float64Array>();

/** |x|² summed over blocks, from running sums that all lags of a window share. */
function blockPower(iq: Float32Array, hop: number, blocks: number): Float64Array {
  const sum = running.get(iq) ?? runningPower(iq);
  running.set(iq, sum);
  const out = new Float64Array(blocks);
  for (let b = 0; b < blocks; b++) out[b] = sum[(b + 1) * hop] - sum[b * hop];
  return out;
}

function runningPower(iq: Float32Array): Float64Array {
  const sum = new Float64Array((iq.length >> 1) + 1);
  for (let n = 0, total = 0; n < sum.length - 1; n++) sum[n + 1] = total += iq[2 * n] * iq[2 * n] + iq[2 * n + 1] * iq[2 * n + 1];
  return sum;
}

/** The samples read `part` of a sample later, by the best linear interpolation of a flat band (normal equations). */
function interpolated({ iq, bandHz, rateHz }: Working, part: number): Float32Array {
  const taps = flatBandTaps(part, Math.min(0.98, Math.max(0.05, bandHz / rateHz)));
  const out = new Float32Array(iq.length);
  const first = TAPS / 2 - 1;
  const last = (iq.length >> 1) - TAPS / 2;
  for (let n = first; n < last; n++) {
    let re = 0;
    let im = 0;
    for (let t = 0, i = 2 * (n - first); t < TAPS; t++, i += 2) {
      re += taps[t] * iq[i];
      im += taps[t] * iq[i + 1];
    }
    out[2 * n] = re;
    out[2 * n + 1] = im;
  }
  return out;
}

function flatBandTaps(part: number, beta: number): Float64Array {
  const first = TAPS / 2 - 1;
  const rows = Array.from({ length: TAPS }, (_, i) => [
    ...Array.from({ length: TAPS }, (_, j) => sinc(beta * (i - j)) + (i === j ? 1e-3 : 0)),
    sinc(beta * (part - (i - first))),
  ]);
  return solved(rows);
}

export function sinc(x: number): number {
  return x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x);
}

/** Gauss and Jordan; the matrix is positive definite by its diagonal loading. */
function solved(rows: number[][]): Float64Array {
  const n = rows.length;
  for (let i = 0; i < n; i++) {
    const pivot = rows[i][i];
    for (let k = i; k <= n; k++) rows[i][k] /= pivot;
    for (let j = 0; j < n; j++) {
      const factor = rows[j][i];
      if (j === i || factor === 0) continue;
      for (let k = i; k <= n; k++) rows[j][k] -= factor * rows[i][k];
    }
  }
  return Float64Array.from(rows, (row) => row[n]);
}
