import type { HintCode } from '#shared/vocabulary';
import type { Random } from '../random.js';
import type { Datatype } from '../quantise.js';
import type { SignalKind } from './declared-faults.js';
import type { CaptureSpec } from './capture.js';

/** A way in which the recording or its label is at fault, while both configurations are right. */
export interface CaptureFault {
  readonly name: string;
  readonly code: HintCode;
  readonly kinds: readonly SignalKind[];
  /** Settings that must not be stated, or the finding would be about a side. */
  readonly never: readonly ('spectrumSense' | 'sampleRate' | 'fftSize')[];
  /** Air values that the fault leaves without a trustworthy expectation. */
  readonly drops: readonly string[];
  readonly apply: (capture: CaptureSpec, random: Random) => CaptureSpec | null;
}

const OFDM: readonly SignalKind[] = ['nr', 'lte', 'wifi', 'ofdm'];
const CELLS: readonly SignalKind[] = ['nr', 'lte'];

const impaired = (capture: CaptureSpec, change: Partial<CaptureSpec['impairments']>): CaptureSpec => ({ ...capture, impairments: { ...capture.impairments, ...change } });
const recorded = (capture: CaptureSpec, change: Partial<CaptureSpec['recording']>): CaptureSpec => ({ ...capture, recording: { ...capture.recording, ...change } });

/** Wrong labels that leave the file's length plausible. */
const MISLABELLED: readonly (readonly [Datatype, Datatype])[] = [['ci16_le', 'ci16_be'], ['ci16_be', 'ci16_le'], ['ci8', 'cu8'], ['cu8', 'ci8'], ['cf32_le', 'cf32_be'], ['ci16_le', 'cu16_le']];

export const CAPTURE_FAULTS: readonly CaptureFault[] = [
  {
    name: 'sense', code: 'spectrum-inversion', kinds: ['nr', 'lte'], never: ['spectrumSense'], drops: ['spectrumInverted'],
    apply: (c, random) => impaired(c, { sense: random.pick(['conjugated', 'exchanged'] as const) }),
  },
  {
    name: 'rate label', code: 'sample-rate', kinds: CELLS, never: ['sampleRate', 'fftSize'], drops: ['carrierOffsetHz', 'ssbFrequencyHz'],
    apply: (c, random) => recorded(c, { format: 'sigmf', stated: { sampleRateHz: c.receiver.sampleRateHz * random.pick([0.75, 4 / 3, 2, 0.5]) } }),
  },
  {
    name: 'format label', code: 'capture-format', kinds: OFDM, never: [], drops: [],
    apply: (c, random) => {
      const [datatype, stated] = random.pick(MISLABELLED);
      return recorded(c, { format: random.pick(['sigmf', 'raw'] as const), datatype, stated: { datatype: stated } });
    },
  },
  {
    name: 'lost samples', code: 'sample-gaps', kinds: CELLS, never: [], drops: [],
    apply: (c, random) => impaired(c, { gaps: Array.from({ length: random.integer(1, 4) }, (_, i) => ({ atS: (0.15 + 0.2 * i + random.uniform(0, 0.1)) * c.receiver.durationS, count: random.integer(60, 4000) })) }),
  },
  { name: 'overdriven', code: 'receive-level', kinds: OFDM, never: [], drops: [], apply: (c, random) => impaired(c, { rmsDbfs: random.uniform(-1, 5) }) },
  { name: 'leaking oscillator', code: 'dc-offset', kinds: OFDM, never: [], drops: [], apply: (c, random) => impaired(c, { dcDb: random.uniform(-12, 0) }) },
  { name: 'unequal arms', code: 'iq-imbalance', kinds: OFDM, never: [], drops: [], apply: (c, random) => impaired(c, { imageDb: random.uniform(-18, -9) }) },
  {
    name: 'clock', code: 'reference-clock', kinds: CELLS, never: [], drops: [],
    apply: (c, random) => {
      const ppm = random.uniform(6, 20) * random.pick([-1, 1]);
      return { ...c, receiver: { ...c.receiver, clockPpm: ppm, carrierOffsetHz: ppm * 1e-6 * c.receiver.centreHz } };
    },
  },
];
