import { useState } from 'react';
import type { PartyRef } from '#shared/api/common';
import type { Issue } from '#shared/api/issues';
import { Section } from '../../components/ui/section.js';
import { Refused } from '../../components/ui/refused.js';
import { useShareIssue } from './api/share-issue.js';

/** Who is on the issue; with whom it may yet be shared. */
export function Parties({ issue, others }: { issue: Issue; others: readonly PartyRef[] }) {
  const share = useShareIssue({ programme: issue.programme.code, number: issue.number });
  const [partyId, setParty] = useState('');
  return (
    <Section title="On the issue">
      <ul className="plain-list party-list">{issue.parties.map((p) => <li key={p.id}>{p.name}</li>)}</ul>
      {issue.actions.share && others.length > 0 && (
        <form className="actions mt-2 no-print" onSubmit={(e) => { e.preventDefault(); share.mutate(partyId, { onSuccess: () => setParty('') }); }}>
          <select className="input share-input" aria-label="Share with another party" required value={partyId} onChange={(e) => setParty(e.target.value)}>
            <option value="">share with …</option>
            {others.map((p) => <option key={p.id} value={p.id}>{p.name}</option>)}
          </select>
          <button type="submit" className="button" disabled={!partyId || share.isPending}>Share</button>
        </form>
      )}
      <Refused error={share.error} />
    </Section>
  );
}
