import type { FileKind, Reach, Side } from '#shared/vocabulary';
import { CaptureRead } from './capture-read.js';
import { LabelForm } from './label-form.js';
import { SnapshotRead } from './snapshot-read.js';
import { UploadLine } from './upload-line.js';
import { isRaw, isWav, KIND_LABELS } from '../../lib/uploads/kinds.js';
import type { UploadItem } from '../../lib/uploads/queue.js';
import type { Uploads } from '../../lib/uploads/use-uploads.js';
import { usualReach, type Ends, type Sending } from './sending.js';

interface FilesProps { uploads: Uploads; link: Ends | null; sending: Sending }

const KINDS = Object.entries(KIND_LABELS) as [FileKind, string][];

/** How the file is taken: what it is, whose it is, and whom it reaches. A change sends it again. */
function Taken({ item, link, sending }: { item: UploadItem; link: Ends | null; sending: Sending }) {
  const { side, reach } = item.fields;
  const sided = item.kind === 'snapshot' || item.kind === 'glossary';
  const name = item.name;
  return (
    <div className="taken">
      <label>Taken as <select className="input" value={item.kind} onChange={(e) => sending.take(item, { kind: e.target.value as FileKind })}>
        {KINDS.map(([kind, label]) => <option key={kind} value={kind}>{label}</option>)}
      </select><span className="hidden-text"> {name}</span></label>
      {sided && (
        <label>of <select className="input" value={side ?? ''} onChange={(e) => sending.take(item, { side: (e.target.value || undefined) as Side | undefined })}>
          <option value="">which side?</option>
          <option value="a">side A{link ? `, ${link.a.party.name}` : ''}</option>
          <option value="b">side B{link ? `, ${link.b.party.name}` : ''}</option>
        </select><span className="hidden-text"> {name}</span></label>
      )}
      <label>reaches <select className="input" value={reach ?? usualReach(item.kind)} onChange={(e) => sending.take(item, { reach: e.target.value as Reach })}>
        <option value="everyone">everyone on the issue</option>
        {sided && <option value="compare-only">compare only</option>}
        {sending.ownedByReader(item) && <option value="my-party">my party only</option>}
      </select><span className="hidden-text"> {name}</span></label>
    </div>
  );
}

function DroppedFile({ item, uploads, link, sending }: FilesProps & { item: UploadItem }) {
  const { stored } = item;
  const labelled = item.kind === 'capture' && (isRaw(item.name) || isWav(item.name));
  const askLabels = item.state === 'lacks-labels' || (labelled && item.state === 'done' && (stored?.unreadable !== null || stored?.capture?.facts.centreFrequencyHz === null));
  return (
    <li className="sheet dropped">
      <UploadLine item={item} uploads={uploads} />
      {item.state === 'done' && <Taken item={item} link={link} sending={sending} />}
      {askLabels && <LabelForm item={item} uploads={uploads} raw={isRaw(item.name)} />}
      {stored?.unreadable && <p className="notice broken">{stored.unreadable.message} The file is kept all the same.</p>}
      {stored?.capture && <CaptureRead reading={stored.capture} />}
      {stored?.snapshot && <SnapshotRead reading={stored.snapshot} />}
    </li>
  );
}

/** Every file dropped so far, with what was read from it. */
export function DroppedFiles({ uploads, link, sending }: FilesProps) {
  return <ul className="plain-list dropped-list">{uploads.items.map((item) => <DroppedFile key={item.key} item={item} uploads={uploads} link={link} sending={sending} />)}</ul>;
}
