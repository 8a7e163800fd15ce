import type { StoredFile, VeiledFile } from '#shared/api/files';
import type { Services } from '../http/services.js';

interface FileRow extends Omit<StoredFile, 'owner' | 'uploadedAt' | 'withdrawnAt' | 'unreadable' | 'actions'> {
  ownerId: string; ownerName: string; ownerShort: string; uploadedAt: Date; withdrawnAt: Date | null;
  unreadableCode: string | null; unreadableMessage: string | null; mine: boolean; owned: boolean; filed: boolean;
}

/** Whole files with what was read from them. Derived rows of a withdrawn file are gone, so they read null. */
const FILE = `
  select f.id, f.kind, f.name, f.size, f.sha256, f.side, f.reach, f.uploaded_by_name as "uploadedBy", f.uploaded_at as "uploadedAt", f.withdrawn_at as "withdrawnAt",
    p.id as "ownerId", p.name as "ownerName", p.short_name as "ownerShort",
    f.unreadable_code as "unreadableCode", f.unreadable_message as "unreadableMessage",
    (f.party_id = any(access.my_parties()) or f.uploader_party_id = any(access.my_parties())) as mine, f.party_id = any(access.my_parties()) as owned, f.issue_id is not null as filed,
    (select json_build_object('facts', c.facts, 'spectrum', c.spectrum, 'warnings', c.warnings) from captures c where c.file_id = f.id) as capture,
    (select json_build_object('syntax', s.syntax, 'vocabularies', s.vocabularies, 'notUnderstood', s.not_understood, 'problems', s.problems, 'missing', s.missing,
      'parameters', coalesce((select json_agg(json_build_object('parameter', v.parameter, 'value', v.value, 'path', v.path, 'raw', v.raw, 'line', v.line) order by v.line, v.path)
        from snapshot_parameters v where v.file_id = f.id), '[]'))
      from snapshots s where s.file_id = f.id) as snapshot
  from files f join parties p on p.id = f.party_id`;

const NARROWER = { everyone: ['compare-only', 'my-party'], 'compare-only': ['my-party'], 'my-party': [] } as const;

function shape(row: FileRow, mayChange: boolean): StoredFile {
  const { ownerId, ownerName, ownerShort, uploadedAt, withdrawnAt, unreadableCode, unreadableMessage, mine, owned, filed, ...file } = row;
  const changeable = mayChange && mine && withdrawnAt === null;
  // To its party alone a file is narrowed by that party: whoever sent it for them loses sight of it then.
  const narrower = NARROWER[file.reach].filter((reach) => (reach === 'compare-only' ? file.kind === 'snapshot' || file.kind === 'glossary' : owned));
  return {
    ...file, size: Number(file.size), owner: { id: ownerId, name: ownerName, shortName: ownerShort },
    uploadedAt: uploadedAt.toISOString(), withdrawnAt: withdrawnAt?.toISOString() ?? null,
    sha256: withdrawnAt ? '' : file.sha256,
    unreadable: unreadableCode ? { code: unreadableCode, message: unreadableMessage ?? '' } : null,
    actions: { narrow: changeable && filed ? narrower : [], withdraw: changeable, download: withdrawnAt === null },
  };
}

export async function filesOn(services: Services, issueId: string, mayChange: boolean): Promise<StoredFile[]> {
  const rows = await services.database.rows<FileRow>(`${FILE} where f.issue_id = $1 order by f.uploaded_at, f.id`, [issueId]);
  return rows.map((row) => shape(row, mayChange));
}

export async function fileById(services: Services, fileId: string, mayChange: boolean): Promise<StoredFile | null> {
  const row = await services.database.row<FileRow>(`${FILE} where f.id = $1`, [fileId]);
  return row ? shape(row, mayChange) : null;
}

/** What a reader outside a snapshot's reach learns: side and owner, nothing else. */
export async function veiledOn(services: Services, issueId: string): Promise<VeiledFile[]> {
  const rows = await services.database.rows<{ side: 'a' | 'b'; id: string; name: string; shortName: string }>(`
    select v.side, p.id, p.name, p.short_name as "shortName" from access.veiled_snapshots($1) v join parties p on p.id = v.party_id`, [issueId]);
  return rows.map(({ side, ...owner }) => ({ kind: 'snapshot', side, owner, reach: 'compare-only', veiled: true }));
}
