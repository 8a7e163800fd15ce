import contentDisposition from 'content-disposition';
import { Router, type Request, type Response } from 'express';
import { writeAudit } from '../access/audit.js';
import { idParam } from '../access/rules.js';
import { callerOf, recordRefusal } from '../http/endpoint.js';
import { notFound } from '../http/problems.js';
import type { Services } from '../http/services.js';
import type { Storage } from './storage.js';

interface Row { storageId: string; name: string; programmeId: string; partyId: string; kind: string; withdrawn: boolean }

/** GET /api/files/:fileId/content: an attachment, with ranges; access is checked on every request. */
export function downloadRouter(services: Services, storage: Storage): Router {
  const router = Router();
  router.get('/api/files/:fileId/content', async (request, response) => {
    const file = await granted(services, request).catch(async (error: unknown) => {
      await recordRefusal(services, request, { name: 'download', error });
      throw error;
    });
    protect(response, file.name);
    // The transaction has ended: none stays open while bytes are sent.
    await new Promise<void>((resolve, reject) => {
      response.sendFile(storage.path(file.storageId), { acceptRanges: true, cacheControl: false, etag: false, lastModified: false, dotfiles: 'allow' }, (error) => {
        if (error && !response.headersSent) reject(error);
        else resolve();
      });
    });
  });
  return router;
}

async function granted(services: Services, request: Request): Promise<Row> {
  const caller = callerOf(request);
  const fileId = idParam(request.params as Record<string, string>, 'fileId');
  return services.database.asPerson(caller.personId, async () => {
    const row = await services.database.row<Row>(`
      select storage_id as "storageId", name, programme_id as "programmeId", party_id as "partyId", kind, withdrawn_at is not null as withdrawn from files where id = $1`, [fileId]);
    if (!row || row.withdrawn) throw notFound();
    await writeAudit(services, caller, { programmeId: row.programmeId, partyId: row.partyId, action: 'download', object: `${row.kind} ${row.name}`, detail: request.headers.range ?? 'whole' });
    return row;
  });
}

function protect(response: Response, name: string): void {
  response.set({
    'content-type': 'application/octet-stream',
    'content-disposition': contentDisposition(name, { type: 'attachment' }),
    'x-content-type-options': 'nosniff',
    'content-security-policy': "default-src 'none'; sandbox",
    'cache-control': 'private, no-store',
    'cross-origin-resource-policy': 'same-origin',
  });
}
