import { useState, type FormEvent } from 'react';
import type { Entry } from '#shared/api/thread';
import { Refused } from '../../components/ui/refused.js';
import type { IssueName } from '../../lib/issue-name.js';
import { useChangeEntry } from './api/change-entry.js';

export function EditBox({ entry, name, close }: { entry: Entry; name: IssueName; close: () => void }) {
  const change = useChangeEntry(name, entry.id);
  const [body, setBody] = useState(entry.body);
  const send = (e: FormEvent): void => { e.preventDefault(); change.mutate(body, { onSuccess: close }); };
  return (
    <form onSubmit={send} className="write-box">
      <textarea className="input" aria-label="Edit the entry" autoFocus required value={body} onChange={(e) => setBody(e.target.value)} />
      <Refused error={change.error} />
      <div className="actions"><button type="submit" className="button" disabled={change.isPending}>Keep the new version</button><button type="button" className="text-button" onClick={close}>Leave as it was</button></div>
    </form>
  );
}
