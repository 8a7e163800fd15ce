import type { HintCode } from '#shared/vocabulary';

/** What an engineer could show to refute the hint. Free of any side's values. */
const WAYS: Readonly<Partial<Record<HintCode, string>>> = {
  technology: 'A capture of the same unit on which another technology\'s synchronisation decodes.',
  'subcarrier-spacing': 'A capture of the same carrier in which the prefix repeats at the declared spacing, or proof that the recording\'s sample rate is not what its label says.',
  'cyclic-prefix': 'A capture whose data symbols repeat over the declared prefix length.',
  'fft-size': 'A statement of the sample rate at which the transform runs that gives the spacing on the air.',
  'sample-rate': 'A recording of the same signal made with another receiver whose rate is known to be right.',
  'carrier-frequency': 'A recording whose centre was checked against a reference, with the carrier on the declared frequency.',
  'channel-bandwidth': 'A capture of the fully loaded carrier whose edges lie at the declared width.',
  'ssb-placement': 'A decoded synchronisation block at the declared place.',
  'ssb-subcarrier-spacing': 'A synchronisation block decoded at the declared spacing.',
  'physical-cell-id': 'A capture of the unit alone, cabled, in which the declared identity is decoded: the one seen may be a neighbour\'s.',
  'tdd-pattern': 'A longer capture in which the transmitter is silent in every symbol that is declared not downlink.',
  'spectrum-inversion': 'A recording from a receiver of known sense in which the block decodes the other way round.',
  'phase-compensation': 'The phases of the reference signals over all symbols of a half subframe, against the carrier frequency, from a second capture at another tuning.',
  'half-subcarrier-shift': 'An uplink capture on a common reference clock with the carrier where it is declared.',
  'reference-clock': 'A second recording with both clocks on one reference that shows the same offset.',
  'timing-offset': 'The round-trip timing measured at the receiver with the declared offset.',
  'capture-format': 'The recorder\'s own setting for its sample format, if it matches the label.',
  'sample-gaps': 'The recorder\'s overflow counter at zero for the whole recording.',
  'receive-level': 'A recording 10 dB lower (clipping) or higher (too low) that shows the same.',
  'dc-offset': 'A recording from another receiver, or at an offset tuning, that shows the same line on the carrier\'s centre.',
  'iq-imbalance': 'A recording from another receiver that shows the same image.',
  'not-permitted': 'A later release of the clause that allows the combination.',
};

export function wouldDisprove(code: HintCode): string {
  return WAYS[code] ?? 'The running configuration of both units, read back from the equipment, showing equal values.';
}
