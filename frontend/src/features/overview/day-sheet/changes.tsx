import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { z } from 'zod';
import type { daySheet } from '#shared/api/overview';
import { addressOf } from '../../../lib/issue-name.js';
import { When } from '../../../components/ui/when.js';

type Change = z.infer<typeof daySheet>['changed'][number];

const NEWEST = 3;
const FIRST_ISSUES = 8;

/** What happened on the reader's issues since the last look, under each issue's own name. */
export function Changes({ items }: { items: readonly Change[] }) {
  const [all, showAll] = useState(false);
  const byIssue = new Map<string, Change[]>();
  for (const c of items) {
    const name = `${c.programme}/${c.number}`;
    byIssue.set(name, [...(byIssue.get(name) ?? []), c]);
  }
  const issues = [...byIssue];
  return (
    <>
    <ol className="plain-list changes">
      {(all ? issues : issues.slice(0, FIRST_ISSUES)).map(([name, changes]) => (
        <li key={name}>
          <p><span className="fig soft">{name}</span> <Link className="bare-link" to={addressOf(changes[0]!)}>{changes[0]!.title}</Link></p>
          <ul className="plain-list">
            {changes.slice(0, NEWEST).map((c) => <li key={`${c.at} ${c.text}`} className="small"><span className="fig"><When at={c.at} /></span> <b>{c.person ?? 'Crosstie'}</b> {c.text}</li>)}
            {changes.length > NEWEST && <li className="small">and {changes.length - NEWEST} earlier</li>}
          </ul>
        </li>
      ))}
    </ol>
    {issues.length > FIRST_ISSUES && <button type="button" className="text-button" onClick={() => showAll(!all)}>{all ? 'Show fewer' : `Show all ${issues.length} issues`}</button>}
    </>
  );
}
