import { useState } from 'react';
import type { Entry } from '#shared/api/thread';
import { Prose } from '../../components/ui/prose.js';
import { Refused } from '../../components/ui/refused.js';
import { When } from '../../components/ui/when.js';
import type { IssueName } from '../../lib/issue-name.js';
import { fileSize } from '../../lib/units.js';
import { useWithdrawEntry } from './api/withdraw-entry.js';
import { EditBox } from './edit-box.js';
import { Versions } from './versions.js';

const STANDS = { a: 'side A', b: 'side B', lab: 'lab' } as const;

function Files({ files }: { files: Entry['files'] }) {
  return (
    <ul className="plain-list entry-files">
      {files.map((f) => <li key={f.id}><a className="fig" href={`/api/files/${f.id}/content`} download>{f.name}</a> <span className="small">{fileSize(f.size)}</span></li>)}
    </ul>
  );
}

/** One entry: who, for whom, when; its words; and what the reader may do with it. */
export function EntryView({ entry, name }: { entry: Entry; name: IssueName }) {
  const [mode, setMode] = useState<'read' | 'edit' | 'versions'>('read');
  const withdraw = useWithdrawEntry(name, entry.id);
  const { author } = entry;
  return (
    <li className={`entry on-${entry.standing}`}>
      <p className="entry-by">
        <b>{author.name}</b> <span className="small">{author.party?.name}<span className="hidden-text">, {STANDS[entry.standing]}</span></span> <span className="fig soft"><When at={entry.at} /></span>
      </p>
      {entry.withdrawnAt ? <p className="small">Withdrawn by its author, <When at={entry.withdrawnAt} />.</p>
        : mode === 'edit' ? <EditBox entry={entry} name={name} close={() => setMode('read')} /> : <Prose>{entry.body}</Prose>}
      {entry.files.length > 0 && <Files files={entry.files} />}
      <p className="entry-foot">
        {entry.reach === 'my-party' && <span className="only-for">only {author.party?.shortName ?? 'its party'}</span>}
        {entry.versions > 1 && !entry.withdrawnAt && <button type="button" className="text-button" aria-expanded={mode === 'versions'} onClick={() => setMode(mode === 'versions' ? 'read' : 'versions')}>edited, {entry.versions} versions</button>}
        {entry.actions.edit && mode !== 'edit' && <button type="button" className="text-button no-print" onClick={() => setMode('edit')}>Edit</button>}
        {entry.actions.withdraw && <button type="button" className="text-button no-print" disabled={withdraw.isPending} onClick={() => withdraw.mutate()}>Withdraw</button>}
      </p>
      {mode === 'versions' && <Versions name={name} entryId={entry.id} />}
      <Refused error={withdraw.error} />
    </li>
  );
}
