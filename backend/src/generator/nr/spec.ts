import type { Modulation } from '../constellations.js';
import type { BlockCase } from './block-pattern.js';
import type { NrPrefix } from './numerology.js';
import type { NrMib } from './pbch.js';

/** Synchronisation blocks of a carrier. */
export interface NrBlocks {
  readonly blockCase: BlockCase;
  /** SS_REF: subcarrier 120 of the block's 0 to 239, Hz. */
  readonly frequencyHz: number;
  /** Indices of the blocks that are sent. */
  readonly sent: readonly number[];
  readonly maxBlocks: 4 | 8 | 64;
  readonly periodMs: 5 | 10 | 20 | 40 | 80 | 160;
  readonly halfFrame: 0 | 1;
  readonly pssBoostDb?: number;
  /** Level of the blocks against the data's spectral density. */
  readonly gainDb?: number;
}

export interface TddPattern {
  readonly periodS: number;
  readonly downlinkSlots: number;
  readonly downlinkSymbols: number;
  readonly uplinkSlots: number;
  readonly uplinkSymbols: number;
}

/** What the slots carry besides the blocks. */
export interface NrLoad {
  /** Share of the slots that carry data. */
  readonly slots: number;
  /** Share of the resource blocks in a slot that does, one run of them. */
  readonly blocks: number;
  readonly modulations: readonly Modulation[];
  /** Symbols at the start of a slot that carry QPSK in some blocks (control), 0 to 3. */
  readonly controlSymbols: number;
  /** Demodulation reference symbols, type 1, one per slot. */
  readonly dmrs: boolean;
}

/** One NR downlink carrier. */
export interface NrSpec {
  /** RF reference: subcarrier 6·N_RB (TS 38.104 clause 5.4.2.2), Hz. */
  readonly carrierHz: number;
  readonly spacingHz: number;
  readonly prefix: NrPrefix;
  readonly resourceBlocks: number;
  readonly cellId: number;
  readonly blocks: NrBlocks | null;
  /** The frame number is that of the frame at the transmitter's time zero. */
  readonly mib: NrMib;
  readonly tdd: TddPattern | null;
  readonly load: NrLoad;
  /** Per-symbol phase compensation of TS 38.211 clause 5.4. */
  readonly phaseCompensation: boolean;
  /** Length of the raised-cosine edges between symbols, s; 0: sharp. */
  readonly taperS?: number;
  readonly seed: number;
}
