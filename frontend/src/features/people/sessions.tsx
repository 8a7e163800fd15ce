import { useQuery } from '@tanstack/react-query';
import { Refused } from '../../components/ui/refused.js';
import { Section } from '../../components/ui/section.js';
import { When } from '../../components/ui/when.js';
import { browserName } from '../../lib/browsers.js';
import { useEndMySession } from './api/end-my-session.js';
import { listMySessions } from './api/list-my-sessions.js';

/** Where the reader is signed in; any of them can be ended from here. */
export function Sessions() {
  const { data, error } = useQuery(listMySessions());
  const end = useEndMySession();
  return (
    <Section title="Sessions">
      <Refused error={error ?? end.error} />
      {data && (
        <ul className="plain-list sheet unit-list">
          {data.items.map((s) => (
            <li key={s.id} className="session-row">
              <span><span title={s.agent}>{browserName(s.agent)}</span> {s.current && <b>this one</b>}<span className="small block">signed in <When at={s.createdAt} as="full" /> · last seen <When at={s.lastSeenAt} as="full" /></span></span>
              {!s.current && <button type="button" className="text-button" disabled={end.isPending} onClick={() => end.mutate(s.id)}>End<span className="hidden-text"> the session on {browserName(s.agent)}</span></button>}
            </li>
          ))}
        </ul>
      )}
    </Section>
  );
}
