/** Complex samples, interleaved I, Q, at any scale; a generator's carrier at full load has mean power 1. */
export interface Signal {
  readonly iq: Float32Array;
  readonly sampleRateHz: number;
}

/**
 * What a transmitter sends, as a function of the transmitter's own time (zero at a frame
 * boundary), at baseband around its RF reference frequency.
 */
export interface Emission {
  /** RF reference, Hz. */
  readonly referenceHz: number;
  /** Edges of what is sent, Hz against the reference. */
  readonly lowHz: number;
  readonly highHz: number;
  /** Noise of this many watts per hertz against `onPower`/width makes 0 dB: power while everything is on. */
  readonly onPower: number;
  /** The smallest rate of at least `minimumHz` at which symbols lie on whole samples. */
  nativeRateHz(minimumHz: number): number;
  /** Samples `first` to `first + count − 1` of the transmitter's time at a native rate. */
  render(rateHz: number, first: number, count: number): Float32Array;
}

export function meanPower(iq: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < iq.length; i++) sum += iq[i] * iq[i];
  return iq.length === 0 ? 0 : (2 * sum) / iq.length;
}

/** Turns in place: sample n by the phase 2π(offset·(n + first)/rate) + phase. Exact to the last turn. */
export function shiftFrequency(iq: Float32Array, { offsetHz, rateHz, first = 0, phase = 0 }: { offsetHz: number; rateHz: number; first?: number; phase?: number }): void {
  const step = (2 * Math.PI * offsetHz) / rateHz;
  const cosStep = Math.cos(step);
  const sinStep = Math.sin(step);
  let re = 1;
  let im = 0;
  for (let n = 0; n < iq.length / 2; n++) {
    // The recursion is set straight every 256 samples, before rounding builds up.
    if (n % 256 === 0) {
      const cycles = (offsetHz * (n + first)) / rateHz;
      const angle = 2 * Math.PI * (cycles - Math.floor(cycles)) + phase;
      re = Math.cos(angle);
      im = Math.sin(angle);
    }
    const i = iq[2 * n];
    const q = iq[2 * n + 1];
    iq[2 * n] = i * re - q * im;
    iq[2 * n + 1] = i * im + q * re;
    const next = re * cosStep - im * sinStep;
    im = re * sinStep + im * cosStep;
    re = next;
  }
}

export function addInto(sum: Float32Array, term: Float32Array, gain = 1): void {
  for (let i = 0; i < sum.length; i++) sum[i] += gain * term[i];
}
