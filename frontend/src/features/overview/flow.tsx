import { scaleBand, scaleLinear } from 'd3-scale';
import { line } from 'd3-shape';
import type { Overview } from '#shared/api/overview';
import { Section } from '../../components/ui/section.js';
import { useWidth } from '../../components/plots/width.js';
import { calendarDate } from '../../lib/times.js';

const HEIGHT = 210;
const BOX = { left: 34, top: 22, bottom: HEIGHT - 34 };
const shortDay = (week: string): string => calendarDate(week).replace(/ \d{4}$/, '');

/** Filed and ended by week as bars, and what stood open at its end as a line; the table below says the same. */
export function Flow({ weeks }: { weeks: Overview['flow'] }) {
  const [frame, width] = useWidth(700);
  const right = width - 12;
  const x = scaleBand(weeks.map((w) => w.week), [BOX.left, right]).padding(0.3);
  const y = scaleLinear([0, Math.max(1, ...weeks.flatMap((w) => [w.filed, w.ended, w.open]))], [BOX.bottom, BOX.top]).nice(4);
  const half = x.bandwidth() / 2;
  const every = Math.ceil(weeks.length / Math.max(2, Math.floor(width / 70)));
  const open = line<Overview['flow'][number]>((w) => x(w.week)! + half, (w) => y(w.open))(weeks) ?? '';
  return (
    <Section title="Flow" aside={`the last ${weeks.length} weeks`}>
      <figure className="plot">
        <figcaption><b>Filed, ended and open by week</b><span className="small"><i className="key filed" /> filed <i className="key ended" /> ended <i className="key line" /> open at the week’s end</span></figcaption>
        <div ref={frame}>
          <svg width="100%" height={HEIGHT} viewBox={`0 0 ${width} ${HEIGHT}`} aria-hidden="true">
            {y.ticks(4).map((t) => <g key={t}><path d={`M${BOX.left} ${y(t)}H${right}`} stroke="var(--rule)" strokeWidth=".6" /><text x={BOX.left - 6} y={y(t) + 3.5} textAnchor="end">{t}</text></g>)}
            <text x="2" y="11" className="axis-title">Issues</text>
            {weeks.map((w, k) => (
              <g key={w.week}>
                <rect x={x(w.week)} width={half - 1} y={y(w.filed)} height={BOX.bottom - y(w.filed)} fill="var(--ink)" />
                <rect x={x(w.week)! + half + 0.5} width={half - 1} y={y(w.ended) + 0.5} height={Math.max(0, BOX.bottom - y(w.ended) - 0.5)} fill="none" stroke="var(--ink)" />
                {k % every === 0 && <text x={x(w.week)! + half} y={BOX.bottom + 15} textAnchor="middle">{shortDay(w.week)}</text>}
              </g>
            ))}
            <path d={`M${BOX.left} ${BOX.bottom}H${right}`} stroke="var(--rule-strong)" />
            <path d={open} fill="none" stroke="var(--ink)" strokeWidth="1.6" />
            {weeks.map((w) => <circle key={w.week} cx={x(w.week)! + half} cy={y(w.open)} r="3" fill="var(--sheet)" stroke="var(--ink)" strokeWidth="1.4" />)}
            <text x={right} y={BOX.bottom + 29} textAnchor="end" className="axis-title">Week from</text>
          </svg>
        </div>
        <details className="small"><summary>The figures</summary>
          <table className="data tight"><thead><tr><th scope="col">Week from</th><th scope="col" className="n">Filed</th><th scope="col" className="n">Ended</th><th scope="col" className="n">Open</th></tr></thead>
            <tbody>{weeks.map((w) => <tr key={w.week}><td>{calendarDate(w.week)}</td><td className="n fig">{w.filed}</td><td className="n fig">{w.ended}</td><td className="n fig">{w.open}</td></tr>)}</tbody></table>
        </details>
      </figure>
    </Section>
  );
}
