/**
 * The generator's own inverse Fourier transform, of any length: decimation in time over the
 * prime factors (4 first). x[n] = Σ X[k]·e^{+j2πkn/N}, without a scale. Interleaved re, im.
 */
export class InverseTransform {
  private readonly cos: Float64Array;
  private readonly sin: Float64Array;
  private readonly factors: readonly number[];
  /** Where each output of the last stage's input order comes from: mixed-radix digit reversal. */
  private readonly order: Uint32Array;
  private readonly scratch: Float64Array;

  constructor(readonly size: number) {
    this.cos = new Float64Array(size);
    this.sin = new Float64Array(size);
    for (let k = 0; k < size; k++) {
      this.cos[k] = Math.cos((2 * Math.PI * k) / size);
      this.sin[k] = Math.sin((2 * Math.PI * k) / size);
    }
    this.factors = factorise(size);
    this.order = digitReversal(size, this.factors);
    this.scratch = new Float64Array(2 * Math.max(...this.factors, 1));
  }

  /** `from` and `to` are different arrays of 2·size. */
  run(from: Float64Array, to: Float64Array): void {
    const { order, size } = this;
    for (let n = 0; n < size; n++) {
      to[2 * n] = from[2 * order[n]];
      to[2 * n + 1] = from[2 * order[n] + 1];
    }
    let part = 1;
    for (let level = this.factors.length - 1; level >= 0; level--) {
      const radix = this.factors[level];
      const length = part * radix;
      for (let out = 0; out < size; out += length) {
        if (radix === 4) this.butterflies4(to, out, part, size / length);
        else if (radix === 2) this.butterflies2(to, out, part, size / length);
        else this.butterflies(to, out, part, radix);
      }
      part = length;
    }
  }

  private butterflies2(x: Float64Array, out: number, part: number, step: number): void {
    for (let k = 0; k < part; k++) {
      const c = this.cos[k * step];
      const s = this.sin[k * step];
      const i = 2 * (out + k);
      const j = i + 2 * part;
      const re = x[j] * c - x[j + 1] * s;
      const im = x[j] * s + x[j + 1] * c;
      x[j] = x[i] - re;
      x[j + 1] = x[i + 1] - im;
      x[i] += re;
      x[i + 1] += im;
    }
  }

  private butterflies4(x: Float64Array, out: number, part: number, step: number): void {
    const { cos, sin } = this;
    for (let k = 0; k < part; k++) {
      const i0 = 2 * (out + k);
      const i1 = i0 + 2 * part;
      const i2 = i1 + 2 * part;
      const i3 = i2 + 2 * part;
      const c1 = cos[k * step], s1 = sin[k * step];
      const c2 = cos[2 * k * step], s2 = sin[2 * k * step];
      const c3 = cos[3 * k * step], s3 = sin[3 * k * step];
      const r1 = x[i1] * c1 - x[i1 + 1] * s1, m1 = x[i1] * s1 + x[i1 + 1] * c1;
      const r2 = x[i2] * c2 - x[i2 + 1] * s2, m2 = x[i2] * s2 + x[i2 + 1] * c2;
      const r3 = x[i3] * c3 - x[i3 + 1] * s3, m3 = x[i3] * s3 + x[i3 + 1] * c3;
      const ar = x[i0] + r2, am = x[i0 + 1] + m2;
      const br = x[i0] - r2, bm = x[i0 + 1] - m2;
      const cr = r1 + r3, cm = m1 + m3;
      const dr = r1 - r3, dm = m1 - m3;
      x[i0] = ar + cr;
      x[i0 + 1] = am + cm;
      x[i1] = br - dm;
      x[i1 + 1] = bm + dr;
      x[i2] = ar - cr;
      x[i2 + 1] = am - cm;
      x[i3] = br + dm;
      x[i3 + 1] = bm - dr;
    }
  }

  /** Any radix by the definition. */
  private butterflies(x: Float64Array, out: number, part: number, radix: number): void {
    const step = this.size / (part * radix);
    const turn = part * step;
    const held = this.scratch;
    for (let k = 0; k < part; k++) {
      for (let r = 0; r < radix; r++) {
        const i = 2 * (out + k + r * part);
        const c = this.cos[(r * k * step) % this.size];
        const s = this.sin[(r * k * step) % this.size];
        held[2 * r] = x[i] * c - x[i + 1] * s;
        held[2 * r + 1] = x[i] * s + x[i + 1] * c;
      }
      for (let q = 0; q < radix; q++) {
        let re = 0;
        let im = 0;
        for (let r = 0; r < radix; r++) {
          const at = (q * r * turn) % this.size;
          re += held[2 * r] * this.cos[at] - held[2 * r + 1] * this.sin[at];
          im += held[2 * r] * this.sin[at] + held[2 * r + 1] * this.cos[at];
        }
        x[2 * (out + k + q * part)] = re;
        x[2 * (out + k + q * part) + 1] = im;
      }
    }
  }
}

/** Input index that stands at each place before the first stage; the first factor splits the input last. */
function digitReversal(size: number, factors: readonly number[]): Uint32Array {
  const order = new Uint32Array(size);
  for (let n = 0; n < size; n++) {
    let rest = n;
    let length = size;
    let stride = 1;
    let index = 0;
    for (const radix of factors) {
      length /= radix;
      index += Math.floor(rest / length) * stride;
      rest %= length;
      stride *= radix;
    }
    order[n] = index;
  }
  return order;
}

function factorise(size: number): number[] {
  const factors: number[] = [];
  let rest = size;
  for (const p of [4, 2, 3, 5, 7]) while (rest % p === 0) { factors.push(p); rest /= p; }
  for (let p = 11; rest > 1; p += 2) while (rest % p === 0) { factors.push(p); rest /= p; }
  return factors;
}

const planned = new Map<number, InverseTransform>();

/** One plan a length; plans hold scratch, so they serve one caller at a time. */
export function inverseTransform(size: number): InverseTransform {
  let plan = planned.get(size);
  if (!plan) planned.set(size, plan = new InverseTransform(size));
  return plan;
}
