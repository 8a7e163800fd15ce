import type { Request } from 'express';
import { uploadFields, type UploadFields } from '#shared/api/files';
import type { FileKind, Reach } from '#shared/vocabulary';
import { standingIn, type Standing } from '../access/rules.js';
import { callerOf } from '../http/endpoint.js';
import { invalid, notFound, Refusal } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import type { Storage } from './storage.js';

const DEFAULT_REACH: Record<FileKind, Reach> = { capture: 'everyone', snapshot: 'compare-only', glossary: 'compare-only', attachment: 'everyone' };
/** Multipart boundaries and headers around the one file. */
const WRAPPING_BYTES = 10_000;

/** The draft beside which a file is read: the data of a SigMF pair, the glossary of a snapshot. */
export interface Companion { id: string; storageId: string; name: string }

export interface Admitted {
  readonly caller: Caller;
  readonly standing: Standing;
  readonly kind: FileKind;
  readonly fields: UploadFields;
  readonly reach: Reach;
  readonly ownerPartyId: string;
  readonly limit: number;
  readonly companion: Companion | null;
  /** Gives back the room that was kept free for these bytes. */
  readonly release: () => void;
}

/** Decides on an upload before its first byte is taken: size, room, access, reach, quota. */
export async function admit(services: Services, storage: Storage, { request, kind }: { request: Request; kind: FileKind }): Promise<Admitted> {
  const caller = callerOf(request);
  const fields = uploadFields.parse(request.query);
  const limit = limitOf(services, kind);
  const announced = announcedBytes(request);
  if (announced > limit + WRAPPING_BYTES) throw tooLarge(limit);
  const admitted = await services.database.asPerson(caller.personId, async () => {
    const programme = await services.database.row<{ id: string }>('select id from programmes where code = $1', [fields.programme]);
    if (!programme) throw notFound();
    const standing = await standingIn(services, programme.id, 'upload-file');
    const ownerPartyId = await ownerOf(services, standing, fields);
    const reach = reachOf(kind, fields, ownerPartyId === standing.partyId);
    await refuseOverQuota(services, standing, announced);
    return { caller, standing, kind, fields, reach, ownerPartyId, limit, companion: await companionOf(services, fields, kind) };
  });
  const release = await storage.promise(announced, services.config.limits.minFreeBytes);
  if (!release) throw new Refusal(507, 'no-room', 'No room', 'The store is nearly full. Tell your administrator; nothing was taken.');
  return { ...admitted, release };
}

function limitOf({ config: { limits } }: Services, kind: FileKind): number {
  return kind === 'capture' ? limits.captureBytes : kind === 'attachment' ? limits.attachmentBytes : limits.snapshotBytes;
}

/** Without a length nothing can be checked before the bytes; every browser sends one. */
function announcedBytes(request: Request): number {
  const length = request.headers['content-length'];
  if (length === undefined) throw new Refusal(411, 'length-required', 'Length required', 'Say with Content-Length how many bytes are to come.');
  return Number(length);
}

export function tooLarge(limit: number): Refusal {
  return new Refusal(413, 'too-large', 'Too large', `This kind of file may have ${(limit / 1e6).toLocaleString('en-GB')} MB at most.`);
}

function reachOf(kind: FileKind, fields: UploadFields, isOwn: boolean): Reach {
  const reach = fields.reach ?? DEFAULT_REACH[kind];
  if (reach === 'compare-only' && kind !== 'snapshot' && kind !== 'glossary') throw invalid('reach', 'only a snapshot and its glossary can be compare only');
  if (reach === 'my-party' && !isOwn) throw invalid('reach', 'a file for your party only must be your own party\'s');
  return reach;
}

/** Counts the drafts of colleagues too, which the caller does not see. */
export async function refuseOverQuota(services: Services, standing: Standing, bytes: number): Promise<void> {
  const used = await services.database.row<{ bytes: number }>('select access.party_bytes($1)::float8 as bytes', [standing.partyId]);
  if ((used?.bytes ?? 0) + bytes <= services.config.limits.partyQuotaBytes) return;
  throw new Refusal(413, 'quota', 'Your party\'s room is used up', 'Withdraw files that are no longer needed, or ask your administrator for more room.');
}

async function ownerOf(services: Services, standing: Standing, fields: UploadFields): Promise<string> {
  if (!fields.ownerPartyId || fields.ownerPartyId === standing.partyId) return standing.partyId;
  const party = await services.database.row<{ id: string }>('select id from parties where id = $1 and programme_id = $2', [fields.ownerPartyId, standing.programmeId]);
  if (!party) throw notFound();
  return party.id;
}

async function companionOf(services: Services, fields: UploadFields, kind: FileKind): Promise<Companion | null> {
  const wanted = kind === 'capture' ? fields.dataFileId : kind === 'snapshot' ? fields.glossaryFileId : undefined;
  if (!wanted) return null;
  const found = await services.database.row<Companion>(
    'select id, storage_id as "storageId", name from files where id = $1 and kind = $2 and issue_id is null', [wanted, kind === 'capture' ? 'capture' : 'glossary']);
  if (!found) throw notFound();
  return found;
}
