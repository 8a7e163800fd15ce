import type { Overview } from '#shared/api/overview';
import { SideMark } from '../../components/marks/side-mark.js';
import { days } from '../../lib/times.js';

/** What blocks which pair of parties, and who has the next move on it. */
export function Pairs({ rows }: { rows: Overview['byPair'] }) {
  return (
    <div className="sheet scroller" tabIndex={0} role="group" aria-label="Open issues by pair of parties">
      <table className="data">
        <thead><tr><th scope="col">Pair</th><th scope="col" className="n">Open</th><th scope="col" className="n">Critical</th><th scope="col" className="n">Oldest</th><th scope="col">Next moves with</th></tr></thead>
        <tbody>
          {rows.map((r) => (
            <tr key={`${r.a.id} ${r.b.id}`}>
              <td className="nowrap"><span className="pair-names"><SideMark side="a">{r.a.shortName}</SideMark><SideMark side="b">{r.b.shortName}</SideMark></span></td>
              <td className="n fig">{r.open}</td><td className={`n fig ${r.critical ? 'hot' : ''}`}>{r.critical}</td><td className="n fig">{days(r.oldestDays)}</td>
              <td>{r.nextMoves.map((m) => `${m.party} ${m.count}`).join(', ')}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
