import { up as people } from './0001-people.js';
import { up as signIn } from './0002-sign-in.js';
import { up as linksIssues } from './0003-links-issues.js';
import { up as filesDecodes } from './0004-files-decodes.js';
import { up as threadMoves } from './0005-thread-moves.js';
import { up as outboxAudit } from './0006-outbox-audit.js';
import { up as queue } from './0007-queue.js';
import { up as derivedValues } from './0008-derived-values.js';
import { up as narrowerPolicies } from './0009-narrower-policies.js';
import { up as mailReaders } from './0010-mail-readers.js';
import { up as missedEvents } from './0011-missed-events.js';
import { up as rolesInPolicies } from './0012-roles-in-policies.js';
import { up as quotaAndLists } from './0013-quota-and-lists.js';
import { up as resumeByCommit } from './0014-resume-by-commit.js';
import { up as invitationLetters } from './0015-invitation-letters.js';
import { up as quickLists } from './0016-quick-lists.js';

/** Numbered and append-only: a migration that has landed is never edited, a later one corrects it. */
export const MIGRATIONS: readonly { name: string; up: string }[] = [
  { name: '0001-people', up: people },
  { name: '0002-sign-in', up: signIn },
  { name: '0003-links-issues', up: linksIssues },
  { name: '0004-files-decodes', up: filesDecodes },
  { name: '0005-thread-moves', up: threadMoves },
  { name: '0006-outbox-audit', up: outboxAudit },
  { name: '0007-queue', up: queue },
  { name: '0008-derived-values', up: derivedValues },
  { name: '0009-narrower-policies', up: narrowerPolicies },
  { name: '0010-mail-readers', up: mailReaders },
  { name: '0011-missed-events', up: missedEvents },
  { name: '0012-roles-in-policies', up: rolesInPolicies },
  { name: '0013-quota-and-lists', up: quotaAndLists },
  { name: '0014-resume-by-commit', up: resumeByCommit },
  { name: '0015-invitation-letters', up: invitationLetters },
  { name: '0016-quick-lists', up: quickLists },
];
