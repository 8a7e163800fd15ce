/**
 * Channel at every subcarrier from samples on combs: the linear estimate of least mean square
 * error for a channel whose power is spread evenly over a span of delays (Edfors et al.,
 * IEEE Trans. Commun. 46 (1998) 931; the even spread is the robust choice).
 */
export interface DelaySpan {
  /** Middle of the span, in turns per subcarrier (delay times spacing). */
  readonly centre: number;
  /** Whole width, likewise. */
  readonly width: number;
}

export interface CombSample {
  readonly k: number;
  readonly re: number;
  readonly im: number;
  /** How many observations were averaged. */
  readonly weight: number;
}

/** Values at −half … half (interleaved). `noise` is one observation's variance, in units of the channel's mean power. */
export function interpolateComb(samples: readonly CombSample[], span: DelaySpan, at: { half: number; noise: number }): Float64Array {
  const n = samples.length;
  // With the common delay taken out the correlation is real: a sinc.
  const matrix = new Float64Array(n * n);
  const right = new Float64Array(2 * n);
  samples.forEach((a, i) => {
    const angle = 2 * Math.PI * span.centre * a.k;
    const c = Math.cos(angle), s = Math.sin(angle);
    right[2 * i] = a.re * c - a.im * s;
    right[2 * i + 1] = a.im * c + a.re * s;
    samples.forEach((b, j) => { matrix[i * n + j] = sinc(span.width * (a.k - b.k)); });
    matrix[i * n + i] += at.noise / a.weight;
  });
  solveSymmetric(matrix, right, n);
  const out = new Float64Array(2 * (2 * at.half + 1));
  for (let k = -at.half; k <= at.half; k++) {
    let re = 0, im = 0;
    for (let i = 0; i < n; i++) {
      const r = sinc(span.width * (k - samples[i].k));
      re += r * right[2 * i];
      im += r * right[2 * i + 1];
    }
    const angle = -2 * Math.PI * span.centre * k;
    const c = Math.cos(angle), s = Math.sin(angle);
    out[2 * (k + at.half)] = re * c - im * s;
    out[2 * (k + at.half) + 1] = im * c + re * s;
  }
  return out;
}

function sinc(x: number): number {
  return x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x);
}

/** Cholesky factorisation in place; `right` (two interleaved columns) becomes the solution. */
function solveSymmetric(matrix: Float64Array, right: Float64Array, n: number): void {
  for (let j = 0; j < n; j++) {
    for (let i = j; i < n; i++) {
      let sum = matrix[i * n + j];
      for (let k = 0; k < j; k++) sum -= matrix[i * n + k] * matrix[j * n + k];
      matrix[i * n + j] = i === j ? Math.sqrt(Math.max(sum, 1e-12)) : sum / matrix[j * n + j];
    }
  }
  for (const column of [0, 1]) {
    for (let i = 0; i < n; i++) {
      let sum = right[2 * i + column];
      for (let k = 0; k < i; k++) sum -= matrix[i * n + k] * right[2 * k + column];
      right[2 * i + column] = sum / matrix[i * n + i];
    }
    for (let i = n - 1; i >= 0; i--) {
      let sum = right[2 * i + column];
      for (let k = i + 1; k < n; k++) sum -= matrix[k * n + i] * right[2 * k + column];
      right[2 * i + column] = sum / matrix[i * n + i];
    }
  }
}
