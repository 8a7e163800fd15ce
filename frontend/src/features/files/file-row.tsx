import { useState } from 'react';
import type { StoredFile } from '#shared/api/files';
import type { Reach } from '#shared/vocabulary';
import { SideMark } from '../../components/marks/side-mark.js';
import { Refused } from '../../components/ui/refused.js';
import { When } from '../../components/ui/when.js';
import { CaptureRead } from '../../components/uploads/capture-read.js';
import { SnapshotRead } from '../../components/uploads/snapshot-read.js';
import { fileSize } from '../../lib/units.js';
import { useChangeFile } from './api/change-file.js';
import { downloadAddress } from './api/download.js';
import { useWithdrawFile } from './api/withdraw-file.js';

export const REACH_LABELS: Record<Reach, string> = { everyone: 'everyone on the issue', 'my-party': 'its owner only', 'compare-only': 'compare only' };
const NARROW_LABELS: Record<Reach, string> = { everyone: 'Show to everyone on the issue', 'my-party': 'Keep to its owner', 'compare-only': 'Make compare only' };

function Tombstone({ file }: { file: StoredFile }) {
  return <li className="file-row"><div className="soft"><s className="fig">{file.name}</s> <span className="small">{file.owner.name} · withdrawn <When at={file.withdrawnAt!} as="full" />; its bytes and what was read from it are gone</span></div></li>;
}

/** One file: what it is, whom it reaches, and what the reader may do with it. */
export function FileRow({ file }: { file: StoredFile }) {
  const [open, setOpen] = useState(false);
  const [sure, setSure] = useState(false);
  const narrow = useChangeFile(file.id);
  const withdraw = useWithdrawFile(file.id);
  if (file.withdrawnAt) return <Tombstone file={file} />;
  const readable = file.capture !== null || file.snapshot !== null;
  return (
    <li className="file-row">
      <div>
        {file.side ? <SideMark side={file.side}><b className="fig">{file.name}</b></SideMark> : <b className="fig">{file.name}</b>}{' '}
        <span className="small">{file.kind} · {fileSize(file.size)} · {file.owner.name} · {REACH_LABELS[file.reach]} · {file.uploadedBy}, <When at={file.uploadedAt} /></span>
      </div>
      <div className="actions no-print">
        {readable && <button type="button" className="text-button" aria-expanded={open} onClick={() => setOpen(!open)}>{open ? 'Hide what was read' : 'What was read'}<span className="hidden-text"> from {file.name}</span></button>}
        {file.actions.download && <a className="text-button" href={downloadAddress(file.id)} download>Download<span className="hidden-text"> {file.name}</span></a>}
        {file.actions.narrow.map((reach) => <button key={reach} type="button" className="text-button" disabled={narrow.isPending} onClick={() => narrow.mutate(reach)}>{NARROW_LABELS[reach]}<span className="hidden-text">: {file.name}</span></button>)}
        {file.actions.withdraw && !sure && <button type="button" className="text-button" onClick={() => setSure(true)}>Withdraw<span className="hidden-text"> {file.name}</span></button>}
      </div>
      {sure && (
        <div className="notice waits file-wide">
          <p>The bytes and everything read from them go; a mark stays, and decodes that used the file say so. This cannot be undone.</p>
          <div className="actions mt-2"><button type="button" className="button" disabled={withdraw.isPending} onClick={() => withdraw.mutate()}>Withdraw {file.name}</button><button type="button" className="text-button" onClick={() => setSure(false)}>Keep it</button></div>
        </div>
      )}
      {file.unreadable && <p className="notice waits file-wide">{file.unreadable.message}</p>}
      <Refused error={narrow.error ?? withdraw.error} />
      {open && <div className="file-wide">{file.capture && <CaptureRead reading={file.capture} />}{file.snapshot && <SnapshotRead reading={file.snapshot} />}</div>}
    </li>
  );
}
