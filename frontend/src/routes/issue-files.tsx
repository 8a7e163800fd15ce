import { useState } from 'react';
import type { Issue } from '#shared/api/issues';
import { usePartyIds } from '../app/me.js';
import { AddFiles } from '../features/files/add-files.js';
import { FileList } from '../features/files/file-list.js';
import { useAttachFiles } from '../features/issues/api/attach-files.js';

/** The issue's files, and the place to add more. */
export function IssueFiles({ issue }: { issue: Issue }) {
  const [adding, add] = useState(false);
  const attach = useAttachFiles({ programme: issue.programme.code, number: issue.number });
  const ownPartyIds = usePartyIds(issue.programme.code);
  const form = adding && (
    <AddFiles programme={issue.programme.code} ends={issue} ownPartyIds={ownPartyIds}
      attach={{ send: attach.mutateAsync, pending: attach.isPending, error: attach.error }} close={() => add(false)} />
  );
  const end = issue.actions.addFiles && !adding ? <button type="button" className="text-button" onClick={() => add(true)}>Add files</button> : null;
  return <FileList files={issue.files} adding={form} end={end} />;
}
