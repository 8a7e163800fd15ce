import type { Link } from '#shared/api/links';
import type { SignalPath } from '#shared/api/issues';
import type { StoredFile } from '#shared/api/files';
import type { Severity, Side } from '#shared/vocabulary';
import type { UploadItem } from '../../lib/uploads/queue.js';

/** What the reader has filled in, or the files have filled in for them. */
export interface Draft {
  linkId: string; title: string; description: string; severity: Severity | '';
  buildAId: string; buildBId: string; transmitter: Side | '';
  lastRung: { downlink: string | null; uplink: string | null };
  signalPath: SignalPath; baseline: string;
  shareWith: readonly string[];
  movePartyId: string; moveAsk: string; moveDue: string;
}
export const EMPTY_DRAFT: Draft = {
  linkId: '', title: '', description: '', severity: '', buildAId: '', buildBId: '', transmitter: '', lastRung: { downlink: null, uplink: null },
  signalPath: { path: null, attenuationDb: null, levelDbm: null, clockSource: null, lateCounters: null }, baseline: '',
  shareWith: [], movePartyId: '', moveAsk: '', moveDue: '',
};

export const storedOf = (items: readonly UploadItem[]): StoredFile[] => items.flatMap((i) => (i.state === 'done' && i.stored ? [i.stored] : []));

/** A capture's centre is on a link when it lies this near; wider than any channel, narrower than most bands. */
const NEAR_HZ = 60e6;

/** The one link that the files speak of, or null where they leave it open. */
export function linkFromFiles(files: readonly StoredFile[], links: readonly Link[]): Link | null {
  if (links.length === 1) return links[0]!;
  const centre = files.map((f) => f.capture?.facts.centreFrequencyHz ?? null).find((hz) => hz !== null) ?? frequencyDeclared(files);
  if (centre === null || centre === undefined) return null;
  const near = links.filter((l) => l.centreFrequencyHz !== null && Math.abs(l.centreFrequencyHz - centre) <= NEAR_HZ);
  return near.length === 1 ? near[0]! : null;
}

function frequencyDeclared(files: readonly StoredFile[]): number | null {
  for (const file of files) {
    const found = file.snapshot?.parameters.find((p) => p.parameter === 'carrierFrequency');
    if (typeof found?.value === 'number') return found.value;
  }
  return null;
}

/** The clock that a snapshot states, word for word. */
export function clockFromFiles(files: readonly StoredFile[]): string | null {
  for (const file of files) {
    const found = file.snapshot?.parameters.find((p) => p.parameter === 'referenceClock');
    if (typeof found?.value === 'string') return found.value;
  }
  return null;
}

export const ofKind = (files: readonly StoredFile[], kind: StoredFile['kind']): StoredFile[] => files.filter((f) => f.kind === kind);
/** The last snapshot sent for a side. */
export const snapshotOf = (files: readonly StoredFile[], side: Side): StoredFile | undefined =>
  ofKind(files, 'snapshot').filter((f) => f.side === side).at(-1);
