import type { Caller, Services } from '../http/services.js';

export interface AuditLine {
  readonly programmeId: string | null;
  /** Whose record: a party's own, or null for the programme's. */
  readonly partyId: string | null;
  readonly action: string;
  readonly object: string;
  readonly detail?: string;
  readonly outcome?: 'done' | 'refused';
}

/** One line of the append-only record, inside the caller's transaction. */
export async function writeAudit(services: Services, caller: Caller, line: AuditLine): Promise<void> {
  await services.database.change(`
    insert into audit (programme_id, party_id, person_id, person_name, person_party, action, object, detail, outcome)
    values ($1, $2, access.person(), $3,
      (select string_agg(distinct p.name, ', ') from memberships m join parties p on p.id = m.party_id where m.person_id = access.person() and m.left_at is null and ($1::uuid is null or m.programme_id = $1)),
      $4, $5, $6, $7)`,
  [line.programmeId, line.partyId, caller.name, line.action.slice(0, 60), line.object.slice(0, 300), (line.detail ?? '').slice(0, 1000), line.outcome ?? 'done']);
}

/**
 * A refusal, in a transaction of its own because the request's is rolled back. It goes to the record
 * of the programme that the address names, where the caller is in it, and else to that of each
 * programme of the caller: which one was meant may be just what was refused.
 */
export async function writeRefusal(services: Services, caller: Caller, refused: { action: string; path: string; status: number; programme?: string | undefined }): Promise<void> {
  try {
    await services.database.asPerson(caller.personId, async () => {
      const programmes = await services.database.rows<{ id: string; code: string }>('select id, code from programmes');
      const named = programmes.filter(({ code }) => code === refused.programme);
      for (const { id } of named.length > 0 ? named : programmes) {
        await writeAudit(services, caller, { programmeId: id, partyId: null, action: refused.action, object: refused.path, detail: `answered ${refused.status}`, outcome: 'refused' });
      }
    });
  } catch (error) {
    services.log.error({ error }, 'a refusal could not be written to the audit record');
  }
}
