import FFT from 'fft.js';
import { oddRadix } from './odd-radix.js';

/**
 * The one place where a transform is computed. Double precision, any length.
 *
 * Arrays are interleaved complex (re, im, re, im, ...), length 2·size, unshifted: bin k is the
 * frequency k·rate/size, bins above size/2 are negative. `forward` is unscaled, `inverse`
 * carries the 1/size. Input and output must be different arrays. Always Float64Array: fft.js
 * loses half its speed in a process that feeds it arrays of several kinds. NaN in, NaN out.
 */
export interface Transform {
  readonly size: number;
  forward(input: Float64Array, output: Float64Array): void;
  inverse(input: Float64Array, output: Float64Array): void;
}

const transforms = new Map<number, Transform>();

/** The transform of a length of at least 2, planned once per thread. */
export function transformOf(size: number): Transform {
  const planned = transforms.get(size);
  if (planned) return planned;
  if (!Number.isInteger(size) || size < 2) throw new RangeError(`a transform needs a whole length of at least 2, not ${size}`);
  const made = plan(size);
  transforms.set(size, made);
  return made;
}

function plan(size: number): Transform {
  if (isPowerOfTwo(size)) return powerOfTwo(size);
  for (const radix of [3, 5] as const) {
    if (size % radix === 0 && isSmooth(size / radix)) return oddRadix(radix, transformOf(size / radix));
  }
  return chirp(size);
}

/** Made of 2, 3 and 5 only, and even: what the radix stages reach. */
function isSmooth(size: number): boolean {
  let rest = size;
  for (const p of [3, 5]) while (rest % p === 0) rest /= p;
  return rest > 1 && isPowerOfTwo(rest);
}

/** The least even length of at least `n` that has a fast transform (factors 2, 3 and 5). */
export function nextFast(n: number): number {
  let size = Math.max(2, Math.ceil(n));
  while (!isSmooth(size)) size++;
  return size;
}

export function isPowerOfTwo(n: number): boolean {
  return n > 0 && (n & (n - 1)) === 0;
}

export function nextPowerOfTwo(n: number): number {
  return 2 ** Math.ceil(Math.log2(Math.max(1, n)));
}

function powerOfTwo(size: number): Transform {
  const fft = new FFT(size);
  return {
    size,
    forward: (input, output) => fft.transform(output, input),
    inverse: (input, output) => fft.inverseTransform(output, input),
  };
}

/** Any length as a convolution with a chirp (Bluestein, IEEE Trans. Audio Electroacoust. 18 (1970) 451). */
function chirp(size: number): Transform {
  const padded = nextPowerOfTwo(2 * size - 1);
  const inner = powerOfTwo(padded);
  const cos = new Float64Array(size);
  const sin = new Float64Array(size);
  for (let n = 0; n < size; n++) {
    // n² modulo 2·size keeps the angle exact for long transforms.
    const angle = (Math.PI * ((n * n) % (2 * size))) / size;
    cos[n] = Math.cos(angle);
    sin[n] = Math.sin(angle);
  }
  const kernel = new Float64Array(2 * padded);
  for (let n = 0; n < size; n++) {
    for (const at of n === 0 ? [0] : [n, padded - n]) {
      kernel[2 * at] = cos[n];
      kernel[2 * at + 1] = sin[n];
    }
  }
  const kernelSpectrum = new Float64Array(2 * padded);
  inner.forward(kernel, kernelSpectrum);
  const time = new Float64Array(2 * padded);
  const spectrum = new Float64Array(2 * padded);

  const run = (input: Float64Array, output: Float64Array, sense: 1 | -1) => {
    time.fill(0);
    for (let n = 0; n < size; n++) {
      const re = input[2 * n];
      const im = sense * input[2 * n + 1];
      time[2 * n] = re * cos[n] + im * sin[n];
      time[2 * n + 1] = im * cos[n] - re * sin[n];
    }
    inner.forward(time, spectrum);
    for (let k = 0; k < padded; k++) {
      const re = spectrum[2 * k];
      const im = spectrum[2 * k + 1];
      spectrum[2 * k] = re * kernelSpectrum[2 * k] - im * kernelSpectrum[2 * k + 1];
      spectrum[2 * k + 1] = re * kernelSpectrum[2 * k + 1] + im * kernelSpectrum[2 * k];
    }
    inner.inverse(spectrum, time);
    const scale = sense === 1 ? 1 : 1 / size;
    for (let k = 0; k < size; k++) {
      const re = time[2 * k];
      const im = time[2 * k + 1];
      output[2 * k] = scale * (re * cos[k] + im * sin[k]);
      output[2 * k + 1] = sense * scale * (im * cos[k] - re * sin[k]);
    }
  };
  return { size, forward: (i, o) => run(i, o, 1), inverse: (i, o) => run(i, o, -1) };
}
