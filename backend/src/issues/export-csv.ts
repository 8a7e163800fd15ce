import { stringify } from 'csv-stringify';
import { Router } from 'express';
import { registerQuery, type RegisterRow } from '#shared/api/issues';
import { STAGE_LABELS } from '#shared/vocabulary';
import { writeAudit } from '../access/audit.js';
import { standings } from '../access/rules.js';
import { callerOf } from '../http/endpoint.js';
import type { Services } from '../http/services.js';
import { registerRows } from './register-repository.js';

const BATCH = 200;
const HEADINGS = ['number', 'what is wrong', 'link', 'side A', 'side B', 'severity', 'stage', 'last rung down', 'last rung up', 'likely mismatch', 'side', 'probability', 'next move', 'since', 'due', 'raised', 'updated'];

/** A cell that a spreadsheet would take for a formula starts with an apostrophe (OWASP, CSV injection). */
export function guarded(cell: string): string {
  return /^(?:[\t\r\n]|\s*[=+\-@＝＋－＠])/u.test(cell) ? `'${cell}` : cell;
}

function line(row: RegisterRow): string[] {
  return [
    `${row.programme}/${row.number}`, row.title, row.link.name, row.a.name, row.b.name, row.severity, STAGE_LABELS[row.stage],
    row.lastRung.downlink ?? '', row.lastRung.uplink ?? '', row.hint?.code ?? '', row.hint?.side ?? '', row.hint ? row.hint.confidence.toFixed(2) : '',
    row.nextMove?.party.name ?? '', row.nextMove?.since ?? '', row.nextMove?.due ?? '', row.raisedAt, row.updatedAt,
  ].map(guarded);
}

/** GET /api/issues/export: the register's filter as CSV, read in batches, each in its own short transaction. */
export function exportRouter(services: Services): Router {
  const router = Router();
  router.get('/api/issues/export', async (request, response) => {
    const caller = callerOf(request);
    const query = registerQuery.parse({ ...request.query, page: 1, size: BATCH });
    const first = await services.database.asPerson(caller.personId, async () => {
      for (const { programmeId, partyId } of await standings(services)) {
        await writeAudit(services, caller, { programmeId, partyId, action: 'export-register', object: 'the register as CSV', detail: new URLSearchParams(request.query as Record<string, string>).toString() });
      }
      return registerRows(services, query);
    });
    response.set({ 'content-type': 'text/csv; charset=utf-8', 'content-disposition': 'attachment; filename="register.csv"', 'cache-control': 'private, no-store', 'x-content-type-options': 'nosniff' });
    const csv = stringify({ header: true, columns: HEADINGS });
    csv.pipe(response);
    let rows = first;
    for (let page = 2; ; page++) {
      for (const row of rows) csv.write(line(row));
      if (rows.length < BATCH || response.destroyed) break;
      rows = await services.database.asPerson(caller.personId, () => registerRows(services, { ...query, page }));
    }
    csv.end();
  });
  return router;
}
