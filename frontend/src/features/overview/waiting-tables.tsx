import { Link } from 'react-router-dom';
import type { Overview } from '#shared/api/overview';
import { days } from '../../lib/times.js';
import { number } from '../../lib/units.js';

/** Who holds the next move, how many of them late, and for how long they have been waited for in all. */
export function WaitingByParty({ rows, programme }: { rows: Overview['waitingByParty']; programme: string }) {
  return (
    <div className="sheet scroller" tabIndex={0} role="group" aria-label="Next move by party">
      <table className="data">
        <thead><tr><th scope="col">Party</th><th scope="col" className="n">Next moves</th><th scope="col" className="n">Late</th><th scope="col" className="n">Waited in all</th><th scope="col">Longest</th></tr></thead>
        <tbody>
          {rows.map((r) => (
            <tr key={r.party.id}>
              <td>{r.party.name}</td>
              <td className="n fig"><Link className="bare-link" to={`/register?move=${r.party.id}`}>{r.holding}</Link></td>
              <td className={`n fig ${r.late ? 'late' : ''}`}>{r.late}</td><td className="n fig">{days(r.waitedDays)}</td>
              <td>{r.longest && <Link className="bare-link" to={`/issues/${programme}/${r.longest.number}`}><span className="fig">{days(r.longest.days)}</span> <span className="fig soft">{programme}/{r.longest.number}</span> {r.longest.title}</Link>}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

const CAUSES = { 'side-a': 'side A', 'side-b': 'side B', lab: 'the lab', 'rig-away': 'rig away' } as const;

/** Days waited on open issues, by what was waited for. */
export function WaitingByCause({ rows }: { rows: Overview['waitingByCause'] }) {
  const most = Math.max(1, ...rows.map((r) => r.days));
  return (
    <figure className="plot">
      <figcaption><b>Waiting time by cause</b><span className="small">days</span></figcaption>
      <table className="bars">
        <caption className="hidden-text">Waiting time by cause, days</caption>
        <tbody>{rows.map((r) => <tr key={r.cause}><th scope="row">{CAUSES[r.cause]}</th><td><span className="bar-run"><i className="waited" style={{ width: `${(100 * r.days) / most}%` }} /><span className="fig">{number(r.days, 0)} d</span></span></td></tr>)}</tbody>
      </table>
    </figure>
  );
}
