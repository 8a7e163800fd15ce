/** The legacy preamble's known tones, IEEE 802.11-2016 clause 17.3.3. Tone k lies k·312.5 kHz above DC. */

/** Long training, tones −26 … 26 (index k + 26). */
export const LONG_TRAINING: readonly number[] = [
  1, 1, -1, -1, 1, 1, -1, 1, -1, 1, 1, 1, 1, 1, 1, -1, -1, 1, 1, -1, 1, -1, 1, 1, 1, 1,
  0,
  1, -1, -1, 1, 1, -1, 1, -1, 1, -1, -1, -1, -1, -1, 1, 1, -1, -1, 1, -1, 1, -1, 1, 1, 1, 1,
];

/** Short training: every fourth tone, its sign (each times 1 + j). */
export const SHORT_TRAINING: ReadonlyMap<number, number> = new Map([
  [-24, 1], [-20, -1], [-16, 1], [-12, -1], [-8, -1], [-4, 1],
  [4, -1], [8, -1], [12, 1], [16, 1], [20, 1], [24, 1],
]);

/** Pilots of the legacy part and their signs before the polarity sequence (clause 17.3.5.10). */
export const PILOTS: ReadonlyMap<number, number> = new Map([[-21, 1], [-7, 1], [7, 1], [21, -1]]);

/** Data tones of the legacy part in the order of mapping: 48. */
export const LEGACY_TONES: readonly number[] = range(26).filter((k) => !PILOTS.has(k));

/** Data tones of HE-SIG-A: 52, to ±28. */
export const WIDE_TONES: readonly number[] = range(28).filter((k) => !PILOTS.has(k));

/** What the L-SIG and RL-SIG of an HE frame carry beyond ±26, so that the channel there is known (IEEE 802.11ax clause 27.3.11.5; from memory). */
export const HE_EXTRA_TONES: ReadonlyMap<number, number> = new Map([[-28, -1], [-27, -1], [27, -1], [28, 1]]);

/** Extra tones of the long training of HT and VHT (IEEE 802.11-2016 clause 19.3.9.4.6). */
export const HT_EXTRA_TONES: ReadonlyMap<number, number> = new Map([[-28, 1], [-27, 1], [27, -1], [28, -1]]);

function range(reach: number): number[] {
  return Array.from({ length: 2 * reach + 1 }, (_, i) => i - reach).filter((k) => k !== 0);
}

/** Nominal microseconds (at the 20 MHz clock; twice and four times as long at 10 and 5 MHz) from a frame's start. */
export const LAYOUT = {
  longTrainingGuardUs: 8,
  longTrainingUs: 9.6,
  signalUs: 16,
  symbolUs: 4,
  guardUs: 0.8,
  usefulUs: 3.2,
} as const;

/** Samples a nominal microsecond at the 20 MHz clock. */
export const SAMPLES_PER_US = 20;
export const TONE_SPACING_HZ = 312_500;
