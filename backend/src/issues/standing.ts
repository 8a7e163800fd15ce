import type { GrantedIssue } from '../access/rules.js';
import type { StandingOnLink } from '../moves/stage-table.js';

/** Whether the caller's party is one of the link's sides, the test lab, or a guest on the issue. */
export function standingOnLink(issue: GrantedIssue): StandingOnLink {
  const { partyId, isLab } = issue.standing;
  if (isLab) return 'lab';
  return partyId === issue.partyAId || partyId === issue.partyBId ? 'side' : 'other';
}
