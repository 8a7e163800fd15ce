import type { WaitingCause } from '#shared/vocabulary';
import type { Standing } from '../access/rules.js';
import { notFound } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { queueMail, recordEvent } from '../issues/record.js';

export interface MoveTarget {
  readonly issueId: string;
  readonly programmeId: string;
  readonly partyAId: string;
  readonly partyBId: string;
  readonly move: { partyId: string; ask: string; due: string | null; cause?: WaitingCause | undefined };
  /** Another letter of the same happening says it too. */
  readonly withoutLetter?: boolean;
}

/** Ends the current waiting interval and starts the next: one party at a time has the next move. */
export async function setNextMove(services: Services, by: { caller: Caller; standing: Standing }, { issueId, programmeId, partyAId, partyBId, move, withoutLetter }: MoveTarget): Promise<void> {
  const { database } = services;
  const party = await database.row<{ name: string }>('select p.name from shares s join parties p on p.id = s.party_id where s.issue_id = $1 and s.party_id = $2', [issueId, move.partyId]);
  if (!party) throw notFound();
  const cause: WaitingCause = move.cause ?? (move.partyId === partyAId ? 'side-a' : move.partyId === partyBId ? 'side-b' : 'lab');
  await endNextMove(services, issueId);
  await database.change(`
    insert into next_moves (programme_id, issue_id, party_id, ask, cause, due, set_by) values ($1, $2, $3, $4, $5, $6, access.person())`,
  [programmeId, issueId, move.partyId, move.ask, cause, move.due]);
  const side = move.partyId === partyAId ? 'a' : move.partyId === partyBId ? 'b' : null;
  const eventId = await recordEvent(services, by, { issueId, programmeId, kind: 'next-move', side, text: `asked ${party.name} to ${move.ask}${move.due ? `, due ${move.due}` : ''}` });
  if (!withoutLetter) await queueMail(services, { issueId, kind: 'next-move', eventId });
}

export async function endNextMove(services: Services, issueId: string): Promise<void> {
  await services.database.change('update next_moves set ended_at = now() where issue_id = $1 and ended_at is null', [issueId]);
}
