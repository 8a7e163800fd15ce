import { Random } from '../random.js';

/** One path: delay against the first, mean power in dB, and its kind. */
export interface Path {
  readonly delayS: number;
  readonly powerDb: number;
  /** A fixed phase (rad), or fading that follows the maximum Doppler frequency. */
  readonly phase?: number;
}

export interface Channel {
  readonly paths: readonly Path[];
  /** 0: every path keeps its phase and power. Above: each fades on its own (Rayleigh). */
  readonly dopplerHz: number;
}

const profile = (rows: readonly (readonly [number, number])[]): Path[] => rows.map(([ns, db]) => ({ delayS: ns * 1e-9, powerDb: db }));

/**
 * Delay profiles. Pedestrian, vehicular and urban are the extended models of TS 36.101 Annex B.2.1
 * (from memory), the urban one without its path at 5 µs, which no normal prefix holds; indoor falls
 * by 2.5 dB a path.
 */
export const PROFILES = {
  flat: profile([[0, 0]]),
  indoor: profile([[0, 0], [10, -2.5], [20, -5], [30, -7.5], [50, -10], [80, -12.5], [120, -15]]),
  pedestrian: profile([[0, 0], [30, -1], [70, -2], [90, -3], [110, -8], [190, -17.2], [410, -20.8]]),
  vehicular: profile([[0, 0], [30, -1.5], [150, -1.4], [310, -3.6], [370, -0.6], [710, -9.1], [1090, -7], [1730, -12], [2510, -16.9]]),
  urban: profile([[0, -1], [50, -1], [120, -1], [200, 0], [230, 0], [500, 0], [1600, -3], [2300, -5]]),
} satisfies Record<string, readonly Path[]>;
export type ProfileName = keyof typeof PROFILES;

const TAPS = 24;
const RAYS = 16;

/** The signal through the channel, total mean gain 1. */
export function throughChannel(iq: Float32Array, { channel, sampleRateHz, random }: { channel: Channel; sampleRateHz: number; random: Random }): Float32Array {
  const total = channel.paths.reduce((sum, p) => sum + 10 ** (p.powerDb / 10), 0);
  const out = new Float32Array(iq.length);
  for (const path of channel.paths) {
    const delayed = delay(iq, path.delayS * sampleRateHz);
    const gain = Math.sqrt(10 ** (path.powerDb / 10) / total);
    if (channel.dopplerHz > 0) addFading(out, delayed, { gain, dopplerHz: channel.dopplerHz, sampleRateHz, random });
    else addFixed(out, delayed, gain, path.phase ?? random.uniform(0, 2 * Math.PI));
  }
  return out;
}

function addFixed(out: Float32Array, iq: Float32Array, gain: number, phase: number): void {
  const c = gain * Math.cos(phase);
  const s = gain * Math.sin(phase);
  for (let n = 0; n < iq.length; n += 2) {
    out[n] += c * iq[n] - s * iq[n + 1];
    out[n + 1] += s * iq[n] + c * iq[n + 1];
  }
}

/** Rays with random angles of arrival (Clarke's model); the gain is renewed every 32 samples. */
function addFading(out: Float32Array, iq: Float32Array, { gain, dopplerHz, sampleRateHz, random }: { gain: number; dopplerHz: number; sampleRateHz: number; random: Random }): void {
  const rays = Array.from({ length: RAYS }, () => ({ hz: dopplerHz * Math.cos(random.uniform(0, 2 * Math.PI)), phase: random.uniform(0, 2 * Math.PI), weight: random.normal() }));
  const strength = gain / Math.sqrt(rays.reduce((sum, r) => sum + r.weight ** 2, 0));
  let c = 0;
  let s = 0;
  for (let n = 0; n < iq.length / 2; n++) {
    if (n % 32 === 0) {
      c = 0;
      s = 0;
      for (const ray of rays) {
        const angle = ray.phase + (2 * Math.PI * ray.hz * n) / sampleRateHz;
        c += strength * ray.weight * Math.cos(angle);
        s += strength * ray.weight * Math.sin(angle);
      }
    }
    out[2 * n] += c * iq[2 * n] - s * iq[2 * n + 1];
    out[2 * n + 1] += s * iq[2 * n] + c * iq[2 * n + 1];
  }
}

/** A delay of any fraction of a sample, by a windowed sine of 24 taps. */
export function delay(iq: Float32Array, samples: number): Float32Array {
  const whole = Math.floor(samples);
  const fraction = samples - whole;
  const out = new Float32Array(iq.length);
  if (fraction === 0) {
    if (whole < iq.length / 2) out.set(iq.subarray(0, iq.length - 2 * whole), 2 * whole);
    return out;
  }
  const taps = Float64Array.from({ length: TAPS }, (_, k) => {
    const x = k - TAPS / 2 + 1 - fraction;
    return (Math.sin(Math.PI * x) / (Math.PI * x)) * (0.5 + 0.5 * Math.cos((2 * Math.PI * x) / (TAPS + 1)));
  });
  const count = iq.length / 2;
  for (let n = 0; n < count; n++) {
    let re = 0;
    let im = 0;
    // Tap k meets sample n − whole − k + TAPS/2 − 1, where there is one.
    const newest = n - whole + TAPS / 2 - 1;
    const first = Math.max(0, newest - count + 1);
    const last = Math.min(TAPS, newest + 1);
    for (let k = first, at = 2 * (newest - first); k < last; k++, at -= 2) {
      re += taps[k] * iq[at];
      im += taps[k] * iq[at + 1];
    }
    out[2 * n] = re;
    out[2 * n + 1] = im;
  }
  return out;
}
