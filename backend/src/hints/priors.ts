/**
 * Priors and tolerances of the model, as data. Each is a judgement of the trade ("common
 * practice") until `calibrate` fits it; none is taken from a sample capture.
 */
export const PRIORS = {
  /** Two snapshots differ: one of them is at odds more often than both. */
  bothAtOdds: 0.12,
  /** Two snapshots agree, or only one speaks: how often the radio does something else all the same. A link is looked at because it does not work. */
  agreedButOtherwise: 0.08,
  oneSidedAtOdds: 0.15,
  /** A difference in the files is a finding even without the air, unless it was misread. */
  differenceIsReal: 0.97,
  /** A measured value is wrong although its own detector was sure: the floor under every likelihood. */
  detectorSlip: 0.002,
  /** Below this the side is left open rather than guessed. */
  sideDecided: 0.75,
  /** Below this a contradiction between agreeing files and the air is not reported. */
  report: 0.6,
} as const;

/** One standard deviation that is added to the measurement's own, where it states none. */
export const SCATTER = {
  /** Part of the value. */
  subcarrierSpacing: 0.004,
  guardInterval: 0.12,
  /** Hz; a clock error of the limit in `CLOCK` comes on top. */
  carrierFrequencyHz: 250,
  ssbFrequencyHz: 250,
  resourceBlocks: 1,
} as const;

/** Parts per million: what a recorder without a stated accuracy may be off (common practice). */
export const RECORDER_PPM = 2;

/**
 * Limits of a transmitter's own frequency, ppm: TS 38.104 and TS 36.104 clause 6.5.1 (0.1 for a
 * local-area base station, the widest class that holds no lock to a home class), TS 38.101-1
 * clause 6.4.1 (a terminal, 0.1), IEEE 802.11 clause 17.3.9.5 (20; 25 above 2.4 GHz in places).
 */
export const CLOCK_LIMIT_PPM: Readonly<Record<string, number>> = { nr: 0.1, lte: 0.25, wifi: 25, ofdm: 25 };

/** Spread of a clock that is beyond its limit: a free-running crystal (common practice). */
export const CLOCK_BEYOND_PPM = 8;

/** Front-end figures beyond which a receiver at high order suffers (TS 38.104 clause 6.5.2: 3.5 % at 256QAM is -29 dB). */
export const FRONT_END = {
  dcOffsetDb: -18,
  iqImbalanceDb: -24,
  /** Scatter of the measured figure, dB. */
  scatterDb: 2,
  clippedFraction: 0.002,
  lowRmsDbfs: -75,
} as const;
