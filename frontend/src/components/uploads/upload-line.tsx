import { fileSize } from '../../lib/units.js';
import type { UploadItem } from '../../lib/uploads/queue.js';
import type { Uploads } from '../../lib/uploads/use-uploads.js';
import { Progress } from '../ui/progress.js';

const WORDS: Record<UploadItem['state'], string> = {
  'lacks-pair': 'waits for its other half', 'lacks-labels': 'waits for its format and rate', sending: 'sending', reading: 'being read',
  done: 'read', failed: 'refused', cancelled: 'cancelled',
};

function missingHalf(item: UploadItem): string {
  const name = item.files[0]!.name;
  return name.endsWith('meta') ? name.replace(/meta$/, 'data') : name.replace(/data$/, 'meta');
}

/** One upload: how far its bytes are, and what can be done about it. */
export function UploadLine({ item, uploads }: { item: UploadItem; uploads: Uploads }) {
  const busy = item.state === 'sending' || item.state === 'reading';
  return (
    <div className="upload-line">
      <div className="upload-head">
        <span className="fig upload-name">{item.files.length === 2 ? item.name.replace('-meta', '') : item.files[0]!.name}</span>
        <span className="small">
          {busy ? `${fileSize(item.sentBytes)} of ` : ''}{fileSize(item.totalBytes)} · <span role="status">{WORDS[item.state]}</span>
        </span>
        <span className="actions upload-actions">
          {busy && <button type="button" className="text-button" onClick={() => uploads.cancel(item.key)}>Cancel<span className="hidden-text"> {item.name}</span></button>}
          {(item.state === 'failed' || item.state === 'cancelled') && <button type="button" className="text-button" onClick={() => uploads.resend(item.key)}>Send again<span className="hidden-text"> {item.name}</span></button>}
          {!busy && <button type="button" className="text-button" onClick={() => uploads.remove(item.key)}>Leave out<span className="hidden-text"> {item.name}</span></button>}
        </span>
      </div>
      {busy && <Progress part={item.totalBytes ? item.sentBytes / item.totalBytes : 0} label={`${item.name}, sent`} />}
      {item.state === 'lacks-pair' && <p className="notice waits">A SigMF recording is two files. Add <span className="fig">{missingHalf(item)}</span> as well.</p>}
      {item.error && <p className="notice broken" role="alert">{item.error}</p>}
    </div>
  );
}
