import { STAGE_LABELS, type Stage } from '#shared/vocabulary';
import type { Database } from '../db/database.js';

export interface Letter {
  readonly to: { name: string; address: string };
  readonly subject: string;
  readonly text: string;
}

export interface Due {
  readonly id: string;
  readonly kind: 'next-move' | 'entry' | 'stage' | 'filed';
  readonly personId: string;
  readonly issueId: string;
  readonly eventId: string | null;
  readonly entryId: string | null;
  readonly messageId: string;
  readonly attempts: number;
}

interface Row {
  name: string; email: string; programme: string; number: string; title: string; stage: Stage; wanted: boolean;
  eventText: string | null; by: string | null; byParty: string | null; entryBody: string | null; moveParty: string | null; ask: string | null; due: string | null;
}

const LONGEST_QUOTE = 2000;

/**
 * Written under its reader: what that person may not see is not in the letter, and then there is
 * none. `unwanted` where the reader has since asked not to be written to of this.
 */
export async function compose(database: Database, publicUrl: string, due: Due): Promise<Letter | 'beyond-reach' | 'unwanted'> {
  const row = await database.asPerson(due.personId, () => database.row<Row>(`
    select q.name, q.email, g.code as programme, i.number, i.title, i.stage, e.text as "eventText", e.person_name as by, e.party_name as "byParty",
      t.body as "entryBody", p.name as "moveParty", n.ask, n.due,
      case $4 when 'next-move' then q.notify_next_move when 'entry' then q.notify_entries when 'filed' then q.notify_stages or q.notify_next_move else q.notify_stages end as wanted
    from issues i join programmes g on g.id = i.programme_id join people q on q.id = access.person()
    left join events e on e.id = $2 left join entries t on t.id = $3 and t.withdrawn_at is null
    left join next_moves n on n.issue_id = i.id and n.ended_at is null left join parties p on p.id = n.party_id
    where i.id = $1`, [due.issueId, due.eventId, due.entryId, due.kind]));
  if (!row || (due.eventId !== null && row.eventText === null) || (due.entryId !== null && row.entryBody === null)) return 'beyond-reach';
  if (!row.wanted) return 'unwanted';
  return { to: { name: oneLine(row.name), address: row.email }, subject: shortened(oneLine(`${row.programme}/${row.number} ${row.title}`)), text: textOf(row, publicUrl) };
}

function textOf(row: Row, publicUrl: string): string {
  const what = row.eventText ?? 'changed the issue';
  const lines = [oneLine(row.by ? `${row.by}${row.byParty ? ` (${row.byParty})` : ''} ${what}.` : `On this issue: ${what}.`), ''];
  if (row.entryBody) lines.push(...quoted(row.entryBody), '');
  lines.push(`Stage: ${STAGE_LABELS[row.stage]}`);
  if (row.moveParty) lines.push(oneLine(`Next move: ${row.moveParty} is asked to ${row.ask}${row.due ? `, due ${row.due}` : ''}`));
  lines.push('', `${publicUrl}/issues/${row.programme}/${row.number}`, '', 'You get this because you follow the issue, or your party is on it or has its next move. Change it on your account page:', `${publicUrl}/account`);
  return lines.join('\n');
}

function quoted(body: string): string[] {
  const cut = body.length > LONGEST_QUOTE ? `${body.slice(0, LONGEST_QUOTE)} …` : body;
  return cut.split(/\r\n|[\r\n\u2028\u2029]/).map((line) => `> ${line}`);
}

/** Whatever breaks a line would begin another header, or pass for words of Crosstie's own; direction marks turn them round. */
export function oneLine(text: string): string {
  // oxlint-disable-next-line no-control-regex
  return text.replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029]+/g, ' ').replace(/[\u200b-\u200f\u202a-\u202e\u2066-\u2069]/g, '').trim();
}

const LONGEST_SUBJECT = 200;

/** Cut between characters, not within one. */
function shortened(text: string): string {
  const characters = [...text];
  return characters.length > LONGEST_SUBJECT ? `${characters.slice(0, LONGEST_SUBJECT - 1).join('')}…` : text;
}
