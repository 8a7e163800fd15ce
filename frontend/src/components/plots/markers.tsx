import type { Curve } from '#shared/decode';
import { SideMark } from '../marks/side-mark.js';
import type { Box } from './axes.js';
import type { Trace } from './line-plot.js';

type Marker = NonNullable<Curve['markers']>[number];

/** Places named on the x axis: a solid line for side A, a double one for B, a dotted one for the air. */
export function Markers({ markers, x, box }: { markers: readonly Marker[]; x: (value: number) => number; box: Box }) {
  return (
    <g>
      {markers.map((m) => {
        const at = x(m.x);
        const run = `V${box.bottom}`;
        if (m.side === 'a') return <path key={m.label} d={`M${at} ${box.top}${run}`} stroke="var(--rail-a)" strokeWidth="2.4" />;
        if (m.side === 'b') return <path key={m.label} d={`M${at - 2} ${box.top}${run}M${at + 2} ${box.top}${run}`} stroke="var(--rail-b)" strokeWidth="1.4" />;
        return <path key={m.label} d={`M${at} ${box.top}${run}`} stroke="var(--ink-soft)" strokeWidth="1" strokeDasharray="1.5 2.5" />;
      })}
    </g>
  );
}

/** What the marked places and the curves are, in words under the plot. */
export function MarkerLegend({ traces, markers }: { traces: readonly Trace[]; markers: readonly Marker[] }) {
  const labelled = traces.filter((t) => t.label && t.side && t.side !== 'air');
  if (labelled.length + markers.length === 0) return null;
  return (
    <ul className="plot-legend plain-list">
      {labelled.map((t) => <li key={t.label}><SideMark side={t.side as 'a' | 'b'} quiet>{t.label}</SideMark></li>)}
      {markers.map((m) => <li key={m.label}>{m.side === 'a' || m.side === 'b' ? <SideMark side={m.side} quiet>{m.label}</SideMark> : <span className="air-key">{m.label}</span>}</li>)}
    </ul>
  );
}
