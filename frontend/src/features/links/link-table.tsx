import { Link as To } from 'react-router-dom';
import type { Link } from '#shared/api/links';
import { SideMark } from '../../components/marks/side-mark.js';
import { dateOf } from '../../lib/times.js';
import { frequency } from '../../lib/units.js';

function End({ link, side }: { link: Link; side: 'a' | 'b' }) {
  const { party, unit, build } = link[side];
  return <SideMark side={side}><span>{party.shortName} <span className="soft">{unit.name}</span> {build && <span className="fig">{build.label}</span>}</span></SideMark>;
}

/** The programme's links, each with what stands open on it and the last pair that worked. */
export function LinkTable({ links }: { links: readonly Link[] }) {
  return (
    <div className="sheet scroller" tabIndex={0} role="group" aria-label="Links">
      <table className="data links-table">
        <thead><tr><th scope="col">Link</th><th scope="col">Side A</th><th scope="col">Side B</th><th scope="col">Interface</th><th scope="col" className="n">Centre</th><th scope="col" className="n">Open</th><th scope="col" className="n">Critical</th><th scope="col">Last pair that worked</th></tr></thead>
        <tbody>
          {links.map((l) => (
            <tr key={l.id}>
              <td><To to={`/links/${l.id}`}><b>{l.name}</b></To></td>
              <td className="nowrap"><End link={l} side="a" /></td><td className="nowrap"><End link={l} side="b" /></td>
              <td>{l.interface === 'wifi' ? 'Wi‑Fi' : l.interface}</td>
              <td className="n fig">{l.centreFrequencyHz === null ? '' : frequency(l.centreFrequencyHz)}</td>
              <td className="n fig"><To className="bare-link" to={`/register?link=${l.id}`}>{l.openIssues}<span className="hidden-text"> open issues on {l.name}</span></To></td>
              <td className="n fig">{l.criticalIssues ? <b>{l.criticalIssues}</b> : 0}</td>
              <td>{l.baseline ? <><span className="fig">{l.baseline.buildA}</span> with <span className="fig">{l.baseline.buildB}</span>, <span className="soft">{dateOf(l.baseline.at)}</span></> : <span className="soft">none yet</span>}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
