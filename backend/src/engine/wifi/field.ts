import { encode, WIFI_CODE } from '../coding/viterbi.js';
import { EARLY_US } from './synchronise.js';
import type { Preamble } from './synchronise.js';
import { HE_EXTRA_TONES, LAYOUT, LEGACY_TONES, LONG_TRAINING, WIDE_TONES } from './training.js';
import { tonePlace, toneSpectrum } from './tones.js';

/** The channel on the tones of the legacy part, subchannel by subchannel, and the noise on one tone. */
export interface LegacyChannel {
  /** Tones −28 … 28 (index k + 28) of each subchannel, interleaved; 0 where the training has none. */
  readonly h: readonly Float64Array[];
  /** Variance of one tone in one symbol. */
  readonly noise: number;
  /** Mean power of the signal on a tone. */
  readonly power: number;
}

const REACH = 28;
const WIDTH = 2 * REACH + 1;

/** Mean of the two long symbols, and what they differ by. */
export function legacyChannel(preamble: Preamble): LegacyChannel | null {
  const at = preamble.startUs + LAYOUT.longTrainingUs - EARLY_US;
  const first = toneSpectrum(preamble.piece, at);
  const second = toneSpectrum(preamble.piece, at + LAYOUT.usefulUs);
  if (!first || !second) return null;
  const size = first.length >> 1;
  let difference = 0, sum = 0, count = 0;
  const h = preamble.channels.map((channel) => {
    const out = new Float64Array(2 * WIDTH);
    for (let k = -26; k <= 26; k++) {
      const sign = LONG_TRAINING[k + 26];
      if (sign === 0) continue;
      const from = tonePlace(k, channel, size);
      for (const part of [0, 1]) {
        const a = first[from + part], b = second[from + part];
        out[2 * (k + REACH) + part] = (sign * (a + b)) / 2;
        difference += (a - b) ** 2;
        sum += ((a + b) / 2) ** 2;
      }
      count++;
    }
    return out;
  });
  const noise = difference / 2 / count;
  return { h, noise, power: Math.max(0, sum / count - noise / 2) };
}

/** Soft tones of one legacy symbol: Σ over subchannels of Y·H*, turned back by the phase; tones −28 … 28, interleaved, and Σ|H|². */
export interface SoftSymbol {
  readonly z: Float64Array;
  readonly weight: Float64Array;
  /** Σ|Y|² over subchannels. */
  readonly energy: Float64Array;
  readonly channels: number;
}

/** Symbol whose guard starts at `atUs` after the frame's start; `phase` is the carrier's turn since the training. Null past the end. */
export function softSymbol(preamble: Preamble, channel: LegacyChannel, at: { us: number; phase: number }): SoftSymbol | null {
  const spectrum = toneSpectrum(preamble.piece, preamble.startUs + at.us + LAYOUT.guardUs - EARLY_US);
  if (!spectrum) return null;
  const size = spectrum.length >> 1;
  const c = Math.cos(at.phase), s = Math.sin(at.phase);
  const z = new Float64Array(2 * WIDTH);
  const weight = new Float64Array(WIDTH);
  const energy = new Float64Array(WIDTH);
  preamble.channels.forEach((sub, index) => {
    const h = channel.h[index];
    for (let i = 0; i < WIDTH; i++) {
      const from = tonePlace(i - REACH, sub, size);
      const yr = spectrum[from] * c + spectrum[from + 1] * s;
      const yi = spectrum[from + 1] * c - spectrum[from] * s;
      z[2 * i] += yr * h[2 * i] + yi * h[2 * i + 1];
      z[2 * i + 1] += yi * h[2 * i] - yr * h[2 * i + 1];
      weight[i] += h[2 * i] ** 2 + h[2 * i + 1] ** 2;
      energy[i] += yr * yr + yi * yi;
    }
  });
  return { z, weight, energy, channels: preamble.channels.length };
}

/** Adds the tones ±27 and ±28 to the channel from an HE frame's L-SIG and RL-SIG, which carry known values there. */
export function widened(preamble: Preamble, channel: LegacyChannel, symbols: readonly { us: number; phase: number }[]): LegacyChannel {
  const h = channel.h.map((sub) => new Float64Array(sub));
  for (const at of symbols) {
    const spectrum = toneSpectrum(preamble.piece, preamble.startUs + at.us + LAYOUT.guardUs - EARLY_US);
    if (!spectrum) continue;
    const c = Math.cos(at.phase), s = Math.sin(at.phase);
    preamble.channels.forEach((sub, index) => {
      for (const [k, sign] of HE_EXTRA_TONES) {
        const from = tonePlace(k, sub, spectrum.length >> 1);
        const weight = sign / symbols.length;
        h[index][2 * (k + REACH)] += weight * (spectrum[from] * c + spectrum[from + 1] * s);
        h[index][2 * (k + REACH) + 1] += weight * (spectrum[from + 1] * c - spectrum[from] * s);
      }
    });
  }
  return { ...channel, h };
}

/** BPSK soft bits (positive for 0) in coded order; `rotated` reads the imaginary axis (QBPSK). IEEE 802.11-2016 clauses 17.3.5.7, 19.3.11.8. */
export function softBits(symbol: SoftSymbol, tones: 'legacy' | 'wide', rotated: boolean): Float64Array {
  const list = tones === 'legacy' ? LEGACY_TONES : WIDE_TONES;
  const out = new Float64Array(list.length);
  for (let k = 0; k < list.length; k++) {
    const tone = list[interleaved(k, list.length)];
    // A 1 is sent as +1 in 802.11 (clause 17.3.5.8): the sign turns.
    out[k] = -symbol.z[2 * (tone + REACH) + (rotated ? 1 : 0)];
  }
  return out;
}

/** Place of coded bit `k` in a BPSK symbol: 16 columns with 48 tones, 13 with 52. */
export function interleaved(k: number, bits: number): number {
  const columns = bits === 48 ? 16 : 13;
  return (bits / columns) * (k % columns) + Math.floor(k / columns);
}

/** −1 where the symbol lies on the imaginary axis (QBPSK), +1 on the real one, near 0 for neither. */
export function axis(symbol: SoftSymbol): number {
  let squares = 0, power = 0;
  for (const tone of LEGACY_TONES) {
    const re = symbol.z[2 * (tone + REACH)], im = symbol.z[2 * (tone + REACH) + 1];
    squares += re * re - im * im;
    power += re * re + im * im;
  }
  return power > 0 ? squares / power : 0;
}

/** Known ±1 values of a re-encoded BPSK field's data tones, symbol by symbol of `perSymbol` coded bits. */
export function encodedTones(bits: ArrayLike<number>, perSymbol: 48 | 52): Float64Array[] {
  const coded = encode(bits, WIFI_CODE);
  const out: Float64Array[] = [];
  for (let from = 0; from < coded.length; from += perSymbol) {
    const values = new Float64Array(perSymbol);
    for (let k = 0; k < perSymbol; k++) values[interleaved(k, perSymbol)] = coded[from + k] ? 1 : -1;
    out.push(values);
  }
  return out;
}

export interface KnownSymbolFit {
  /** Turn of the whole symbol against the channel, radians. */
  readonly phase: number;
  /** Amplitude against the training's: an extended-range frame trains 3 dB louder (IEEE 802.11ax clause 27.3.11.3). */
  readonly gain: number;
  /** Error variance on a tone and the power of the symbol there. */
  readonly error: number;
  readonly power: number;
}

/** The training's error adds half its variance to the symbol's own. */
const TRAINING_SHARE = 1.5;

/** A symbol against known values on the legacy data tones; `held` fixes gain and phase instead of fitting them. */
export function knownSymbolFit(symbol: SoftSymbol, values: ArrayLike<number>, held?: { gain: number; phase: number }): KnownSymbolFit {
  let re = 0, im = 0;
  LEGACY_TONES.forEach((tone, i) => {
    re += values[i] * symbol.z[2 * (tone + REACH)];
    im += values[i] * symbol.z[2 * (tone + REACH) + 1];
  });
  const phase = held?.phase ?? Math.atan2(im, re);
  const weights = LEGACY_TONES.reduce((sum, tone) => sum + symbol.weight[tone + REACH], 0);
  const gain = held?.gain ?? Math.hypot(re, im) / Math.max(weights, 1e-30);
  const c = gain * Math.cos(phase), s = gain * Math.sin(phase);
  let error = 0;
  LEGACY_TONES.forEach((tone, i) => {
    const k = tone + REACH;
    const along = values[i] * (symbol.z[2 * k] * c + symbol.z[2 * k + 1] * s);
    error += symbol.energy[k] - 2 * along + gain * gain * symbol.weight[k];
  });
  const tones = LEGACY_TONES.length * symbol.channels;
  return { phase, gain, error: error / tones / TRAINING_SHARE, power: (gain * gain * weights) / tones };
}
