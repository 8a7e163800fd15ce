import type { Issue } from '#shared/api/issues';
import { Refused } from '../../components/ui/refused.js';
import { When } from '../../components/ui/when.js';
import { calendarDate } from '../../lib/times.js';
import { useSignWaiver } from './api/sign-waiver.js';

/** Whose signature the waiver still lacks, in a sentence. */
export function unsignedBy({ a, b, waiver }: Issue): string {
  const signed = new Set(waiver?.signatures.map((s) => s.party.id));
  const lacking = [...new Map([a.party, b.party].map((p) => [p.id, p.name])).entries()].filter(([id]) => !signed.has(id)).map(([, name]) => name);
  return lacking.length === 0 ? '' : `${lacking.join(' and ')} ${lacking.length === 1 ? 'has' : 'have'} not signed yet.`;
}

/** A waiver stands only when both parties have signed it, and ends on its day. */
export function WaiverBlock({ issue, waiver }: { issue: Issue; waiver: NonNullable<Issue['waiver']> }) {
  const sign = useSignWaiver({ programme: issue.programme.code, number: issue.number });
  return (
    <div className="sheet waiver">
      <p><b>Waiver {waiver.inForce ? 'in force' : waiver.pending ? 'asked for' : 'ended'}</b>, until {calendarDate(waiver.endsOn)}. {waiver.reason}</p>
      <ul className="plain-list small">
        {waiver.signatures.map((s) => <li key={s.party.id}>Signed by {s.by} for {s.party.name}, <When at={s.at} as="full" /></li>)}
        {waiver.pending && <li>{unsignedBy(issue)}</li>}
      </ul>
      {waiver.actions.sign && <button type="button" className="button" disabled={sign.isPending} onClick={() => sign.mutate(waiver.id)}>Sign for my party</button>}
      <Refused error={sign.error} />
    </div>
  );
}
