import type { Services } from '../http/services.js';
import type { Caller } from '../http/services.js';
import type { Standing } from '../access/rules.js';

export type EventKind = 'filed' | 'edited' | 'stage' | 'next-move' | 'shared' | 'file' | 'decode' | 'verdict' | 'retest' | 'waiver' | 'entry';

export interface IssueEvent {
  readonly issueId: string;
  readonly programmeId: string;
  readonly kind: EventKind;
  readonly text: string;
  readonly side?: 'a' | 'b' | null;
  /** Set for what only the caller's own party may read. */
  readonly onlyMyParty?: boolean;
}

/** Writes the history, tells the open pages, and answers the event's id. One call a happening. */
export async function recordEvent(services: Services, by: { caller: Caller; standing: Standing }, event: IssueEvent): Promise<string> {
  const { database } = services;
  const id = crypto.randomUUID();
  await database.change(`
    insert into events (id, programme_id, issue_id, person_id, person_name, party_id, party_name, kind, text, side, reach)
    values ($1, $2, $3, access.person(), $4, $5, $6, $7, $8, $9, $10)`,
  [id, event.programmeId, event.issueId, by.caller.name, by.standing.partyId, by.standing.partyShortName, event.kind, event.text, event.side ?? null, event.onlyMyParty ? 'my-party' : 'everyone']);
  await database.change(`
    insert into live_events (programme_id, issue_id, topic, party_id) values ($1, $2, 'issue', $3)`,
  [event.programmeId, event.issueId, event.onlyMyParty ? by.standing.partyId : null]);
  // What only one party may read must not show in a time that all can see.
  if (!event.onlyMyParty) await database.change('update issues set updated_at = now() where id = $1', [event.issueId]);
  return id;
}

/** Mail goes through the outbox in the same transaction; who gets it, the database decides. */
export async function queueMail(services: Services, mail: { issueId: string; kind: 'next-move' | 'entry' | 'stage' | 'filed'; eventId: string | null; entryId?: string }): Promise<void> {
  await services.database.rows('select access.queue_mail($1, $2, $3, $4)', [mail.issueId, mail.kind, mail.eventId, mail.entryId ?? null]);
}
