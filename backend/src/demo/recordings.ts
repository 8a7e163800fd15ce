import { createHash } from 'node:crypto';
import { mkdirSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import type { FileKind, Reach, Side } from '#shared/vocabulary';
import { memoryBytes } from '../captures/formats/bytes.js';
import { captureReading } from '../files/capture-reading.js';
import { snapshotReading } from '../files/snapshot-reading.js';
import type { Storage } from '../files/storage.js';
import { captureFiles, type CaptureSpec } from '../generator/scenarios/capture.js';
import { writeSnapshot } from '../generator/snapshots/snapshot.js';
import type { Rows } from './rows.js';
import type { DecodeTale, PartyKey, SnapshotTale } from './story.js';
import type { Person, Tenants } from './tenants.js';

export interface FileParts { readonly rows: Rows; readonly storage: Storage; readonly tenants: Tenants }
interface Stored { issueId: string; by: Person; day: number; kind: FileKind; name: string; bytes: Uint8Array; reach: Reach; owner: PartyKey; side?: Side }

async function store({ rows, storage, tenants }: FileParts, file: Stored): Promise<string> {
  const storageId = crypto.randomUUID();
  mkdirSync(dirname(storage.path(storageId)), { recursive: true, mode: 0o700 });
  writeFileSync(storage.path(storageId), file.bytes, { mode: 0o600 });
  return rows.insert('files', {
    programme_id: tenants.programmeId, issue_id: file.issueId, kind: file.kind, side: file.side ?? null, name: file.name, size: file.bytes.length,
    sha256: createHash('sha256').update(file.bytes).digest('hex'), storage_id: storageId, reach: file.reach, party_id: tenants.parties[file.owner],
    uploader_party_id: tenants.parties[file.by.party], uploaded_by: file.by.id, uploaded_by_name: file.by.name, uploaded_at: rows.at(file.day),
  });
}

async function storeCapture(parts: FileParts, at: { issueId: string; by: Person; day: number }, { spec, name }: { spec: CaptureSpec; name: string }): Promise<string> {
  const [file] = captureFiles(spec).files;
  const id = await store(parts, { ...at, kind: 'capture', name, bytes: file.bytes, reach: 'everyone', owner: at.by.party });
  const { facts, spectrum, warnings } = captureReading({ kind: 'capture', path: '', name, beside: null }, memoryBytes(file.bytes), null);
  await parts.rows.link('captures', { file_id: id, programme_id: parts.tenants.programmeId, facts: JSON.stringify(facts), spectrum: JSON.stringify(spectrum), warnings: JSON.stringify(warnings) });
  return id;
}

async function storeSnapshot(parts: FileParts, at: { issueId: string; by: Person; day: number }, { tale, side, owner }: { tale: SnapshotTale; side: Side; owner: PartyKey }): Promise<string> {
  const text = tale.text ?? writeSnapshot(tale.declared, tale.style).text;
  const bytes = new TextEncoder().encode(text);
  const id = await store(parts, { ...at, kind: 'snapshot', name: tale.name, bytes, reach: tale.reach ?? 'compare-only', owner, side });
  const reading = snapshotReading(bytes, null);
  const { programmeId } = parts.tenants;
  await parts.rows.link('snapshots', {
    file_id: id, programme_id: programmeId, syntax: reading.syntax, vocabularies: JSON.stringify(reading.vocabularies), not_understood: JSON.stringify(reading.notUnderstood),
    problems: JSON.stringify(reading.problems), missing: JSON.stringify(reading.missing),
  });
  for (const { parameter, value, path, raw, line } of reading.parameters) {
    await parts.rows.insert('snapshot_parameters', { file_id: id, programme_id: programmeId, parameter, value: JSON.stringify(value), path, raw, line });
  }
  return id;
}

/** Stores a decode's inputs and puts it in the queue: the worker really decodes it. */
export async function plantDecode(parts: FileParts, at: { issueId: string; by: Person; day: number; sides: Record<Side, PartyKey>; number: number }, tale: DecodeTale): Promise<string> {
  const { rows, tenants } = parts;
  const inputs: [string, string][] = [];
  if (tale.capture) inputs.push(['capture', await storeCapture(parts, at, { spec: tale.capture, name: tale.captureName ?? 'capture.sigmf' })]);
  for (const side of ['a', 'b'] as const) {
    const snapshot = tale[side];
    if (snapshot) inputs.push([`snapshot-${side}`, await storeSnapshot(parts, at, { tale: snapshot, side, owner: at.sides[side] })]);
  }
  const decodeId = await rows.insert('decodes', {
    programme_id: tenants.programmeId, issue_id: at.issueId, number: at.number, reach: 'everyone', party_id: tenants.parties[at.by.party],
    transmitter: tale.transmitter ?? null, requested_by: at.by.id, requested_by_name: at.by.name, queued_at: rows.at(at.day),
  });
  for (const [role, fileId] of inputs) await rows.link('decode_inputs', { decode_id: decodeId, role, programme_id: tenants.programmeId, file_id: fileId, sha256: '0'.repeat(64) });
  await rows.run("insert into pgboss.job (name, data, retry_limit, retry_delay, expire_in, policy) select 'decode', jsonb_build_object('decodeId', $1::text), q.retry_limit, q.retry_delay, q.expire_seconds * interval '1 second', q.policy from pgboss.queue q where q.name = 'decode'", [decodeId]);
  return decodeId;
}
