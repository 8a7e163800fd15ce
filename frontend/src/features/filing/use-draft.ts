import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { StoredFile } from '#shared/api/files';
import type { Build, Link } from '#shared/api/links';
import type { Option } from '../../components/ui/field.js';
import { reading } from '../../lib/query.js';
import { clockFromFiles, EMPTY_DRAFT, linkFromFiles, type Draft } from './draft.js';

const newestFirst = (builds: readonly Build[] = []): Build[] => builds.toSorted((x, y) => y.addedAt.localeCompare(x.addedAt));
const options = (builds: readonly Build[]): Option[] => builds.map((b): Option => [b.id, b.label]);

/** What the files and the link say of themselves. */
function readFrom(files: readonly StoredFile[], builds: { a: Build[]; b: Build[] }): Partial<Draft> {
  const clock = clockFromFiles(files);
  return {
    ...(clock ? { signalPath: { ...EMPTY_DRAFT.signalPath, clockSource: clock } } : {}),
    ...(builds.a[0] ? { buildAId: builds.a[0].id } : {}),
    ...(builds.b[0] ? { buildBId: builds.b[0].id } : {}),
  };
}

/** A build belongs to a link's unit: another link starts without one. */
const typedWith = (typed: Partial<Draft>, change: Partial<Draft>): Partial<Draft> => {
  if (change.linkId === undefined) return { ...typed, ...change };
  const { buildAId: _a, buildBId: _b, ...kept } = typed;
  return { ...kept, ...change };
};

/**
 * The draft: what the reader typed, over what the files and the link say. `filled` names what nobody
 * typed. What was typed is never overwritten.
 */
export function useDraft(files: readonly StoredFile[], links: readonly Link[], firstLinkId: string | null) {
  const [typed, setTyped] = useState<Partial<Draft>>(firstLinkId ? { linkId: firstLinkId } : {});
  const linkId = typed.linkId ?? linkFromFiles(files, links)?.id ?? '';
  const link = links.find((l) => l.id === linkId) ?? null;
  const { data: detail } = useQuery({ ...reading('readLink', { params: { linkId } }), enabled: link !== null });
  const builds = { a: newestFirst(detail?.unitBuilds.a), b: newestFirst(detail?.unitBuilds.b) };
  const read = readFrom(files, builds);
  const draft: Draft = { ...EMPTY_DRAFT, ...read, ...typed, linkId };
  const filled = new Set(Object.keys(read).filter((name) => !(name in typed)).map((name) => (name === 'signalPath' ? 'clockSource' : name)));
  if (link && typed.linkId === undefined) filled.add('linkId');
  return {
    draft, link, filled, builds: { a: options(builds.a), b: options(builds.b) },
    set: (change: Partial<Draft>) => setTyped((t) => typedWith(t, change)),
  };
}
