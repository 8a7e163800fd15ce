import type { Issue } from '#shared/api/issues';
import { Refused } from '../../components/ui/refused.js';
import { When } from '../../components/ui/when.js';
import { calendarDate } from '../../lib/times.js';
import { useSignWaiver } from './api/sign-waiver.js';

/** A waiver stands only when both parties have signed it, and ends on its day. */
export function WaiverBlock({ issue, waiver }: { issue: Issue; waiver: NonNullable<Issue['waiver']> }) {
  const sign = useSignWaiver({ programme: issue.programme.code, number: issue.number });
  return (
    <div className="sheet waiver">
      <p><b>Waiver {waiver.inForce ? 'in force' : 'asked for'}</b>, until {calendarDate(waiver.endsOn)}. {waiver.reason}</p>
      <ul className="plain-list small">
        {waiver.signatures.map((s) => <li key={s.party.id}>Signed by {s.by} for {s.party.name}, <When at={s.at} as="full" /></li>)}
        {waiver.signatures.length < 2 && <li>{waiver.signatures.length === 0 ? 'Nobody has signed yet.' : 'The other party’s signature is missing.'}</li>}
      </ul>
      {waiver.actions.sign && <button type="button" className="button" disabled={sign.isPending} onClick={() => sign.mutate(waiver.id)}>Sign for my party</button>}
      <Refused error={sign.error} />
    </div>
  );
}
