import { Router, type Request } from 'express';
import { rateLimit } from 'express-rate-limit';
import multer from 'multer';
import type { StoredFile } from '#shared/api/files';
import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import type { FileKind } from '#shared/vocabulary';
import { writeAudit } from '../access/audit.js';
import { callerOf, recordRefusal } from '../http/endpoint.js';
import { invalid, notFound, Refusal } from '../http/problems.js';
import type { Services } from '../http/services.js';
import { admit, refuseOverQuota, tooLarge, type Admitted } from './admission.js';
import { displayName } from './display-name.js';
import { fileById } from './file-queries.js';
import { readUpload, type Reading, type ReadingRequest } from './reading.js';
import { Storage, TooLarge, type Received } from './storage.js';
import { storeReading } from './store-reading.js';

const UPLOADS = [['uploadCapture', 'capture'], ['uploadSnapshot', 'snapshot'], ['uploadGlossary', 'glossary'], ['uploadAttachment', 'attachment']] as const satisfies readonly (readonly [EndpointName, FileKind])[];

interface Sent { received: Received; name: string }

/** Uploads: decided before the first byte is taken, streamed to disk, read, and answered with what was read. */
export function uploadRouter(services: Services, storage: Storage): Router {
  const router = Router();
  const limited = rateLimit({
    windowMs: 60_000, limit: services.config.limits.uploadsPerMinute, keyGenerator: (request) => callerOf(request).personId,
    standardHeaders: 'draft-8', legacyHeaders: false,
    handler: (_request, _response, next) => next(new Refusal(429, 'too-many', 'Too many uploads', 'Wait a minute, then send the file again.')),
  });
  for (const [name, kind] of UPLOADS) {
    router.post(ENDPOINTS[name].path, limited, async (request, response) => {
      const admitted = await admit(services, storage, { request, kind }).catch(async (error: unknown) => {
        await recordRefusal(services, request, { name, error, programme: String(request.query['programme']) });
        throw error;
      });
      try {
        const sent = await receive(request, storage, admitted.limit);
        response.status(201).json(ENDPOINTS[name].reply.parse(await keep(services, storage, { admitted, sent })));
      } finally {
        admitted.release();
      }
    });
  }
  return router;
}

/** One file part, streamed; a request that breaks off leaves nothing. */
function receive(request: Request, storage: Storage, limit: number): Promise<Sent> {
  return new Promise((resolve, reject) => {
    let taken: Promise<Received> | null = null;
    const engine: multer.StorageEngine = {
      _handleFile(_request, file, done) {
        taken = storage.receive(file.stream, limit);
        taken.then((received) => done(null, { filename: received.storageId, size: received.size }), done);
      },
      _removeFile(_request, file, done) {
        storage.remove(file.filename).then(() => done(null), done);
      },
    };
    multer({ storage: engine, limits: { files: 1, fields: 0, parts: 1, headerPairs: 20 }, defParamCharset: 'utf8' } as multer.Options).single('file')(request, {} as never, (error: unknown) => {
      void settle(error).then(resolve, reject);
    });
    async function settle(error: unknown): Promise<Sent> {
      const received = await taken?.catch(() => null);
      if (error) {
        if (received) await storage.remove(received.storageId);
        if (error instanceof TooLarge) throw tooLarge(limit);
        if (error instanceof multer.MulterError) throw invalid('file', 'send one file in the part named file, and nothing else');
        throw new Refusal(400, 'broken-off', 'The upload broke off', 'The file did not arrive whole. Send it again.');
      }
      if (!received || !request.file) throw invalid('file', 'send one file in the part named file');
      return { received, name: displayName(request.file.originalname) };
    }
  });
}

/** Reads what arrived and records both; whatever fails on the way, no bytes stay without a record. */
async function keep(services: Services, storage: Storage, { admitted, sent }: { admitted: Admitted; sent: Sent }): Promise<StoredFile> {
  const { received, name } = sent;
  try {
    if (received.size === 0) throw new Refusal(422, 'empty', 'Empty', `"${name}" has no bytes. Record or save it again.`);
    const { datatype, sampleRateHz, centreFrequencyHz } = admitted.fields;
    const beside = admitted.companion ? { path: storage.path(admitted.companion.storageId), name: admitted.companion.name } : null;
    const request: ReadingRequest = { kind: admitted.kind, path: storage.path(received.storageId), name, beside, datatype, sampleRateHz, centreFrequencyHz };
    const reading = await readUpload(request);
    return await services.database.asPerson(admitted.caller.personId, () => record(services, { admitted, sent, reading }));
  } catch (error) {
    await storage.remove(received.storageId);
    throw error;
  }
}

async function record(services: Services, { admitted, sent: { received, name }, reading }: { admitted: Admitted; sent: Sent; reading: Reading }): Promise<StoredFile> {
  const { caller, standing, kind, fields, companion } = admitted;
  // Several may have been on their way at once: each was within the quota, and all of them may not be.
  await refuseOverQuota(services, standing, received.size);
  const label = { datatype: fields.datatype, sampleRateHz: fields.sampleRateHz, centreFrequencyHz: fields.centreFrequencyHz };
  const fileId = crypto.randomUUID();
  await services.database.change(`
    insert into files (id, programme_id, kind, side, name, size, sha256, storage_id, companion_id, reach, party_id, uploader_party_id, uploaded_by, uploaded_by_name, options, unreadable_code, unreadable_message)
    values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, access.person(), $13, $14, $15, $16)`,
  [fileId, standing.programmeId, kind, fields.side ?? null, name, received.size, received.sha256, received.storageId, companion?.id ?? null, admitted.reach,
    admitted.ownerPartyId, standing.partyId, caller.name, JSON.stringify(label), reading.unreadable?.code ?? null, reading.unreadable?.message ?? null]);
  await storeReading(services, { fileId, programmeId: standing.programmeId, reading });
  await writeAudit(services, caller, { programmeId: standing.programmeId, partyId: standing.partyId, action: 'upload', object: `${kind} of ${received.size} bytes` });
  const file = await fileById(services, fileId, true);
  if (!file) throw notFound();
  return file;
}
