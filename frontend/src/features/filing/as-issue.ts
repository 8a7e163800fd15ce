import type { z } from 'zod';
import type { newIssue } from '#shared/api/issues';
import type { StoredFile } from '#shared/api/files';
import { ofKind, snapshotOf, type Draft } from './draft.js';

/** A side's glossary goes with its snapshot, without being named. */
const goesAlong = (file: StoredFile, files: readonly StoredFile[]): boolean =>
  file.kind === 'glossary' && file.side !== null && snapshotOf(files, file.side) !== undefined && ofKind(files, 'glossary').findLast((g) => g.side === file.side)?.id === file.id;

/** The draft and its files as the issue that is filed. `fileKey` makes a repeated filing harmless. */
export function asIssue(draft: Draft, files: readonly StoredFile[], fileKey: string): z.input<typeof newIssue> {
  const { linkId, title, description, severity, transmitter, lastRung, signalPath, baseline } = draft;
  const main = [ofKind(files, 'capture').at(-1)?.id, snapshotOf(files, 'a')?.id, snapshotOf(files, 'b')?.id];
  return {
    linkId, title, description, severity: severity || 'major', transmitter: transmitter || null, lastRung, signalPath, baseline, fileKey,
    buildAId: draft.buildAId || null, buildBId: draft.buildBId || null,
    captureFileId: main[0] ?? null, snapshotAFileId: main[1] ?? null, snapshotBFileId: main[2] ?? null,
    fileIds: files.filter((f) => !main.includes(f.id) && !goesAlong(f, files)).map((f) => f.id),
    shareWithPartyIds: [...draft.shareWith],
    ...(draft.movePartyId && draft.moveAsk ? { nextMove: { partyId: draft.movePartyId, ask: draft.moveAsk, due: draft.moveDue || null } } : {}),
  };
}
