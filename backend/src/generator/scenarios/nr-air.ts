import { blockSpacingHz } from '../nr/block-pattern.js';
import type { NrSpec } from '../nr/spec.js';
import type { CaptureSpec } from './capture.js';
import type { AirExpectation } from './expectation.js';

/** What the air of an NR capture shows, with the tolerances of the case records. */
export function nrAir(capture: CaptureSpec): Record<string, AirExpectation> {
  if (capture.signal.kind !== 'nr') return {};
  const { spec } = capture.signal;
  const { receiver } = capture;
  const offset = receiver.carrierOffsetHz ?? 0;
  const frames = framesHeard(spec, receiver.startS, receiver.startS + receiver.durationS);
  const blockHz = spec.blocks ? blockSpacingHz(spec.blocks.blockCase) : null;
  return {
    technology: { oneOf: ['nr'] },
    subcarrierSpacingHz: { value: spec.spacingHz, tol: 0.005 * spec.spacingHz },
    cyclicPrefix: { oneOf: [spec.prefix] },
    carrierOffsetHz: { value: spec.carrierHz - receiver.centreHz + offset, tol: 0.015 * spec.spacingHz, modulo: spec.spacingHz },
    spectrumInverted: { oneOf: [capture.impairments.sense !== 'upright'] },
    ...(phaseTells(spec) ? { phaseCompensation: { oneOf: [spec.phaseCompensation ? 'present' : 'absent'] } } : {}),
    ...(spec.blocks && blockHz ? {
      physicalCellId: { value: spec.cellId, tol: 0 },
      ssbSubcarrierSpacingHz: { value: blockHz, tol: 1 },
      ssbFrequencyHz: { value: spec.blocks.frequencyHz + offset, alt: spec.blocks.frequencyHz, tol: 0.02 * blockHz },
      systemFrameNumber: { oneOf: frames },
      mib: { mib: { systemFrameNumber: frames, dmrsTypeAPosition: spec.mib.dmrsTypeAPosition } },
      kSsb: { value: spec.mib.kSsb, tol: 0 },
    } : {}),
  };
}

function framesHeard(spec: NrSpec, fromS: number, toS: number): number[] {
  const first = Math.floor(fromS / 0.01);
  const last = Math.floor(toS / 0.01);
  return Array.from({ length: last - first + 1 }, (_, i) => (spec.mib.systemFrameNumber + first + i) % 1024);
}

/** At multiples of 1.92 MHz·2^µ every factor is 1, and nobody can tell (TS 38.211 clause 5.4); near them it is hard. */
function phaseTells(spec: NrSpec): boolean {
  const unit = 1.92e6 * (spec.spacingHz / 15000);
  const distance = Math.abs(spec.carrierHz / unit - Math.round(spec.carrierHz / unit)) * unit;
  return distance > 1000;
}
