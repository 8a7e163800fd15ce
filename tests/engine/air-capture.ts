import { addNoise, noisePower } from '#backend/generator/impairments/noise';
import { PROFILES, throughChannel, type ProfileName } from '#backend/generator/impairments/multipath';
import { Random } from '#backend/generator/random';
import { receive } from '#backend/generator/receive';
import type { Emission } from '#backend/generator/signal';
import type { DetectionContext, SampleSource } from '#engine/types';

export interface Reception {
  readonly sampleRateHz: number;
  readonly durationS: number;
  /** In the occupied bandwidth while the signal is on. */
  readonly snrDb: number;
  readonly startS?: number;
  /** Where the reference stands against the capture's centre, clock error aside. */
  readonly offsetHz?: number;
  readonly clockPpm?: number;
  readonly profile?: ProfileName;
  readonly dopplerHz?: number;
  readonly inverted?: boolean;
  readonly seed?: number;
}

/** What a recorder makes of an emission (the project's own generator, which shares nothing with the engine). */
export function capture(emission: Emission, r: Reception): { source: SampleSource; trueOffsetHz: number } {
  const { sampleRateHz, clockPpm = 0, offsetHz = 0, seed = 1 } = r;
  const random = new Random(seed, 'air');
  const drift = clockPpm * 1e-6 * emission.referenceHz;
  const received = receive(emission, {
    centreHz: emission.referenceHz - offsetHz, sampleRateHz, startS: r.startS ?? 0.0031, durationS: r.durationS, clockPpm, carrierOffsetHz: drift,
  });
  let iq = received.iq;
  if (r.profile) iq = throughChannel(iq, { channel: { paths: PROFILES[r.profile], dopplerHz: r.dopplerHz ?? 0 }, sampleRateHz, random });
  addNoise(iq, noisePower({ snrDb: r.snrDb, onPower: emission.onPower, occupiedHz: emission.highHz - emission.lowHz, sampleRateHz }), random);
  if (r.inverted) iq = iq.map((v, i) => (i % 2 === 1 ? -v : v));
  return { source: memory(iq, sampleRateHz), trueOffsetHz: offsetHz + drift };
}

export function memory(iq: Float32Array, sampleRateHz: number): SampleSource {
  return { sampleRateHz, centreFrequencyHz: null, samples: iq.length / 2, read: (start, count) => iq.slice(2 * start, 2 * (start + count)) };
}

export function noise(samples: number, seed: number): Float32Array {
  const iq = new Float32Array(2 * samples);
  addNoise(iq, 0.01, new Random(seed, 'noise'));
  return iq;
}

export function context(source: SampleSource): DetectionContext {
  const { sampleRateHz, samples } = source;
  const facts = { format: 'raw', datatype: 'cf32_le', sampleRateHz, centreFrequencyHz: null, samples, durationS: samples / sampleRateHz, rmsDbfs: null, clippedFraction: null };
  return { source, facts, occupied: null, blind: null };
}
