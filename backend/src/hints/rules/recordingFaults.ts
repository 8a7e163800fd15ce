import { airNumber } from '../measurements/numbers.js';
import { FRONT_END } from '../priors.js';
import type { Finding, Rule } from '../types.js';
import { recordingBasis } from './basis.js';

/** Samples lost while recording: a jump of timing and phase against the symbols' grid. */
export const sampleGaps: Rule = ({ gaps }) => gaps === null ? [] : [finding('sample-gaps', gaps.confidence, [
  `${gaps.count === 1 ? 'Samples are' : `In ${gaps.count} places samples are`} missing from the recording, first at sample ${gaps.atSample} (${gaps.lostSamples} lost)`,
  gaps.proof,
])];

/** Clipping, or a level too low to decode. */
export const receiveLevel: Rule = ({ capture, air }) => {
  const clipped = capture?.clippedFraction ?? 0;
  const level = capture?.rmsDbfs ?? null;
  if (clipped > FRONT_END.clippedFraction) {
    return [finding('receive-level', sigmoid(2 + 2 * Math.log10(clipped / FRONT_END.clippedFraction)), [`The recording is clipped: ${(100 * clipped).toPrecision(2)} % of its samples stand at full scale`, 'Clipped samples spread power over the band and spoil the constellation'])];
  }
  if (level !== null && level < FRONT_END.lowRmsDbfs && air['technology']?.value === null) {
    return [finding('receive-level', 0.8, [`The recording's level is ${level.toFixed(1)} dB below a full-scale tone, and no OFDM is found in it`, 'A signal may lie below the receiver\'s own noise or its smallest step'])];
  }
  return [];
};

/** A line at the recording's centre, where the receiver's own oscillator leaks. */
export const dcOffset: Rule = (evidence) => {
  const seen = airNumber(evidence, 'dcOffsetDb');
  if (!seen) return [];
  const probability = sigmoid((seen.value - FRONT_END.dcOffsetDb) / FRONT_END.scatterDb);
  return probability < 0.6 ? [] : [finding('dc-offset', probability, [`A constant offset stands ${Math.abs(seen.value).toFixed(1)} dB ${seen.value < 0 ? 'below' : 'above'} the signal at the recording's centre`, 'The line stands at zero of the recording, whatever the carrier\'s own centre'])];
};

/** An image of the signal, mirrored about the recording's centre. */
export const iqImbalance: Rule = (evidence) => {
  const seen = airNumber(evidence, 'iqImbalanceDb');
  if (!seen) return [];
  const probability = sigmoid((seen.value - FRONT_END.iqImbalanceDb) / FRONT_END.scatterDb);
  return probability < 0.6 ? [] : [finding('iq-imbalance', probability, [`The signal's image stands ${Math.abs(seen.value).toFixed(1)} dB below it: I and Q differ in gain or are not at a right angle`, 'The image is mirrored about the recording\'s centre'])];
};

function finding(code: Finding['code'], probability: number, facts: string[]): Finding {
  return { code, side: 'capture', probability: Math.min(0.99, probability), basis: recordingBasis(facts), consequences: [] };
}

function sigmoid(x: number): number {
  return 1 / (1 + Math.exp(-x));
}
