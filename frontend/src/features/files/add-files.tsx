import { useState } from 'react';
import { REACHES, type FileKind, type Reach, type Side } from '#shared/vocabulary';
import { Cautions } from '../../components/ui/cautions.js';
import { Select } from '../../components/ui/field.js';
import { Refused } from '../../components/ui/refused.js';
import { CaptureRead } from '../../components/uploads/capture-read.js';
import { DropZone } from '../../components/uploads/drop-zone.js';
import { LabelForm } from '../../components/uploads/label-form.js';
import { SnapshotRead } from '../../components/uploads/snapshot-read.js';
import { UploadLine } from '../../components/uploads/upload-line.js';
import { isRaw } from '../../lib/uploads/kinds.js';
import { useUploads } from '../../lib/uploads/use-uploads.js';

const REACH_WORDS: Record<Reach | 'usual', string> = { usual: 'as usual: snapshots compare only, the rest everyone', everyone: 'everyone on the issue', 'my-party': 'my party only', 'compare-only': 'compare only (snapshots)' };
const isSided = (kind: FileKind): boolean => kind === 'snapshot' || kind === 'glossary';

/** More files for an issue: sent, read and shown first, then put on it. */
export function AddFiles({ programme, sides, attach, close }: {
  programme: string; sides: { a: { id: string; name: string }; b: { id: string; name: string } };
  attach: { send: (ids: string[]) => Promise<unknown>; pending: boolean; error: unknown }; close: () => void;
}) {
  const uploads = useUploads(programme);
  const [side, setSide] = useState<Side | ''>('');
  const [reach, setReach] = useState<Reach | 'usual'>('usual');
  const ready = uploads.items.flatMap((i) => (i.state === 'done' && i.stored ? [i.stored.id] : []));
  const busy = uploads.items.some((i) => i.state === 'sending' || i.state === 'reading');
  const add = (files: File[]): void => uploads.add(files, (item) => ({
    ...(side && isSided(item.kind) ? { side, ownerPartyId: sides[side].id } : {}),
    ...(reach === 'usual' || (reach === 'compare-only' && !isSided(item.kind)) ? {} : { reach }),
  }));
  return (
    <div className="panel mb-4">
      <div className="fields">
        <Select label="Describes or comes from" none="neither side in particular" value={side} options={[['a', `side A, ${sides.a.name}`], ['b', `side B, ${sides.b.name}`]]} onChange={(e) => setSide(e.target.value as Side)} />
        <Select label="Reaches" value={reach} options={(['usual', ...REACHES] as const).map((r) => [r, REACH_WORDS[r]] as const)} onChange={(e) => setReach(e.target.value as Reach)} />
      </div>
      <DropZone small onFiles={add}><p>Drop captures, snapshots or other files here.</p></DropZone>
      {uploads.items.map((item) => (
        <div key={item.key}>
          <UploadLine item={item} uploads={uploads} />
          {item.state === 'lacks-labels' && <LabelForm item={item} uploads={uploads} raw={isRaw(item.name)} />}
          {item.stored?.unreadable && <p className="notice waits">{item.stored.unreadable.message}</p>}
          {item.stored?.capture && <CaptureRead reading={item.stored.capture} />}
          {item.stored?.snapshot && <SnapshotRead reading={item.stored.snapshot} />}
        </div>
      ))}
      <Cautions what="a new capture" />
      <Refused error={attach.error} />
      <div className="actions">
        <button type="button" className="button button-main" disabled={ready.length === 0 || busy || attach.pending} onClick={() => void attach.send(ready).then(close, () => undefined)}>Put {ready.length || ''} on the issue</button>
        <button type="button" className="button" onClick={close}>Not now</button>
      </div>
    </div>
  );
}
