import type { AirValue, CaptureFacts } from '#shared/decode';

/**
 * Samples of one capture, read in windows. `read` is synchronous, returns interleaved I, Q at
 * full scale 1 (a complex tone at full scale has power 1), and fewer than `count` samples only
 * at the end of the capture. The returned array belongs to the caller. No more than the window
 * is ever in memory.
 */
export interface SampleSource {
  readonly sampleRateHz: number;
  /** The stated centre, or null where the recording does not say. */
  readonly centreFrequencyHz: number | null;
  /** Complex samples in all. */
  readonly samples: number;
  read(start: number, count: number): Float32Array;
}

/** Samples in memory, interleaved I, Q; `startSample` is the place of the first in the capture. */
export interface Window {
  readonly iq: Float32Array;
  readonly startSample: number;
  readonly sampleRateHz: number;
}

/**
 * Where OFDM symbols lie. `startSample` (fractional, in the capture) is the first sample of the
 * cyclic prefix of a symbol with `index` 0. `prefixSamples[i % period]` and `usefulSamples`
 * (fractional at rates that are not native) give the rest; NR and LTE with the normal prefix
 * have a period of one half-subframe, 7·2^µ symbols, the first of them longer.
 */
export interface SymbolGrid {
  readonly startSample: number;
  readonly usefulSamples: number;
  readonly prefixSamples: readonly number[];
  readonly subcarrierSpacingHz: number;
  /** Frequency of a subcarrier's centre against the capture's zero, Hz; other subcarriers lie whole spacings away. */
  readonly referenceHz: number;
  /** True where `referenceHz` is the RF reference itself and not just its residue. */
  readonly placed: boolean;
}

export interface Tried {
  readonly what: string;
  readonly result: string;
}

/** What blind estimation says of any OFDM: no technology, no known symbols. */
export interface BlindOfdm {
  readonly subcarrierSpacingHz: number;
  readonly cyclicPrefix: 'normal' | 'extended' | null;
  readonly cyclicPrefixS: number;
  readonly confidence: number;
  readonly grid: SymbolGrid;
  readonly snrDb: number | null;
  /** Every (spacing, prefix) that was tested, best first, with its statistic. */
  readonly candidates: readonly {
    readonly subcarrierSpacingHz: number;
    readonly cyclicPrefixS: number;
    readonly label: string;
    readonly score: number;
  }[];
}

/** What one technology's own signals say. `air` has the contract's names. */
export interface TechnologyFinding {
  readonly technology: 'nr' | 'lte' | 'wifi';
  /** Probability that this technology is on the air, from detection statistics alone. */
  readonly confidence: number;
  readonly spectrumInverted: boolean;
  readonly air: Readonly<Record<string, AirValue>>;
  /** Announced settings, by the common parameter names of the snapshots (MIB, SIG fields). */
  readonly announced: Readonly<Record<string, string | number | boolean>>;
  readonly grid: SymbolGrid | null;
  readonly tried: readonly Tried[];
  /** Data points of a single carrier, interleaved, unit mean power: its subcarriers show no constellation. */
  readonly spreadPoints?: Float64Array;
}

export interface LevelFacts {
  readonly rmsDbfs: number;
  readonly clippedFraction: number;
  readonly dcOffsetDb: number | null;
  readonly iqImbalanceDb: number | null;
}

/** Everything that the detectors share, computed once. */
export interface DetectionContext {
  readonly source: SampleSource;
  readonly facts: CaptureFacts;
  /** Spectrum edges of what is on the air, Hz against the capture's zero; null where nothing stands out. */
  readonly occupied: { readonly lowHz: number; readonly highHz: number } | null;
  readonly blind: BlindOfdm | null;
  /** Called with a step's name and a fraction from 0 to 1; throws to stop. */
  readonly onProgress?: (step: string, fraction: number) => void;
}
