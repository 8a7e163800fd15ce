import type { HintSide } from '#shared/vocabulary';
import type { Declared } from '../snapshots/declared.js';
import type { CaptureSpec, SignalSpec } from './capture.js';
import type { AirExpectation } from './expectation.js';

/** An honest situation, drawn: what is sent, how it is recorded, what a right configuration states, what the air shows. */
export interface Drawn {
  readonly signal: SignalSpec;
  readonly capture: CaptureSpec;
  /** Everything that a right configuration would state; sides state parts of it. */
  readonly declared: Declared;
  readonly air: Readonly<Record<string, AirExpectation>>;
  readonly label: string;
}

/** What a fault needs of the situation; the rest is drawn. */
export interface Wish {
  readonly spacingHz?: number;
  readonly prefix?: 'normal' | 'extended';
  readonly fullLoad?: boolean;
  readonly tdd?: boolean;
  readonly phaseCompensation?: boolean;
  readonly halfSubcarrierShift?: boolean;
  readonly inverted?: boolean;
  readonly uplink?: boolean;
  readonly wifiFormat?: 'legacy' | 'ht' | 'vht' | 'he';
  /** Bounds of the signal-to-noise ratio, dB. */
  readonly snrDb?: readonly [number, number];
  /** Rates above are not drawn, so that many can be made in little time. */
  readonly maxRateHz?: number;
  readonly maxDurationS?: number;
}

/** One thing that is wrong, in one place. */
export interface Fault {
  readonly code: string;
  readonly side: readonly HintSide[];
}
