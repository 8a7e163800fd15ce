import { Link } from 'react-router-dom';
import type { Overview } from '#shared/api/overview';
import { SEVERITIES, STAGE_LABELS, STAGE_LINE, type Severity, type Stage } from '#shared/vocabulary';

const OPEN_STAGES = STAGE_LINE.filter((s) => s !== 'settled');

/** Open issues by severity and stage; each figure leads to its rows. The bar behind it is the same figure again. */
export function SeverityByStage({ cells }: { cells: Overview['bySeverityAndStage'] }) {
  const count = (severity: Severity, stage: Stage): number => cells.find((c) => c.severity === severity && c.stage === stage)?.count ?? 0;
  const most = Math.max(1, ...cells.filter((c) => (OPEN_STAGES as readonly Stage[]).includes(c.stage)).map((c) => c.count));
  return (
    <div className="sheet scroller" tabIndex={0} role="group" aria-label="Open issues by severity and stage">
      <table className="data matrix">
        <thead><tr><th scope="col">Severity</th>{OPEN_STAGES.map((s) => <th key={s} scope="col" className="n">{STAGE_LABELS[s]}</th>)}<th scope="col" className="n">All</th></tr></thead>
        <tbody>
          {SEVERITIES.map((severity) => (
            <tr key={severity}>
              <th scope="row" className={severity === 'critical' ? 'hot' : ''}>{severity}</th>
              {OPEN_STAGES.map((stage) => {
                const n = count(severity, stage);
                return (
                  <td key={stage} className="n fig"><span className="cell-bar" style={{ width: `${(70 * n) / most}%` }} />
                    {n ? <Link className="bare-link" to={`/register?severities=${severity}&stages=${stage}`}>{n}<span className="hidden-text"> {severity} issues, {STAGE_LABELS[stage]}</span></Link> : <span className="soft">0</span>}
                  </td>
                );
              })}
              <td className="n fig"><b>{OPEN_STAGES.reduce((sum, stage) => sum + count(severity, stage), 0)}</b></td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
