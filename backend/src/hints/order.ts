import { carrier } from './rules/carrier.js';
import { contradictions } from './rules/contradictions.js';
import { differences } from './rules/differences.js';
import { notPermitted } from './rules/notPermitted.js';
import { dcOffset, iqImbalance, receiveLevel, sampleGaps } from './rules/recordingFaults.js';
import { captureFormat, recordedRate, recordedSense } from './rules/recordingLabels.js';
import { selfContradictions } from './rules/selfContradictions.js';
import { tddPattern } from './rules/tddPattern.js';
import type { Rule } from './types.js';

/** Every rule, in the order in which equally sure findings stand: what makes the rest unreadable first. */
export const RULES: readonly Rule[] = [
  captureFormat,
  notPermitted,
  recordedRate,
  recordedSense,
  differences,
  tddPattern,
  contradictions,
  carrier,
  selfContradictions,
  sampleGaps,
  receiveLevel,
  dcOffset,
  iqImbalance,
];
