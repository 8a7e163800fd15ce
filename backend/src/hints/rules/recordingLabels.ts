import { declaredValue } from '../measurements/numbers.js';
import { impliedSpacing } from '../measurements/impliedSpacing.js';
import type { Evidence, Finding, LabelFinding, Rule } from '../types.js';
import { recordingBasis } from './basis.js';

/** The samples are not in the format that the label states: always a finding about the recording. */
export const captureFormat: Rule = (evidence) => evidence.labels.filter((label) => label.property === 'format')
  .map((label) => about('capture-format', label, `The recording's label says ${label.stated}, but its samples decode as ${label.found}`));

/**
 * The spectrum is inverted and no snapshot speaks of the sense. Where one does, the comparison
 * with the air already says whose finding it is.
 */
export const recordedSense: Rule = (evidence) => {
  const air = evidence.air['spectrumInverted'];
  if (air?.value !== true || speaks(evidence, 'spectrumSense')) return [];
  const facts = ['The recording has an inverted spectrum: I and Q are exchanged, or the spectrum is conjugated', air.method ?? 'the synchronisation decodes only after conjugation'];
  return [{ code: 'spectrum-inversion', side: 'capture', probability: air.confidence ?? 0.95, basis: recordingBasis(facts), consequences: [] }];
};

/** The stated rate is wrong by a known ratio, or the transmitter runs on another clock than the files imply. */
export const recordedRate: Rule = (evidence) => evidence.labels.filter((label) => label.property === 'rate').map((label) => {
  const sides = (['a', 'b'] as const).filter((side) => impliedSpacing(evidence, side) !== null);
  const text = `The recording's label says ${label.stated}, but the signal decodes only at ${label.found}`;
  const finding = about('sample-rate', label, text);
  return sides.length === 0 ? finding : { ...finding, side: evidence.transmitter ?? 'unknown' };
});

function speaks(evidence: Evidence, parameter: string): boolean {
  return (['a', 'b'] as const).some((side) => declaredValue(evidence, side, parameter) !== undefined);
}

function about(code: Finding['code'], label: LabelFinding, summary: string): Finding {
  return { code, side: 'capture', probability: label.confidence, basis: recordingBasis([summary, label.proof]), consequences: [] };
}
