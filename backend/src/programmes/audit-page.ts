import type { z } from 'zod';
import type { AuditPage, auditQuery } from '#shared/api/people';
import type { Services } from '../http/services.js';

type Line = AuditPage['items'][number];

/** One page of the record that the caller may read: the programme's to its administrators, a party's to its own people. */
export async function auditPage(services: Services, programmeId: string, query: z.infer<typeof auditQuery>): Promise<AuditPage> {
  const bind = [programmeId, query.action ?? null, query.from ?? null, query.to ?? null];
  const where = `where a.programme_id = $1 and ($2::text is null or a.action = $2) and ($3::date is null or a.at >= $3::date) and ($4::date is null or a.at < $4::date + 1)`;
  const rows = await services.database.rows<Omit<Line, 'at'> & { at: Date }>(`
    select a.id, a.at, a.person_name as person, a.person_party as party, a.action, a.object, a.detail, a.outcome from audit a ${where}
    order by a.at desc, a.id limit ${query.size} offset ${(query.page - 1) * query.size}`, bind);
  const counted = await services.database.row<{ total: number }>(`select count(*)::integer as total from audit a ${where}`, bind);
  return { items: rows.map(({ at, ...row }) => ({ ...row, at: at.toISOString() })), total: counted?.total ?? 0, page: query.page };
}
