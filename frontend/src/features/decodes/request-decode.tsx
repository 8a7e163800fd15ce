import { useState, type FormEvent } from 'react';
import type { Issue } from '#shared/api/issues';
import type { StoredFile } from '#shared/api/files';
import type { Side } from '#shared/vocabulary';
import { Select, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { useRequestDecode } from './api/request-decode.js';

const stored = (issue: Issue): StoredFile[] => issue.files.filter((f): f is StoredFile => 'id' in f && f.withdrawnAt === null);
const options = (files: StoredFile[]): Option[] => files.map((f): Option => [f.id, f.side ? `${f.name} (side ${f.side.toUpperCase()})` : f.name]);

/** Asks for one more decode of files that lie on the issue. */
export function RequestDecode({ issue, close }: { issue: Issue; close: () => void }) {
  const change = useRequestDecode({ programme: issue.programme.code, number: issue.number });
  const files = stored(issue);
  const snapshots = files.filter((f) => f.kind === 'snapshot');
  const captures = files.filter((f) => f.kind === 'capture');
  const latest = (list: StoredFile[]): string => list.at(-1)?.id ?? '';
  const [captureFileId, setCapture] = useState(latest(captures));
  const [snapshotAFileId, setA] = useState(latest(snapshots.filter((f) => f.side === 'a')));
  const [snapshotBFileId, setB] = useState(latest(snapshots.filter((f) => f.side === 'b')));
  const [transmitter, setTransmitter] = useState<Side | ''>(issue.transmitter ?? '');
  const send = (e: FormEvent): void => {
    e.preventDefault();
    change.mutate({
      captureFileId: captureFileId || null, snapshotAFileId: snapshotAFileId || null, snapshotBFileId: snapshotBFileId || null, transmitter: transmitter || null,
    }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel" onSubmit={send} aria-label="Decode again">
      <div className="fields">
        <Select label="Capture" none="no capture" value={captureFileId} options={options(captures)} onChange={(e) => setCapture(e.target.value)} />
        <Select label="Snapshot of side A" none="as shared on the issue" value={snapshotAFileId} options={options(snapshots.filter((f) => f.side !== 'b'))} onChange={(e) => setA(e.target.value)} />
        <Select label="Snapshot of side B" none="as shared on the issue" value={snapshotBFileId} options={options(snapshots.filter((f) => f.side !== 'a'))} onChange={(e) => setB(e.target.value)} />
        <Select label="Who transmits in it" none="not known" value={transmitter} options={[['a', `side A, ${issue.a.party.name}`], ['b', `side B, ${issue.b.party.name}`]]} onChange={(e) => setTransmitter(e.target.value as Side)} />
      </div>
      <Refused error={change.error} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending}>Decode</button>
        <button type="button" className="button" onClick={close}>Not now</button>
      </div>
    </OpenedForm>
  );
}
