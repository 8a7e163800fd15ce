import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Section } from '../../components/ui/section.js';
import { SideMark } from '../../components/marks/side-mark.js';
import { Unread } from '../../components/ui/unread.js';
import { When } from '../../components/ui/when.js';
import type { IssueName } from '../../lib/issue-name.js';
import { readHistory } from './api/read-history.js';

const FIRST = 8;

/** Everything that happened to the issue within the reader's reach, newest first. */
export function History({ name }: { name: IssueName }) {
  const { data, error, refetch } = useQuery(readHistory(name));
  const [all, showAll] = useState(false);
  if (!data && error) return <Section title="History"><Unread what="The history" error={error} again={refetch} /></Section>;
  if (!data || data.items.length === 0) return null;
  const newest = data.items.toSorted((x, y) => y.at.localeCompare(x.at));
  // One more takes no more room than the button that would show it.
  const folds = newest.length > FIRST + 1;
  return (
    <Section title="History" aside={`${newest.length} entries`}>
      <ol className="plain-list history">
        {newest.map((item, k) => (
          <li key={item.id} className={folds && !all && k >= FIRST ? 'folded' : ''}>
            <span className="fig soft"><When at={item.at} /></span>
            <span>{item.side ? <SideMark side={item.side}>{item.person ?? item.party}</SideMark> : <b>{item.person ?? 'Crosstie'}</b>}{item.person && item.party && <span className="soft"> {item.party}</span>} {item.text}</span>
          </li>
        ))}
      </ol>
      {folds && <button type="button" className="text-button no-print" onClick={() => showAll(!all)}>{all ? 'Show fewer' : `Show all ${newest.length}`}</button>}
    </Section>
  );
}
