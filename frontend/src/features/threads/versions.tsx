import { useQuery } from '@tanstack/react-query';
import { Prose } from '../../components/ui/prose.js';
import { Refused } from '../../components/ui/refused.js';
import { When } from '../../components/ui/when.js';
import type { IssueName } from '../../lib/issue-name.js';
import { listEntryVersions } from './api/list-entry-versions.js';

export function Versions({ name, entryId }: { name: IssueName; entryId: string }) {
  const { data, error } = useQuery(listEntryVersions(name, entryId));
  return (
    <div className="versions">
      <Refused error={error} />
      {data?.items.map((v) => <div key={v.at}><p className="fig soft"><When at={v.at} as="full" /></p><Prose>{v.body}</Prose></div>)}
    </div>
  );
}
