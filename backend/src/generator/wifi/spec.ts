import type { WifiBandwidthMhz } from './tones.js';

/** What a frame's SIG field says of its data. */
export interface WifiAnnounced {
  readonly mhz: WifiBandwidthMhz;
  readonly guardUs: number;
  readonly heTraining?: 1 | 2 | 4;
}

/** Bursts of one transmitter (IEEE 802.11 OFDM PHYs), one stream. */
export interface WifiSpec {
  /** Centre of the channel, Hz. */
  readonly carrierHz: number;
  readonly format: 'legacy' | 'ht' | 'vht' | 'he';
  readonly mhz: WifiBandwidthMhz;
  /** Guard interval of the data at full clock: 0.8 (legacy), 0.4 or 0.8 (HT, VHT), 0.8, 1.6 or 3.2 (HE), µs. */
  readonly guardUs: number;
  /** Size of the HE-LTF, in 3.2 µs. */
  readonly heTraining?: 1 | 2 | 4;
  readonly mcs: number;
  /** 1 at 20 MHz, 0.5 and 0.25 for the 10 and 5 MHz clocks of the legacy format. */
  readonly clock: 1 | 0.5 | 0.25;
  /** Where SIG does not say the truth. */
  readonly announced?: WifiAnnounced;
  /** Data symbols of a frame, and quiet time between frames, both drawn evenly. */
  readonly symbols: readonly [number, number];
  readonly gapUs: readonly [number, number];
  readonly seed: number;
}
