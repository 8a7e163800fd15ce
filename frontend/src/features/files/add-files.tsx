import { Cautions } from '../../components/ui/cautions.js';
import { useOpened } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { DropZone } from '../../components/uploads/drop-zone.js';
import { DroppedFiles } from '../../components/uploads/dropped-files.js';
import { useSending, type Ends } from '../../components/uploads/sending.js';
import { useUploads } from '../../lib/uploads/use-uploads.js';

interface AddFilesProps {
  programme: string; ends: Ends; ownPartyIds: ReadonlySet<string>;
  attach: { send: (ids: string[]) => Promise<unknown>; pending: boolean; error: unknown }; close: () => void;
}

/** More files for an issue: sent, read and shown first, each with its side and its reach, then put on it. */
export function AddFiles({ programme, ends, ownPartyIds, attach, close }: AddFilesProps) {
  const opened = useOpened<HTMLDivElement>();
  const uploads = useUploads(programme);
  const sending = useSending(uploads, ends, ownPartyIds);
  const ready = uploads.items.flatMap((i) => (i.state === 'done' && i.stored ? [i.stored.id] : []));
  const busy = uploads.items.some((i) => i.state === 'sending' || i.state === 'reading');
  const unsided = uploads.items.some((i) => i.state === 'done' && i.kind === 'snapshot' && !i.fields.side);
  return (
    <div ref={opened} className="panel mb-4">
      <DropZone small onFiles={sending.add}><p>Drop captures, snapshots or other files here.</p></DropZone>
      {uploads.items.length > 0 && <DroppedFiles uploads={uploads} link={ends} sending={sending} />}
      {unsided && <p className="notice waits">Say for each snapshot which side it describes; without that it takes no part in the comparison.</p>}
      <Cautions what="a new capture" />
      <Refused error={attach.error} />
      <div className="actions">
        <button type="button" className="button button-main" disabled={ready.length === 0 || busy || attach.pending} onClick={() => void attach.send(ready).then(close, () => undefined)}>Put {ready.length || ''} on the issue</button>
        <button type="button" className="button" onClick={close}>Not now</button>
      </div>
    </div>
  );
}
