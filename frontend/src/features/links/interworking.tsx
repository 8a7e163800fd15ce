import { Link as To } from 'react-router-dom';
import type { LinkDetail } from '#shared/api/links';
import { addressOf } from '../../lib/issue-name.js';

type Standing = LinkDetail['interworking'][number]['standing'];

/** A small tie for each standing, so that the table reads without colour. */
function StandingMark({ standing }: { standing: Standing }) {
  return (
    <svg width="34" height="14" viewBox="0 0 34 14" aria-hidden="true">
      <rect x="1" width="3" height="14" fill="var(--rail-a)" /><path d="M29.4 0v14M32.6 0v14" stroke="var(--rail-b)" strokeWidth="1.5" />
      {standing === 'works' && <path d="M4 7h25" stroke="var(--air)" strokeWidth="2" />}
      {standing === 'works with waiver' && <path d="M4 7h25" stroke="var(--waits)" strokeWidth="2" strokeDasharray="5 3" />}
      {standing === 'fails' && <><path d="M4 7h10" stroke="var(--air)" strokeWidth="2" /><path d="M28.6 9.6l-8-3" stroke="var(--broken)" strokeWidth="2.4" /></>}
    </svg>
  );
}

/** What works on the link, capability by capability, each with its builds and its evidence. */
export function Interworking({ rows }: { rows: LinkDetail['interworking'] }) {
  return (
    <div className="sheet scroller" tabIndex={0} role="group" aria-label="Interworking">
      <table className="data">
        <thead><tr><th scope="col">Capability</th><th scope="col">Standing</th><th scope="col">Build A</th><th scope="col">Build B</th><th scope="col">Evidence</th></tr></thead>
        <tbody>
          {rows.map((r) => (
            <tr key={r.name}>
              <td>{r.name}</td><td className="nowrap"><StandingMark standing={r.standing} /> <span className={r.standing === 'fails' ? 'hot' : r.standing === 'not tried' ? 'soft' : ''}>{r.standing}</span></td>
              <td className="fig">{r.buildA ?? ''}</td><td className="fig">{r.buildB ?? ''}</td>
              <td>{r.issue && <To className="bare-link" to={addressOf(r.issue)}><span className="fig soft">{r.issue.programme}/{r.issue.number}</span> {r.issue.title}</To>}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
