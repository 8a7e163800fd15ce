import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { useParams } from 'react-router-dom';
import type { Issue } from '#shared/api/issues';
import { useTitle } from '../components/ui/title.js';
import { CorrectForm } from '../features/issues/correct-form.js';
import { History } from '../features/issues/history.js';
import { IssueHead } from '../features/issues/issue-head.js';
import { NextMove } from '../features/issues/next-move.js';
import { Particulars } from '../features/issues/particulars.js';
import { Parties } from '../features/issues/parties.js';
import { Retests } from '../features/issues/retests.js';
import { SeverityForm } from '../features/issues/severity-form.js';
import { StageMoves } from '../features/issues/stage-moves.js';
import { readIssue } from '../features/issues/api/read-issue.js';
import { useLookAtIssue } from '../features/issues/api/look-at-issue.js';
import { Thread } from '../features/threads/thread.js';
import { readProgramme } from '../features/programmes/api/read-programme.js';
import { statusOf } from '../lib/refusal.js';
import { IssueDecode } from './issue-decode.js';
import { IssueFiles } from './issue-files.js';

/** One look is noted each time the page is opened or what it shows has changed. */
function useNotedLook(issue: Issue): void {
  const look = useLookAtIssue({ programme: issue.programme.code, number: issue.number });
  const { mutate } = look;
  const noted = useRef('');
  const state = `${issue.id} ${issue.version}`;
  useEffect(() => {
    if (noted.current === state) return;
    noted.current = state;
    mutate();
  }, [mutate, state]);
}

/** The issue: what is wrong, whose move it is, what the air shows, and what was said. */
export function IssuePage() {
  const { programme = '', number = '' } = useParams();
  return <OpenIssue key={`${programme}/${number}`} programme={programme} number={number} />;
}

function OpenIssue(name: { programme: string; number: string }) {
  const { data: issue, error } = useSuspenseQuery(readIssue(name));
  // The issue may be closed to the reader while the page is open; what was read before must not stay.
  if (statusOf(error) === 404) throw error;
  const { data: programme } = useQuery(readProgramme(issue.programme.code));
  const [changing, change] = useState(false);
  useTitle(`${issue.programme.code}/${issue.number} ${issue.title}`);
  useNotedLook(issue);
  const { edit, changeSeverity } = issue.actions;
  const onIssue = new Set(issue.parties.map((p) => p.id));
  const others = programme?.parties.filter((p) => !onIssue.has(p.id)) ?? [];
  return (
    <main id="main" className="page issue-page" tabIndex={-1}>
      <div className="issue-top">
        <IssueHead issue={issue} change={(edit || changeSeverity) && !changing ? { words: edit ? 'Correct the issue' : 'Change the severity', open: () => change(true) } : null} />
        <NextMove issue={issue} parties={issue.parties} />
      </div>
      {changing && edit && <CorrectForm issue={issue} close={() => change(false)} />}
      {changing && !edit && changeSeverity && <SeverityForm issue={issue} close={() => change(false)} />}
      <StageMoves issue={issue} parties={issue.parties} formPlaces={{ retests: 'retests' }} />
      <div className="issue-columns">
        <div className="issue-main">
          <IssueDecode issue={issue} between={<Particulars issue={issue} />} />
          <Retests issue={issue} id="retests" />
          <IssueFiles issue={issue} />
        </div>
        <aside aria-label="Thread and people">
          <Thread name={name} />
          <Parties issue={issue} others={others} />
          <History name={name} />
        </aside>
      </div>
    </main>
  );
}
