import type { Overview } from '#shared/api/overview';

const name = ({ fromDays, toDays }: { fromDays: number; toDays: number | null }): string => (toDays === null ? `${fromDays} days and more` : `${fromDays} to ${toDays} days`);

/** Open issues by age: solid for critical, hatched for major, open for minor, so that print tells them apart. */
export function AgeBars({ rows }: { rows: Overview['byAge'] }) {
  const most = Math.max(1, ...rows.map((r) => r.critical + r.major + r.minor));
  const width = (n: number): { width: string } => ({ width: `${(100 * n) / most}%` });
  return (
    <figure className="plot">
      <figcaption><b>Open issues by age</b><span className="small"><i className="key critical" /> critical <i className="key major" /> major <i className="key minor" /> minor</span></figcaption>
      <table className="bars">
        <caption className="hidden-text">Open issues by age and severity</caption>
        <thead className="hidden-text"><tr><th scope="col">Age</th><th scope="col">Issues</th></tr></thead>
        <tbody>
          {rows.map((r) => (
            <tr key={r.fromDays}>
              <th scope="row">{name(r)}</th>
              <td><span className="bar-run"><i className="critical" style={width(r.critical)} /><i className="major" style={width(r.major)} /><i className="minor" style={width(r.minor)} />
                <span className="fig">{r.critical + r.major + r.minor}<span className="hidden-text">: {r.critical} critical, {r.major} major, {r.minor} minor</span></span></span></td>
            </tr>
          ))}
        </tbody>
      </table>
    </figure>
  );
}
