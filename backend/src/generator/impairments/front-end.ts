import { Random } from '../random.js';
import { meanPower } from '../signal.js';

/** Adds a constant, `levelDb` against the signal's mean power (a leaking local oscillator), in place. */
export function addDcOffset(iq: Float32Array, levelDb: number, phase: number): void {
  const amplitude = Math.sqrt(meanPower(iq)) * 10 ** (levelDb / 20);
  for (let n = 0; n < iq.length; n += 2) {
    iq[n] += amplitude * Math.cos(phase);
    iq[n + 1] += amplitude * Math.sin(phase);
  }
}

/**
 * Unequal mixer arms: y = x + κ·conj(x) with κ chosen for the wanted image, `imageDb` = 20·lg|κ|,
 * in place.
 */
export function addImage(iq: Float32Array, imageDb: number, phase: number): void {
  const k = 10 ** (imageDb / 20);
  const kr = k * Math.cos(phase);
  const ki = k * Math.sin(phase);
  for (let n = 0; n < iq.length; n += 2) {
    const i = iq[n];
    const q = iq[n + 1];
    iq[n] = i + kr * i + ki * q;
    iq[n + 1] = q + ki * i - kr * q;
  }
}

/** Conjugates in place: an inverted spectrum. */
export function invertSpectrum(iq: Float32Array): void {
  for (let n = 1; n < iq.length; n += 2) iq[n] = -iq[n];
}

/** Exchanges I and Q in place; apart from a quarter turn the same as an inverted spectrum. */
export function exchangeIq(iq: Float32Array): void {
  for (let n = 0; n < iq.length; n += 2) [iq[n], iq[n + 1]] = [iq[n + 1], iq[n]];
}

/** Wiener phase noise: an oscillator line `linewidthHz` wide at half power, in place. */
export function addPhaseNoise(iq: Float32Array, { linewidthHz, sampleRateHz, random }: { linewidthHz: number; sampleRateHz: number; random: Random }): void {
  const sigma = Math.sqrt((2 * Math.PI * linewidthHz) / sampleRateHz);
  let phase = 0;
  for (let n = 0; n < iq.length; n += 2) {
    phase += sigma * random.normal();
    const c = Math.cos(phase);
    const s = Math.sin(phase);
    const i = iq[n];
    iq[n] = i * c - iq[n + 1] * s;
    iq[n + 1] = i * s + iq[n + 1] * c;
  }
}

/** Turns the gain so that the mean power is `rmsDbfs` (0 dB: a complex tone at full scale), in place. */
export function setLevel(iq: Float32Array, rmsDbfs: number): void {
  const power = meanPower(iq);
  if (power === 0) return;
  const gain = Math.sqrt(10 ** (rmsDbfs / 10) / power);
  for (let i = 0; i < iq.length; i++) iq[i] *= gain;
}

/** Limits I and Q to ±1, in place; returns the share of samples that touched the limit. */
export function clip(iq: Float32Array): number {
  let clipped = 0;
  for (let n = 0; n < iq.length; n += 2) {
    const over = Math.abs(iq[n]) >= 1 || Math.abs(iq[n + 1]) >= 1;
    if (over) clipped++;
    iq[n] = Math.max(-1, Math.min(1, iq[n]));
    iq[n + 1] = Math.max(-1, Math.min(1, iq[n + 1]));
  }
  return iq.length === 0 ? 0 : (2 * clipped) / iq.length;
}

/** Takes runs of samples out, as a recorder does that cannot keep up; `at` in samples, ascending. */
export function dropSamples(iq: Float32Array, gaps: readonly { at: number; count: number }[]): Float32Array {
  const parts: Float32Array[] = [];
  let from = 0;
  for (const gap of gaps) {
    parts.push(iq.subarray(2 * from, 2 * gap.at));
    from = gap.at + gap.count;
  }
  parts.push(iq.subarray(2 * from));
  const kept = new Float32Array(parts.reduce((sum, p) => sum + p.length, 0));
  let to = 0;
  for (const part of parts) {
    kept.set(part, to);
    to += part.length;
  }
  return kept;
}
