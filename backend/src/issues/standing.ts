import type { GrantedIssue } from '../access/rules.js';
import { may } from '../access/policy.js';
import type { Side } from '#shared/vocabulary';
import type { StandingOnLink } from '../moves/stage-table.js';

/** Whether the caller's party is one of the link's sides, the test lab, or a guest on the issue. */
export function standingOnLink(issue: GrantedIssue): StandingOnLink {
  const { partyId, isLab } = issue.standing;
  if (isLab) return 'lab';
  return partyId === issue.partyAId || partyId === issue.partyBId ? 'side' : 'other';
}

/** What an issue says is changed by the link's two sides and the lab; its severity by any manager on it as well. */
export function mayChange(issue: GrantedIssue, what: 'edit-issue' | 'change-severity'): boolean {
  const { role } = issue.standing;
  return may(role, what) && (standingOnLink(issue) !== 'other' || role === 'programme-manager');
}

/** A party offers builds of its own unit; the lab passes on what either has sent it. */
export function offersBuildsOf(issue: GrantedIssue): Side[] {
  const { partyId, isLab } = issue.standing;
  const owners = { a: issue.partyAId, b: issue.partyBId };
  return (['a', 'b'] as const).filter((side) => isLab || owners[side] === partyId);
}
