import { Router, type Request } from 'express';
import { rateLimit } from 'express-rate-limit';
import multer from 'multer';
import { uploadFields, type StoredFile, type UploadFields } from '#shared/api/files';
import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import type { FileKind, Reach } from '#shared/vocabulary';
import { writeAudit } from '../access/audit.js';
import { standingIn, type Standing } from '../access/rules.js';
import { callerOf } from '../http/endpoint.js';
import { invalid, notFound, Refusal } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { displayName } from './display-name.js';
import { fileById } from './file-queries.js';
import { readUpload, type ReadingRequest } from './reading.js';
import { Storage, TooLarge, type Received } from './storage.js';
import { storeReading } from './store-reading.js';

const UPLOADS = [['uploadCapture', 'capture'], ['uploadSnapshot', 'snapshot'], ['uploadGlossary', 'glossary'], ['uploadAttachment', 'attachment']] as const satisfies readonly (readonly [EndpointName, FileKind])[];
const DEFAULT_REACH: Record<FileKind, Reach> = { capture: 'everyone', snapshot: 'compare-only', glossary: 'compare-only', attachment: 'everyone' };
/** Multipart boundaries and headers around the one file. */
const WRAPPING_BYTES = 10_000;

interface Admitted { caller: Caller; standing: Standing; kind: FileKind; fields: UploadFields; reach: Reach; ownerPartyId: string; limit: number; companion: Companion | null }
interface Companion { id: string; storageId: string; name: string }

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
      const admitted = await admit(services, storage, { request, kind });
      const received = await receive(request, storage, admitted.limit);
      response.status(201).json(ENDPOINTS[name].reply.parse(await keep(services, storage, { admitted, ...received })));
    });
  }
  return router;
}

async function admit(services: Services, storage: Storage, { request, kind }: { request: Request; kind: FileKind }): Promise<Admitted> {
  const caller = callerOf(request);
  const fields = uploadFields.parse(request.query);
  const { limits } = services.config;
  const limit = kind === 'capture' ? limits.captureBytes : kind === 'attachment' ? limits.attachmentBytes : limits.snapshotBytes;
  const announced = Number(request.headers['content-length'] ?? 0);
  if (announced > limit + WRAPPING_BYTES) throw tooLarge(limit);
  if (await storage.freeBytes() < announced + limits.minFreeBytes) throw new Refusal(507, 'no-room', 'No room', 'The store is nearly full. Tell your administrator; nothing was taken.');
  return services.database.asPerson(caller.personId, async () => {
    const programme = await services.database.row<{ id: string }>('select id from programmes where code = $1', [fields.programme]);
    if (!programme) throw notFound();
    const standing = await standingIn(services, programme.id, 'upload-file');
    const ownerPartyId = await ownerOf(services, standing, fields);
    const reach = fields.reach ?? DEFAULT_REACH[kind];
    if (reach === 'compare-only' && kind !== 'snapshot' && kind !== 'glossary') throw invalid('reach', 'only a snapshot and its glossary can be compare only');
    if (reach === 'my-party' && ownerPartyId !== standing.partyId) throw invalid('reach', 'a file for your party only must be your own party\'s');
    const used = await services.database.row<{ bytes: number }>('select coalesce(sum(size), 0)::float8 as bytes from files where uploader_party_id = $1 and withdrawn_at is null', [standing.partyId]);
    if ((used?.bytes ?? 0) + announced > limits.partyQuotaBytes) throw new Refusal(413, 'quota', 'Your party\'s room is used up', 'Withdraw files that are no longer needed, or ask your administrator for more room.');
    return { caller, standing, kind, fields, reach, ownerPartyId, limit, companion: await companionOf(services, fields, kind) };
  });
}

async function ownerOf(services: Services, standing: Standing, fields: UploadFields): Promise<string> {
  if (!fields.ownerPartyId || fields.ownerPartyId === standing.partyId) return standing.partyId;
  const party = await services.database.row<{ id: string }>('select id from parties where id = $1 and programme_id = $2', [fields.ownerPartyId, standing.programmeId]);
  if (!party) throw notFound();
  return party.id;
}

/** The draft beside which this file is read: the data of a SigMF pair, the glossary of a snapshot. */
async function companionOf(services: Services, fields: UploadFields, kind: FileKind): Promise<Companion | null> {
  const wanted = kind === 'capture' ? fields.dataFileId : kind === 'snapshot' ? fields.glossaryFileId : undefined;
  if (!wanted) return null;
  const found = await services.database.row<Companion>(
    'select id, storage_id as "storageId", name from files where id = $1 and kind = $2 and issue_id is null', [wanted, kind === 'capture' ? 'capture' : 'glossary']);
  if (!found) throw notFound();
  return found;
}

/** One file part, streamed; a request that breaks off leaves nothing. */
function receive(request: Request, storage: Storage, limit: number): Promise<{ received: Received; name: string }> {
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
    async function settle(error: unknown): Promise<{ received: Received; name: string }> {
      const received = await taken?.catch(() => null);
      if (error) {
        if (received) await storage.remove(received.storageId);
        throw error instanceof TooLarge ? tooLarge(limit) : new Refusal(400, 'broken-off', 'The upload broke off', 'The file did not arrive whole. Send it again.');
      }
      if (!received || !request.file) throw invalid('file', 'send one file in the part named file');
      return { received, name: displayName(request.file.originalname) };
    }
  });
}

function tooLarge(limit: number): Refusal {
  return new Refusal(413, 'too-large', 'Too large', `This kind of file may have ${(limit / 1e6).toLocaleString('en-GB')} MB at most.`);
}

async function keep(services: Services, storage: Storage, { admitted, received, name }: { admitted: Admitted; received: Received; name: string }): Promise<StoredFile> {
  const { caller, standing, kind, fields, companion } = admitted;
  if (received.size === 0) {
    await storage.remove(received.storageId);
    throw new Refusal(422, 'empty', 'Empty', `"${name}" has no bytes. Record or save it again.`);
  }
  const label = { datatype: fields.datatype, sampleRateHz: fields.sampleRateHz, centreFrequencyHz: fields.centreFrequencyHz };
  const request: ReadingRequest = { kind, path: storage.path(received.storageId), name, beside: companion ? { path: storage.path(companion.storageId), name: companion.name } : null, ...label };
  try {
    const reading = await readUpload(request);
    return await services.database.asPerson(caller.personId, async () => {
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
    });
  } catch (error) {
    await storage.remove(received.storageId);
    throw error;
  }
}
