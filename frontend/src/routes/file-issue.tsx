import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Link, useNavigate, useSearchParams } from 'react-router-dom';
import { useMayFile, useMe, usePartyIds } from '../app/me.js';
import { Cautions } from '../components/ui/cautions.js';
import { Refused } from '../components/ui/refused.js';
import { useTitle } from '../components/ui/title.js';
import { DropZone } from '../components/uploads/drop-zone.js';
import { DroppedFiles } from '../components/uploads/dropped-files.js';
import { useSending } from '../components/uploads/sending.js';
import { asIssue } from '../features/filing/as-issue.js';
import { storedOf } from '../features/filing/draft.js';
import { IssueForm } from '../features/filing/issue-form.js';
import { missingFrom } from '../features/filing/missing.js';
import { MissingList } from '../features/filing/missing-list.js';
import { useDraft } from '../features/filing/use-draft.js';
import { useFileIssue } from '../features/issues/api/file-issue.js';
import { listLinks } from '../features/links/api/list-links.js';
import { readProgramme } from '../features/programmes/api/read-programme.js';
import { addressOf } from '../lib/issue-name.js';
import { ROLE_LABELS } from '../lib/roles.js';
import { Refusal } from '../lib/refusal.js';
import { useUploads } from '../lib/uploads/use-uploads.js';
import { newKey } from '../lib/uploads/queue.js';

/** The page for those who file issues; for everyone else the reason why there is none. */
export function FileIssuePage() {
  const { programme } = useMe();
  const mayFile = useMayFile(programme?.code);
  useTitle('File an issue');
  return mayFile ? <Filing /> : <NotForYourRole />;
}

function NotForYourRole() {
  const { me, programme } = useMe();
  const role = me.memberships.find((m) => m.programme.code === programme?.code)?.role;
  return (
    <main id="main" className="page page-narrow" tabIndex={-1}>
      <h1>File an issue</h1>
      <p className="mt-3">Issues are filed by engineers. {programme && role ? `In ${programme.name} you are ${/^[aeiou]/.test(ROLE_LABELS[role]) ? 'an' : 'a'} ${ROLE_LABELS[role]}.` : 'You are in no programme yet.'} Ask an engineer of your party to file it, or the programme’s administrator to change your role.</p>
      <p className="mt-4"><Link to="/register">Go to the register</Link></p>
    </main>
  );
}

/** Files first: the form fills itself from them, and says what responders will still ask for. */
function Filing() {
  const { programme } = useMe();
  const code = programme?.code ?? '';
  const [search] = useSearchParams();
  const { data: links, error: unread } = useQuery(listLinks(code));
  const { data: people } = useQuery({ ...readProgramme(code), enabled: code !== '' });
  const uploads = useUploads(code);
  const files = storedOf(uploads.items);
  const { draft, link, filled, builds, set } = useDraft(files, links?.items ?? [], search.get('link'));
  const ownPartyIds = usePartyIds(code);
  const sending = useSending(uploads, link, ownPartyIds);
  const file = useFileIssue();
  const navigate = useNavigate();
  const [fileKey] = useState(newKey);

  const busy = uploads.items.some((i) => i.state === 'sending' || i.state === 'reading');
  const stuck = uploads.items.filter((i) => i.state === 'lacks-pair' || i.state === 'lacks-labels' || i.state === 'failed').length;
  const unsided = files.some((f) => f.kind === 'snapshot' && f.side === null);
  const send = (e: FormEvent): void => {
    e.preventDefault();
    file.mutate(asIssue(draft, files, fileKey), { onSuccess: (filed) => void navigate(addressOf(filed)) });
  };
  const lacks = missingFrom(draft, files, link);
  return (
    <main id="main" className="page filing" tabIndex={-1}>
      <h1>File an issue</h1>
      <section className="filing-files" aria-label="Files">
        <DropZone onFiles={sending.add}>
          <p className="drop-title">Drop the capture and both configuration snapshots here</p>
          <p className="small">I/Q as SigMF (both files), WAV or raw; snapshots as JSON, YAML, XML or key = value. Several at once. Most of the form fills itself from them.</p>
        </DropZone>
        <Cautions what="you take a capture" />
        <DroppedFiles uploads={uploads} link={link} sending={sending} />
      </section>
      <form className="filing-form" onSubmit={send}>
        <IssueForm draft={draft} set={set} links={links?.items ?? []} link={link} filled={filled} builds={builds} parties={people?.parties ?? []} ownPartyIds={ownPartyIds} refused={file.error instanceof Refusal ? file.error : null} />
        <Refused error={file.error ?? unread} />
        {unsided && <p className="notice waits">Say for each snapshot which side it describes; without that it takes no part in the comparison.</p>}
        {stuck > 0 && <p className="notice waits">{stuck === 1 ? 'One file is' : `${stuck} files are`} not here yet and will not be part of the issue.</p>}
        <div className="actions">
          <button type="submit" className="button button-main" disabled={busy || file.isPending || !draft.linkId || draft.severity === ''}>{busy ? 'Waiting for the files' : 'File the issue'}</button>
          <span className="small">{!draft.linkId ? 'Choose the link first.' : draft.severity === '' ? 'Choose a severity first.' : 'The decode starts at once; the two sides get a message.'}</span>
        </div>
      </form>
      <MissingList lacks={lacks} />
    </main>
  );
}
