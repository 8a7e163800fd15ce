import { reach, resample } from './resample.js';
import { shiftFrequency, type Emission, type Signal } from './signal.js';

/** A tuner that runs freely at `centreHz` and samples at `sampleRateHz`. */
export interface Receiver {
  readonly centreHz: number;
  readonly sampleRateHz: number;
  /** Transmitter's time of the first sample, s. */
  readonly startS: number;
  readonly durationS: number;
  /** Transmitter's sample clock against the receiver's; positive: the transmitter's is faster. */
  readonly clockPpm?: number;
  /** Added to where the RF reference stands nominally, Hz of the receiver. */
  readonly carrierOffsetHz?: number;
  /** Phase of the tuner at the first sample, rad. */
  readonly phase?: number;
}

/**
 * The transmitter's signal as the receiver samples it. Everything is placed by the transmitter's
 * time first, at a native rate, turned to the tuner's frequency there, and interpolated to the
 * receiver's instants; a receiver that runs at a native rate without clock error needs no filter.
 */
export function receive(emission: Emission, receiver: Receiver): Signal {
  const { sampleRateHz, startS, durationS, clockPpm = 0 } = receiver;
  const count = Math.round(durationS * sampleRateHz);
  const distanceHz = emission.referenceHz - receiver.centreHz;
  const edge = Math.max(Math.abs(emission.lowHz + distanceHz), Math.abs(emission.highHz + distanceHz));
  const first = startS * sampleRateHz;
  const direct = clockPpm === 0 && Number.isInteger(first) && edge <= 0.5 * sampleRateHz && emission.nativeRateHz(sampleRateHz) === sampleRateHz;
  const iq = direct
    ? turned(emission, { rateHz: sampleRateHz, first, count, distanceHz })
    : interpolated(emission, { receiver, count, distanceHz, edge });
  // In the receiver's time the nominal distance was stretched by the clock error: taken out here.
  const rest = (receiver.carrierOffsetHz ?? 0) - distanceHz * clockPpm * 1e-6;
  if (rest !== 0 || receiver.phase) shiftFrequency(iq, { offsetHz: rest, rateHz: sampleRateHz, phase: receiver.phase ?? 0 });
  return { iq, sampleRateHz };
}

interface Span {
  readonly rateHz: number;
  readonly first: number;
  readonly count: number;
  readonly distanceHz: number;
}

function turned(emission: Emission, { rateHz, first, count, distanceHz }: Span): Float32Array {
  const iq = emission.render(rateHz, first, count);
  if (distanceHz !== 0) shiftFrequency(iq, { offsetHz: distanceHz, rateHz, first });
  return iq;
}

function interpolated(emission: Emission, { receiver, count, distanceHz, edge }: { receiver: Receiver; count: number; distanceHz: number; edge: number }): Float32Array {
  // A quarter of room beyond the edges, for the interpolation's filter.
  const rateHz = emission.nativeRateHz(2.5 * edge);
  const step = (rateHz / receiver.sampleRateHz) * (1 + (receiver.clockPpm ?? 0) * 1e-6);
  const startAt = receiver.startS * rateHz;
  const margin = reach(step);
  const first = Math.floor(startAt) - margin;
  const iq = turned(emission, { rateHz, first, count: Math.ceil(count * step) + 2 * margin + 2, distanceHz });
  return resample(iq, { start: startAt - first, step, count });
}
