import { useEffect, useRef } from 'react';
import type { UploadFields } from '#shared/api/files';
import type { Link } from '#shared/api/links';
import type { FileKind, Reach, Side } from '#shared/vocabulary';
import { sideByName } from '../../lib/uploads/kinds.js';
import type { UploadItem } from '../../lib/uploads/queue.js';
import type { Uploads } from '../../lib/uploads/use-uploads.js';

export interface Sending {
  add: (files: File[]) => void;
  take: (item: UploadItem, change: { kind?: FileKind; side?: Side | undefined; reach?: Reach }) => void;
}

const wordsOf = (link: Link | null, side: Side): string[] => {
  if (!link) return [];
  const { party, unit } = link[side];
  return [party.shortName, party.name, unit.name.replace(/[^\w]/g, '')];
};

/** A snapshot belongs to the party whose unit it describes, whoever sends it. */
function fieldsFor(kind: FileKind, side: Side | undefined, reach: Reach | undefined, link: Link | null): Partial<UploadFields> {
  const owned = link && side && kind !== 'capture' ? { ownerPartyId: link[side].party.id } : {};
  const allowed = reach === 'compare-only' && kind !== 'snapshot' ? 'everyone' : reach;
  return { ...(side && kind !== 'capture' ? { side } : {}), ...(allowed ? { reach: allowed } : {}), ...owned };
}

/** The side that a snapshot speaks of by its name; else the one that has none yet. */
function guessSide(name: string, link: Link | null, taken: readonly (Side | undefined)[]): Side | undefined {
  const byName = sideByName(name, { a: wordsOf(link, 'a'), b: wordsOf(link, 'b') });
  if (byName) return byName;
  if (!taken.includes('a')) return 'a';
  return taken.includes('b') ? undefined : 'b';
}

/**
 * Sends dropped files with side, owner and reach. Side and owner hang on the link, which may be
 * chosen after the drop: snapshots whose owner changes by it are sent again.
 */
export function useSending(uploads: Uploads, link: Link | null): Sending {
  const { items, resend } = uploads;
  const linkId = link?.id ?? null;
  const sentFor = useRef(linkId);
  useEffect(() => {
    if (sentFor.current === linkId) return;
    sentFor.current = linkId;
    for (const item of items) {
      const { side, reach, ownerPartyId } = item.fields;
      const fields = fieldsFor(item.kind, side, reach, link);
      if (item.state === 'done' && fields.ownerPartyId !== ownerPartyId) resend(item.key, { fields });
    }
  }, [linkId, link, items, resend]);

  return {
    add: (files) => {
      const taken = items.filter((i) => i.kind === 'snapshot').map((i) => i.fields.side);
      uploads.add(files, (item) => {
        const sided = item.kind === 'snapshot' || item.kind === 'glossary';
        const side = sided ? guessSide(item.name, link, item.kind === 'snapshot' ? taken : []) : undefined;
        if (item.kind === 'snapshot') taken.push(side);
        return fieldsFor(item.kind, side, undefined, link);
      });
    },
    take: (item, change) => {
      const kind = change.kind ?? item.kind;
      const side = 'side' in change ? change.side : item.fields.side;
      resend(item.key, { kind, fields: fieldsFor(kind, side, change.reach ?? item.fields.reach, link) });
    },
  };
}
