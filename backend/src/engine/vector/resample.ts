import { mix } from './mix.js';

export interface ResampleOptions {
  /** The signal is moved up by this before it is filtered (as `mix` does); default 0. */
  readonly shiftHz?: number;
  /** Zero crossings of the sinc on each side; more is a steeper edge. Default 24. */
  readonly crossings?: number;
  /** Place of the first sample in the capture, for a shift that stays in phase across windows. */
  readonly startSample?: number;
}

/** Kaiser's β for 70 dB of stop band (Kaiser 1974: 0.1102·(A − 8.7)). */
const BETA = 0.1102 * (70 - 8.7);
const FINE_PHASES = 512;

/**
 * Interleaved samples at another rate, through a windowed sinc that passes |f| below about
 * 0.455 of the lower of the two rates (24 crossings) and stops what would fold by 70 dB. Output
 * sample k lies at the time k/toHz after the first input sample (no delay); outside the window
 * the signal counts as zero, so some `crossings` samples at each end are attenuated. Any ratio:
 * exact where it is rational with a small numerator, else interpolated between 512 phases.
 */
export function resample(iq: Float32Array, fromHz: number, toHz: number, options: ResampleOptions = {}): Float32Array {
  if (!(fromHz > 0) || !(toHz > 0)) throw new RangeError('resampling needs two positive rates');
  const { shiftHz = 0, crossings = 24, startSample = 0 } = options;
  const shifted = shiftHz === 0 ? iq : mix(iq, shiftHz, fromHz, startSample);
  if (fromHz === toHz) return shiftHz === 0 ? new Float32Array(iq) : shifted;
  if (fromHz >= 4 * toHz) return resample(halve(shifted), fromHz / 2, toHz, { crossings });
  const ratio = rational(toHz, fromHz);
  const cutoff = Math.min(1, toHz / fromHz);
  const bank = filterBank(cutoff, crossings, ratio ? ratio.up : FINE_PHASES);
  const count = Math.floor(((iq.length >> 1) * toHz) / fromHz);
  return ratio ? exact(shifted, bank, { ...ratio, count }) : interpolated(shifted, bank, { step: fromHz / toHz, count });
}

interface Bank {
  /** phases + 1 rows of `taps`: row p is the filter for an output that lies p/phases after an input sample. */
  readonly rows: Float64Array;
  readonly taps: number;
  readonly phases: number;
}

const banks = new Map<string, Bank>();

function filterBank(cutoff: number, crossings: number, phases: number): Bank {
  const key = `${cutoff} ${crossings} ${phases}`;
  const known = banks.get(key);
  if (known) return known;
  const half = Math.ceil(crossings / cutoff);
  const taps = 2 * half;
  const rows = new Float64Array((phases + 1) * taps);
  for (let p = 0; p <= phases; p++) {
    for (let t = 0; t < taps; t++) rows[p * taps + t] = kernel(t - half + 1 - p / phases, half, cutoff);
    unitGain(rows, p * taps, taps);
  }
  const bank = { rows, taps, phases };
  if (banks.size >= 16) banks.clear();
  banks.set(key, bank);
  return bank;
}

/** Every phase passes DC with the gain 1: otherwise the phases modulate a strong carrier. */
function unitGain(rows: Float64Array, at: number, taps: number): void {
  let sum = 0;
  for (let t = 0; t < taps; t++) sum += rows[at + t];
  for (let t = 0; t < taps; t++) rows[at + t] /= sum;
}

function kernel(x: number, half: number, cutoff: number): number {
  if (Math.abs(x) >= half) return 0;
  const window = bessel0(BETA * Math.sqrt(1 - (x / half) ** 2)) / bessel0(BETA);
  const angle = Math.PI * cutoff * x;
  return window * cutoff * (angle === 0 ? 1 : Math.sin(angle) / angle);
}

/** Modified Bessel function of the first kind, order 0, by its power series. */
function bessel0(x: number): number {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > 1e-12 * sum; k++) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}

function rational(toHz: number, fromHz: number): { up: number; down: number } | null {
  if (!Number.isInteger(toHz) || !Number.isInteger(fromHz)) return null;
  let a = toHz;
  let b = fromHz;
  while (b > 0) [a, b] = [b, a % b];
  const up = toHz / a;
  return up <= 1024 ? { up, down: fromHz / a } : null;
}

function exact(iq: Float32Array, bank: Bank, plan: { up: number; down: number; count: number }): Float32Array {
  const out = new Float32Array(2 * plan.count);
  let base = 0;
  let phase = 0;
  for (let k = 0; k < plan.count; k++) {
    dot(iq, base, { row: bank.rows, at: phase * bank.taps, taps: bank.taps, out, to: k });
    phase += plan.down;
    const whole = Math.floor(phase / plan.up);
    base += whole;
    phase -= whole * plan.up;
  }
  return out;
}

function interpolated(iq: Float32Array, bank: Bank, plan: { step: number; count: number }): Float32Array {
  const out = new Float32Array(2 * plan.count);
  const { taps, rows } = bank;
  const row = new Float64Array(taps);
  for (let k = 0; k < plan.count; k++) {
    const time = k * plan.step;
    const base = Math.floor(time);
    const fine = (time - base) * bank.phases;
    const p = Math.min(bank.phases - 1, Math.floor(fine));
    const part = fine - p;
    for (let t = 0; t < taps; t++) {
      const low = rows[p * taps + t];
      row[t] = low + part * (rows[(p + 1) * taps + t] - low);
    }
    dot(iq, base, { row, at: 0, taps, out, to: k });
  }
  return out;
}

interface Dot { row: Float64Array; at: number; taps: number; out: Float32Array; to: number }

function dot(iq: Float32Array, base: number, { row, at, taps, out, to }: Dot): void {
  const start = base - taps / 2 + 1;
  const first = Math.max(0, -start);
  const last = Math.min(taps, (iq.length >> 1) - start);
  let re = 0;
  let im = 0;
  for (let t = first, i = 2 * (start + first); t < last; t++, i += 2) {
    const w = row[at + t];
    re += w * iq[i];
    im += w * iq[i + 1];
  }
  out[2 * to] = re;
  out[2 * to + 1] = im;
}

const HALF_BAND = halfBandTaps(11);

/** Odd taps of a half-band low-pass of 4·n − 1 taps (the even ones are 0 but for the middle, ½). */
function halfBandTaps(n: number): Float64Array {
  const half = 2 * n;
  const taps = new Float64Array(n);
  let sum = 0;
  for (let i = 0; i < n; i++) sum += taps[i] = kernel(2 * i + 1, half, 0.5);
  return taps.map((tap) => (tap * 0.25) / sum);
}

/** Every second sample after a half-band filter: flat to a quarter of the output's rate and more, as the last stage needs. */
function halve(iq: Float32Array): Float32Array {
  const samples = iq.length >> 1;
  const count = samples >> 1;
  const out = new Float32Array(2 * count);
  const reach = 2 * HALF_BAND.length - 1;
  for (let k = 0; k < count; k++) {
    const centre = 2 * k;
    const inside = centre >= reach && centre + reach < samples;
    let re = 0.5 * iq[2 * centre];
    let im = 0.5 * iq[2 * centre + 1];
    for (let t = 0; t < HALF_BAND.length; t++) {
      const w = HALF_BAND[t];
      const a = centre - (2 * t + 1);
      const b = centre + (2 * t + 1);
      if (inside || a >= 0) {
        re += w * iq[2 * a];
        im += w * iq[2 * a + 1];
      }
      if (inside || b < samples) {
        re += w * iq[2 * b];
        im += w * iq[2 * b + 1];
      }
    }
    out[2 * k] = re;
    out[2 * k + 1] = im;
  }
  return out;
}
