import { useState, type FormEvent, type KeyboardEvent } from 'react';
import { Prose } from '../../components/ui/prose.js';
import { Radios } from '../../components/ui/radios.js';
import { Refused } from '../../components/ui/refused.js';
import { DropZone } from '../../components/uploads/drop-zone.js';
import { UploadLine } from '../../components/uploads/upload-line.js';
import type { IssueName } from '../../lib/issue-name.js';
import { useUploads } from '../../lib/uploads/use-uploads.js';
import { useWriteEntry } from './api/write-entry.js';

/** Writes to everyone on the issue or to one's own party; the choice stands in sight, since it cannot be taken back. */
export function WriteBox({ name }: { name: IssueName }) {
  const write = useWriteEntry(name);
  const uploads = useUploads(name.programme, 'attachment');
  const [body, setBody] = useState('');
  const [reach, setReach] = useState<'everyone' | 'my-party'>('everyone');
  const [preview, setPreview] = useState(false);
  const [files, setFiles] = useState(false);
  const busy = uploads.items.some((i) => i.state === 'sending' || i.state === 'reading');

  /** Files go to the same readers as the words: a change of reach sends them again under the new one. */
  const reachChanged = (to: typeof reach): void => {
    setReach(to);
    for (const item of uploads.items) uploads.resend(item.key, { fields: { reach: to } });
  };
  const done = (): void => { setBody(''); setPreview(false); setFiles(false); for (const item of uploads.items) uploads.remove(item.key); };
  const submit = (): void => {
    const fileIds = uploads.items.flatMap((i) => (i.stored ? [i.stored.id] : []));
    write.mutate({ body, reach, fileIds }, { onSuccess: done });
  };
  const onKey = (e: KeyboardEvent): void => { if (e.key === 'Enter' && (e.ctrlKey || e.metaKey) && body.trim() && !busy) submit(); };
  return (
    <form className="write-box no-print" onSubmit={(e: FormEvent) => { e.preventDefault(); submit(); }}>
      {preview ? <div className="sheet preview"><Prose>{body || 'Nothing written yet.'}</Prose></div>
        : <textarea className="input" aria-label="Write an entry" required maxLength={50_000} value={body} onKeyDown={onKey} onChange={(e) => setBody(e.target.value)}
            placeholder={reach === 'everyone' ? 'Write to everyone on the issue …' : 'Write to your own party …'} />}
      {files && <DropZone small onFiles={(list) => uploads.add(list, () => ({ reach }))}><p>Drop files here.</p></DropZone>}
      {uploads.items.map((item) => <UploadLine key={item.key} item={item} uploads={uploads} />)}
      <Radios legend={<span className="hidden-text">Who reads it</span>} value={reach} options={[['everyone', 'everyone on the issue'], ['my-party', 'my party only']]} onChange={reachChanged} />
      <Refused error={write.error} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={write.isPending || busy || body.trim() === ''}>Write</button>
        <button type="button" className="text-button" aria-pressed={preview} onClick={() => setPreview(!preview)}>{preview ? 'Back to writing' : 'Preview'}</button>
        {!files && <button type="button" className="text-button" onClick={() => setFiles(true)}>Add files</button>}
        <span className="small">Markdown · Ctrl+Enter writes</span>
      </div>
    </form>
  );
}
