import { useQuery } from '@tanstack/react-query';
import { Section } from '../../components/ui/section.js';
import { Unread } from '../../components/ui/unread.js';
import { counted } from '../../lib/units.js';
import type { IssueName } from '../../lib/issue-name.js';
import { listEntries } from './api/list-entries.js';
import { EntryView } from './entry.js';
import { WriteBox } from './write-box.js';

/** The talk on the issue, oldest first, each entry on its side's rail. */
export function Thread({ name }: { name: IssueName }) {
  const { data, error, refetch } = useQuery(listEntries(name));
  const items = data?.items ?? [];
  const own = items.filter((e) => e.reach === 'my-party').length;
  const aside = items.length === 0 ? 'no entry yet' : `${counted(items.length, 'entry', 'entries')}${own ? `, ${own} only for one party` : ''}`;
  return (
    <Section title="Thread" aside={data ? aside : undefined} className="thread">
      {!data && error && <Unread what="The thread" error={error} again={refetch} />}
      <ol className="plain-list">{items.map((e) => <EntryView key={e.id} entry={e} name={name} />)}</ol>
      {data?.actions.write && <WriteBox name={name} />}
    </Section>
  );
}
