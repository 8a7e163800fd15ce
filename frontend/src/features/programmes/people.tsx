import { useState } from 'react';
import type { Programme } from '#shared/api/people';
import { ROLES, type Role } from '#shared/vocabulary';
import { Refused } from '../../components/ui/refused.js';
import { Section } from '../../components/ui/section.js';
import { ROLE_LABELS } from '../../lib/roles.js';
import { dateOf } from '../../lib/times.js';
import { counted } from '../../lib/units.js';
import { useChangeMembership } from './api/change-membership.js';

type Person = Programme['people'][number];

function RoleCell({ person, programme }: { person: Person; programme: Programme }) {
  const change = useChangeMembership(programme.code);
  const [leaving, leave] = useState(false);
  if (!programme.actions.changeRoles) return <td>{ROLE_LABELS[person.role]}</td>;
  return (
    <td>
      <div className="actions">
        <select className="input role-input" aria-label={`Role of ${person.person.name}`} value={person.role} disabled={change.isPending}
          onChange={(e) => change.mutate({ membershipId: person.membershipId, role: e.target.value as Role })}>
          {ROLES.map((role) => <option key={role} value={role}>{ROLE_LABELS[role]}</option>)}
        </select>
        {leaving
          ? <><button type="button" className="button" disabled={change.isPending} onClick={() => change.mutate({ membershipId: person.membershipId, leave: true })}>End it</button><button type="button" className="text-button" onClick={() => leave(false)}>Keep</button></>
          : <button type="button" className="text-button" onClick={() => leave(true)}>End membership<span className="hidden-text"> of {person.person.name}</span></button>}
      </div>
      <Refused error={change.error} />
    </td>
  );
}

/** Who is in, for which party and in which role; a membership that ends counts from the next request. */
export function PeopleTable({ programme }: { programme: Programme }) {
  return (
    <Section title="People" aside={counted(programme.people.length, 'person', 'people')}>
      <div className="sheet scroller" tabIndex={0} role="group" aria-label="People">
        <table className="data">
          <thead><tr><th scope="col">Name</th><th scope="col">Party</th><th scope="col">Address</th><th scope="col">Since</th><th scope="col">Role</th></tr></thead>
          <tbody>
            {programme.people.map((p) => (
              <tr key={p.membershipId}><td><b>{p.person.name}</b></td><td>{p.person.party?.name}</td><td>{p.email}</td><td className="nowrap">{dateOf(p.joinedAt)}</td><RoleCell person={p} programme={programme} /></tr>
            ))}
          </tbody>
        </table>
      </div>
    </Section>
  );
}
