import { useEffect } from 'react';
import type { UploadFields } from '#shared/api/files';
import type { Link } from '#shared/api/links';
import type { FileKind, Reach, Side } from '#shared/vocabulary';
import { sideByName } from '../../lib/uploads/kinds.js';
import type { UploadItem } from '../../lib/uploads/queue.js';
import type { Uploads } from '../../lib/uploads/use-uploads.js';

/** The two sides that a file may describe; a link has them, and so has an issue. */
export type Ends = Pick<Link, 'a' | 'b'>;
/** What the reader said of one file; the rest of its fields follows from the link and from the other files. */
export interface Taken { kind: FileKind; side: Side | undefined; reach: Reach }
export interface Sending {
  add: (files: File[]) => void;
  take: (item: UploadItem, change: Partial<Taken>) => void;
  /** Whether a file would belong to the reader's own party, which alone may keep it to itself. */
  ownedByReader: (item: UploadItem) => boolean;
}

const isSided = (kind: FileKind): boolean => kind === 'snapshot' || kind === 'glossary';
/** A configuration shows no more than the comparison needs until its sender says otherwise. */
export const usualReach = (kind: FileKind): Reach => (isSided(kind) ? 'compare-only' : 'everyone');
const allowedReach = (kind: FileKind, reach: Reach | undefined): Reach => (!reach || (reach === 'compare-only' && !isSided(kind)) ? usualReach(kind) : reach);

const wordsOf = (link: Ends | null, side: Side): string[] => {
  if (!link) return [];
  const { party, unit } = link[side];
  return [party.shortName, party.name, unit.name.replace(/[^\w]/g, '')];
};

/** The side that a file speaks of by its name; else, for a snapshot, the one that has none yet. */
function guessSide(item: UploadItem, link: Ends | null, taken: readonly (Side | undefined)[]): Side | undefined {
  const byName = sideByName(item.name, { a: wordsOf(link, 'a'), b: wordsOf(link, 'b') });
  if (byName || item.kind !== 'snapshot') return byName ?? undefined;
  if (!taken.includes('a')) return 'a';
  return taken.includes('b') ? undefined : 'b';
}

/** A side's glossary that has arrived; its snapshot is read with it. */
const glossaryOf = (items: readonly UploadItem[], side: Side | undefined): string | undefined =>
  items.findLast((i) => i.kind === 'glossary' && i.state === 'done' && i.fields.side === side)?.stored?.id;

/** A snapshot belongs to the party whose unit it describes, whoever sends it. */
function fieldsOf({ kind, side, reach }: Taken, link: Ends | null, items: readonly UploadItem[]): Partial<UploadFields> {
  if (!isSided(kind)) return { reach: allowedReach(kind, reach) };
  const glossaryFileId = kind === 'snapshot' && side ? glossaryOf(items, side) : undefined;
  return {
    reach: allowedReach(kind, reach), ...(side ? { side } : {}), ...(link && side ? { ownerPartyId: link[side].party.id } : {}),
    ...(glossaryFileId ? { glossaryFileId } : {}),
  };
}

const takenAs = (item: UploadItem): Taken => ({ kind: item.kind, side: item.fields.side, reach: allowedReach(item.kind, item.fields.reach) });
const sameFields = (x: Partial<UploadFields>, y: Partial<UploadFields>): boolean =>
  x.side === y.side && x.reach === y.reach && x.ownerPartyId === y.ownerPartyId && x.glossaryFileId === y.glossaryFileId;

/**
 * Sends dropped files with side, owner, reach and glossary. Owner and glossary may only be known after
 * the drop, once the link is chosen or the glossary has arrived: what was sent without is sent again.
 */
export function useSending(uploads: Uploads, link: Ends | null, ownPartyIds: ReadonlySet<string>): Sending {
  const { items, resend } = uploads;
  useEffect(() => {
    for (const item of items) {
      if (item.state !== 'done') continue;
      const fields = fieldsOf(takenAs(item), link, items);
      if (!sameFields(fields, item.fields)) resend(item.key, { fields });
    }
  }, [items, link, resend]);

  return {
    add: (files) => {
      const taken = items.filter((i) => i.kind === 'snapshot').map((i) => i.fields.side);
      uploads.add(files, (item) => {
        const side = isSided(item.kind) ? guessSide(item, link, item.kind === 'snapshot' ? taken : []) : undefined;
        if (item.kind === 'snapshot') taken.push(side);
        return fieldsOf({ kind: item.kind, side, reach: usualReach(item.kind) }, link, items);
      });
    },
    take: (item, change) => {
      const kind = change.kind ?? item.kind;
      const before = takenAs(item);
      const taken: Taken = { kind, side: 'side' in change ? change.side : before.side, reach: change.reach ?? (change.kind ? usualReach(kind) : before.reach) };
      resend(item.key, { kind, fields: fieldsOf(taken, link, items) });
    },
    ownedByReader: (item) => {
      const { side } = item.fields;
      return !isSided(item.kind) || (link !== null && side !== undefined && ownPartyIds.has(link[side].party.id));
    },
  };
}
