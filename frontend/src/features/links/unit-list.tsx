import type { Unit } from '#shared/api/links';
import { dateOf } from '../../lib/times.js';

/** Units by party, with the builds that each has had. */
export function UnitList({ units }: { units: readonly Unit[] }) {
  return (
    <ul className="plain-list sheet unit-list">
      {units.map((u) => (
        <li key={u.id}>
          <p><b>{u.name}</b> <span className="small">{u.part}, {u.party.name}</span></p>
          <p className="small">{u.builds.length === 0 ? 'no build yet' : u.builds.map((b) => <span key={b.id} className="build"><span className="fig">{b.label}</span> {dateOf(b.addedAt)}{b.note && `, ${b.note}`}</span>)}</p>
        </li>
      ))}
    </ul>
  );
}
