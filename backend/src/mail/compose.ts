import { STAGE_LABELS, type Stage } from '#shared/vocabulary';
import type { Database } from '../db/database.js';

export interface Letter {
  readonly to: { name: string; address: string };
  readonly subject: string;
  readonly text: string;
}

export interface Due {
  readonly id: string;
  readonly personId: string;
  readonly issueId: string;
  readonly eventId: string | null;
  readonly entryId: string | null;
  readonly messageId: string;
  readonly attempts: number;
}

interface Row {
  name: string; email: string; programme: string; number: string; title: string; stage: Stage;
  eventText: string | null; by: string | null; byParty: string | null; entryBody: string | null; moveParty: string | null; ask: string | null; due: string | null;
}

const LONGEST_QUOTE = 2000;

/** Written under its reader: what that person may not see is not in the letter, and then there is none. */
export async function compose(database: Database, publicUrl: string, due: Due): Promise<Letter | null> {
  const row = await database.asPerson(due.personId, () => database.row<Row>(`
    select q.name, q.email, g.code as programme, i.number, i.title, i.stage, e.text as "eventText", e.person_name as by, e.party_name as "byParty",
      t.body as "entryBody", p.name as "moveParty", n.ask, n.due
    from issues i join programmes g on g.id = i.programme_id join people q on q.id = access.person()
    left join events e on e.id = $2 left join entries t on t.id = $3 and t.withdrawn_at is null
    left join next_moves n on n.issue_id = i.id and n.ended_at is null left join parties p on p.id = n.party_id
    where i.id = $1`, [due.issueId, due.eventId, due.entryId]));
  if (!row || (due.eventId !== null && row.eventText === null) || (due.entryId !== null && row.entryBody === null)) return null;
  return { to: { name: row.name, address: row.email }, subject: oneLine(`${row.programme}/${row.number} ${row.title}`), text: textOf(row, publicUrl) };
}

function textOf(row: Row, publicUrl: string): string {
  const who = row.by ? `${row.by}${row.byParty ? ` (${row.byParty})` : ''}` : 'Crosstie';
  const lines = [`${who} ${row.eventText ?? 'changed the issue'}.`, ''];
  if (row.entryBody) lines.push(...quoted(row.entryBody), '');
  lines.push(`Stage: ${STAGE_LABELS[row.stage]}`);
  if (row.moveParty) lines.push(`Next move: ${row.moveParty} is asked to ${row.ask}${row.due ? `, due ${row.due}` : ''}`);
  lines.push('', `${publicUrl}/issues/${row.programme}/${row.number}`, '', 'You get this because you follow the issue or your party has the next move. Change it on your account page.');
  return lines.join('\n');
}

function quoted(body: string): string[] {
  const cut = body.length > LONGEST_QUOTE ? `${body.slice(0, LONGEST_QUOTE)} …` : body;
  return cut.split(/\r?\n/).map((line) => `> ${line}`);
}

/** A subject is one line: whatever breaks a line would begin another header. */
export function oneLine(text: string): string {
  // eslint-disable-next-line no-control-regex
  return text.replace(/[\u0000-\u001f\u007f\u0085\u2028\u2029]+/g, ' ').trim().slice(0, 200);
}
