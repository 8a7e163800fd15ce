import type { DecodeResult } from '#shared/decode';
import type { Side } from '#shared/vocabulary';

/** What a decode's thread is given: paths and labels, no identifiers and no database. */
export interface DecodeTask {
  readonly capture: {
    readonly path: string; readonly name: string; readonly besidePath: string | null;
    readonly label: { readonly datatype?: string; readonly sampleRateHz?: number; readonly centreFrequencyHz?: number };
  } | null;
  readonly snapshots: Readonly<Record<Side, { readonly path: string; readonly glossaryPath: string | null } | null>>;
  readonly transmitter: Side | null;
  readonly link: 'air' | 'fronthaul';
  /** `of` says whose file it is, so that a reader outside its reach is not told its name or hash. */
  readonly inputs: readonly { readonly file: string; readonly sha256: string; readonly of: 'capture' | Side }[];
}

export type ThreadMessage =
  | { readonly kind: 'progress'; readonly step: string; readonly fraction: number }
  | { readonly kind: 'result'; readonly result: DecodeResult }
  | { readonly kind: 'unreadable'; readonly code: string; readonly message: string };
