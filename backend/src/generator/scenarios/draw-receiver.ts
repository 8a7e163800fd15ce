import { PROFILES, type ProfileName } from '../impairments/multipath.js';
import type { Random } from '../random.js';
import type { Receiver } from '../receive.js';
import type { Datatype } from '../quantise.js';
import type { CaptureSpec, Impairments } from './capture.js';
import type { Wish } from './drawn.js';

const NATIVE_HZ = [1.92e6, 3.84e6, 7.68e6, 11.52e6, 15.36e6, 23.04e6, 30.72e6, 46.08e6, 61.44e6, 92.16e6, 122.88e6];
const RECORDER_HZ = [2e6, 2.4e6, 2.5e6, 4e6, 5e6, 6.25e6, 8e6, 10e6, 12.5e6, 16e6, 20e6, 25e6, 28e6, 32e6, 40e6, 50e6, 56e6, 62.5e6, 80e6, 100e6, 125e6, 160e6];

export interface Band {
  readonly carrierHz: number;
  /** Width that must be held, Hz. */
  readonly widthHz: number;
  readonly durationS: number;
}

/** A tuner that holds the signal: native or any other rate, on the carrier or beside it, with an ordinary clock. */
export function drawReceiver(random: Random, band: Band, wish: Wish): Receiver {
  const fits = (list: readonly number[]) => list.filter((r) => r >= 1.04 * band.widthHz && r <= Math.max(4.5 * band.widthHz, 4e6) && r <= (wish.maxRateHz ?? Infinity));
  const native = fits(NATIVE_HZ);
  const other = fits(RECORDER_HZ);
  const sampleRateHz = other.length === 0 || (native.length > 0 && random.chance(0.6)) ? random.pick(native.length > 0 ? native : [NATIVE_HZ.find((r) => r >= 1.04 * band.widthHz) ?? 1.04 * band.widthHz]) : random.pick(other);
  const room = 0.47 * sampleRateHz - band.widthHz / 2;
  const away = room > 50e3 && random.chance(0.4) ? tuning(random, room) : 0;
  const isCommon = random.chance(0.7);
  const clockPpm = random.chance(0.25) ? 0 : random.uniform(-1, 1);
  const carrierPpm = isCommon ? clockPpm : random.uniform(-1, 1);
  return {
    centreHz: band.carrierHz + away,
    sampleRateHz,
    startS: random.chance(0.3) ? 0 : random.uniform(0, 0.03),
    durationS: band.durationS,
    clockPpm,
    carrierOffsetHz: band.carrierHz * carrierPpm * 1e-6,
    phase: random.uniform(0, 2 * Math.PI),
  };
}

/** Tuners step by 100 kHz, by 1 kHz or by the hertz. */
function tuning(random: Random, roomHz: number): number {
  const step = random.pick([100e3, 1e3, 1]);
  return step * Math.round(random.uniform(-roomHz, roomHz) / step);
}

const PROFILE_NAMES = Object.keys(PROFILES) as ProfileName[];

/** An honest recorder and an ordinary channel, its echoes within the prefix: everything within limits. */
export function drawImpairments(random: Random, wish: Wish, prefixS: number): Impairments {
  const held = PROFILE_NAMES.filter((name) => PROFILES[name].every((path) => path.delayS <= prefixS));
  const isQuiet = random.chance(0.3);
  const [low, high] = wish.snrDb ?? [8, 32];
  return {
    snrDb: random.uniform(low, high),
    ...(isQuiet ? {} : { channel: { profile: random.pick(held), dopplerHz: random.chance(0.5) ? 0 : random.uniform(2, 150) } }),
    ...(random.chance(0.3) ? { phaseNoiseHz: random.uniform(0.5, 20) } : {}),
    ...(random.chance(0.4) ? { imageDb: random.uniform(-60, -40) } : {}),
    ...(random.chance(0.4) ? { dcDb: random.uniform(-60, -38) } : {}),
    sense: wish.inverted ? random.pick(['conjugated', 'exchanged'] as const) : 'upright',
    rmsDbfs: random.uniform(-26, -14),
  };
}

const TYPES: readonly Datatype[] = ['ci16_le', 'ci16_le', 'ci16_le', 'cf32_le', 'ci8', 'cu8', 'ci16_be'];

export function drawRecording(random: Random): CaptureSpec['recording'] {
  const format = random.pick(['sigmf', 'sigmf', 'sigmf', 'archive', 'wav', 'wav-float', 'raw'] as const);
  return { format, datatype: format === 'wav' ? 'ci16_le' : format === 'wav-float' ? 'cf32_le' : random.pick(TYPES) };
}
