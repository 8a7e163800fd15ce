import type { Hint } from '#shared/decode';
import { RULES } from './order.js';
import { settle } from './settle.js';
import { FULL_VIEW, type Evidence, type Finding } from './types.js';
import { writeHint } from './wording/writeHint.js';

/** What is at odds, surest first; empty where nothing is. */
export function decide(evidence: Evidence): Finding[] {
  return settle(RULES.flatMap((rule) => rule(evidence)));
}

/** The same in words, for someone who may see both snapshots. */
export function hintsFrom(evidence: Evidence): Hint[] {
  return decide(evidence).map((finding) => writeHint(finding, FULL_VIEW));
}
