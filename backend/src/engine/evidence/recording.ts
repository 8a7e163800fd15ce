import type { CaptureFacts } from '#shared/decode';
import type { SampleSource } from '../types.js';

/** Another way to read the same bytes. */
export interface LabelChange {
  readonly datatype?: string;
  readonly swapIq?: boolean;
  readonly sampleRateHz?: number;
}

/** A capture as the analysis takes it: its label, its samples, and the means to doubt the label. */
export interface Recording {
  /** Level fields still null. */
  readonly facts: CaptureFacts;
  readonly source: SampleSource;
  readonly under: (change: LabelChange) => SampleSource;
  /** Other datatypes in which the bytes would be a whole number of samples, likeliest first. */
  readonly datatypes: readonly string[];
  /** Samples that the recorder itself says are missing. */
  readonly announcedGaps: readonly { readonly atSample: number; readonly missing: number }[];
}

/** The samples from `startSample` on, all or so many, as a capture of its own. */
export function from(source: SampleSource, startSample: number, samples = source.samples - startSample): SampleSource {
  if (startSample === 0 && samples === source.samples) return source;
  const most = Math.max(0, samples);
  return {
    sampleRateHz: source.sampleRateHz,
    centreFrequencyHz: source.centreFrequencyHz,
    samples: most,
    read: (start, count) => source.read(startSample + start, Math.max(0, Math.min(count, most - start))),
  };
}
