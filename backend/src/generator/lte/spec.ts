import type { Modulation } from '../constellations.js';
import type { LtePrefix } from './timing.js';

/** One LTE downlink carrier. */
export interface LteSpec {
  /** The DC subcarrier that is not sent, Hz. */
  readonly carrierHz: number;
  readonly resourceBlocks: 6 | 15 | 25 | 50 | 75 | 100;
  readonly prefix: LtePrefix;
  readonly duplex: 'fdd' | 'tdd';
  /** Uplink-downlink and special subframe configuration (TS 36.211 Tables 4.2-1 and 4.2-2), TDD alone. */
  readonly tddConfiguration?: number;
  readonly specialSubframe?: number;
  readonly cellId: number;
  readonly ports: 1 | 2;
  /** Number of the frame at the transmitter's time zero. */
  readonly systemFrameNumber: number;
  readonly phichDuration: 'normal' | 'extended';
  readonly phichResource: 0 | 1 | 2 | 3;
  /** Control symbols at the start of a subframe, 1 to 3. */
  readonly controlSymbols: number;
  readonly load: { readonly subframes: number; readonly blocks: number; readonly modulations: readonly Modulation[] };
  /** Length of the raised-cosine edges between symbols, s; 0: sharp. */
  readonly taperS?: number;
  readonly seed: number;
}

const UPLINK_DOWNLINK = ['DSUUUDSUUU', 'DSUUDDSUUD', 'DSUDDDSUDD', 'DSUUUDDDDD', 'DSUUDDDDDD', 'DSUDDDDDDD', 'DSUUUDSUUD'];
/** Symbols of the downlink part of a special subframe, Table 4.2-1. */
const DOWNLINK_PART = { normal: [3, 9, 10, 11, 12, 3, 9, 10, 11, 6], extended: [3, 8, 9, 10, 3, 8, 9, 5] };

/** Downlink symbols of a subframe (0 to 9), from its start. */
export function downlinkSymbols(spec: LteSpec, subframe: number): number {
  const whole = spec.prefix === 'normal' ? 14 : 12;
  if (spec.duplex === 'fdd') return whole;
  const kind = UPLINK_DOWNLINK[spec.tddConfiguration ?? 2][subframe];
  if (kind === 'D') return whole;
  return kind === 'U' ? 0 : DOWNLINK_PART[spec.prefix][spec.specialSubframe ?? 5];
}
