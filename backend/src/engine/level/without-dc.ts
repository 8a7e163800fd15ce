import type { SampleSource } from '../types.js';
import { mean, meanPower } from '../vector/power.js';

/** DC below this share of the power is left: it hides nothing. */
const HARMLESS = 1e-4;

/**
 * The samples without the receiver's own DC, as far as `window` shows it: a strong one reaches
 * over the subcarriers around it wherever it does not fall on one. A subcarrier that lies at zero
 * loses next to nothing, since its symbols cancel over the window. What is harmless is left alone.
 */
export function withoutDc(source: SampleSource, window: Float32Array): SampleSource {
  const [re, im] = mean(window);
  if (re * re + im * im <= HARMLESS * meanPower(window)) return source;
  return {
    sampleRateHz: source.sampleRateHz,
    centreFrequencyHz: source.centreFrequencyHz,
    samples: source.samples,
    read: (start, count) => less(source.read(start, count), re, im),
  };
}

function less(iq: Float32Array, re: number, im: number): Float32Array {
  for (let i = 0; i < iq.length; i += 2) {
    iq[i] -= re;
    iq[i + 1] -= im;
  }
  return iq;
}
