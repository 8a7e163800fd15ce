import { bisectCenter, extent } from 'd3-array';
import { scaleLinear } from 'd3-scale';
import { line } from 'd3-shape';
import { useMemo, useState, type KeyboardEvent, type PointerEvent } from 'react';
import type { Curve } from '#shared/decode';
import { number } from '../../lib/units.js';
import { Axes, type Box } from './axes.js';
import { axisTitle, axisUnit } from './axis-unit.js';
import { Markers, MarkerLegend } from './markers.js';
import { useWidth } from './width.js';

export interface Trace { curve: Curve; side?: 'a' | 'b' | 'air'; label?: string }
interface LinePlotProps { title: string; traces: readonly Trace[]; height?: number; zeroBased?: boolean; xTicks?: number }

const MARGIN = { left: 44, right: 18, top: 24, bottom: 36 };

function useScales(traces: readonly Trace[], box: Box, zeroBased: boolean) {
  return useMemo(() => {
    const xs = traces.flatMap((t) => [...extent(t.curve.x) as [number, number], ...(t.curve.markers ?? []).map((m) => m.x)]);
    const ys = traces.flatMap((t) => extent(t.curve.y) as [number, number]);
    const first = traces[0]!.curve;
    const xUnit = axisUnit(first.xUnit, Math.max(...xs.map(Math.abs)));
    const x = scaleLinear([Math.min(...xs) * xUnit.factor, Math.max(...xs) * xUnit.factor], [box.left, box.right]);
    const y = scaleLinear([zeroBased ? Math.min(0, ...ys) : Math.min(...ys), Math.max(...ys)], [box.bottom, box.top]).nice(4);
    return { x, y, xUnit };
  }, [traces, box, zeroBased]);
}

/** Curves over one pair of axes. The cursor follows the pointer or the arrow keys and reads every curve out. */
export function LinePlot({ title, traces, height = 226, zeroBased = false, xTicks }: LinePlotProps) {
  const [frame, width] = useWidth(400);
  const [at, setAt] = useState<number | null>(null);
  const box = useMemo<Box>(() => ({ left: MARGIN.left, right: width - MARGIN.right, top: MARGIN.top, bottom: height - MARGIN.bottom }), [width, height]);
  const { x, y, xUnit } = useScales(traces, box, zeroBased);
  const first = traces[0]!.curve;
  const last = first.x.length - 1;

  const readout = (index: number): string => {
    const position = first.x[index]! * xUnit.factor;
    const values = traces.map((t) => `${t.label ? `${t.label} ` : ''}${number(t.curve.y[Math.min(index, t.curve.y.length - 1)]!, 2)}${t.curve.yUnit ? ` ${t.curve.yUnit}` : ''}`);
    return `${number(position, 3)}${xUnit.unit ? ` ${xUnit.unit}` : ''}: ${values.join(', ')}`;
  };
  const onPointer = (e: PointerEvent<HTMLDivElement>): void => {
    const offset = e.clientX - e.currentTarget.getBoundingClientRect().left;
    setAt(bisectCenter(first.x, x.invert(offset) / xUnit.factor));
  };
  const onKey = (e: KeyboardEvent): void => {
    const step = { ArrowRight: 1, ArrowLeft: -1, PageUp: 20, PageDown: -20, Home: -last, End: last }[e.key];
    if (step === undefined) return;
    e.preventDefault();
    setAt((k) => Math.min(last, Math.max(0, (k ?? Math.floor(last / 2)) + step)));
  };

  return (
    <figure className="plot" aria-label={title}>
      <figcaption><b>{title}</b><span className="readout fig">{at === null ? '' : readout(at)}</span></figcaption>
      <div ref={frame} className="plot-frame" role="slider" tabIndex={0} aria-label={`${title}, cursor`} aria-valuemin={0} aria-valuemax={last}
        aria-valuenow={at ?? Math.floor(last / 2)} aria-valuetext={readout(at ?? Math.floor(last / 2))}
        onPointerMove={onPointer} onPointerLeave={() => setAt(null)} onKeyDown={onKey} onBlur={() => setAt(null)}>
        <svg width="100%" height={height} viewBox={`0 0 ${width} ${height}`} aria-hidden="true">
          <Axes x={x} y={y} box={box} xTitle={axisTitle(first.xLabel, xUnit.unit)} yTitle={axisTitle(first.yLabel, first.yUnit)}
            xTicks={xTicks ?? Math.max(3, Math.floor(width / 95))} yTicks={4} />
          <Markers markers={first.markers ?? []} x={(value) => x(value * xUnit.factor)} box={box} />
          {traces.map((trace) => <TracePath key={trace.label ?? trace.curve.title} trace={trace} x={(v) => x(v * xUnit.factor)} y={y} />)}
          {at !== null && <Cursor at={x(first.x[at]! * xUnit.factor)} box={box} dots={traces.map((t) => y(t.curve.y[Math.min(at, t.curve.y.length - 1)]!))} />}
        </svg>
      </div>
      <MarkerLegend traces={traces} markers={first.markers ?? []} />
    </figure>
  );
}

function TracePath({ trace, x, y }: { trace: Trace; x: (v: number) => number; y: (v: number) => number }) {
  const path = useMemo(() => line<number>((_, i) => x(trace.curve.x[i]!), (_, i) => y(trace.curve.y[i]!))(trace.curve.y) ?? '', [trace, x, y]);
  if (trace.side === 'b') return <g fill="none"><path d={path} stroke="var(--rail-b)" strokeWidth="3.2" /><path d={path} stroke="var(--sheet)" strokeWidth="1" /></g>;
  return <path d={path} fill="none" stroke={trace.side === 'a' ? 'var(--rail-a)' : 'var(--air)'} strokeWidth={trace.side === 'a' ? 2 : 1.4} strokeLinejoin="round" />;
}

function Cursor({ at, box, dots }: { at: number; box: Box; dots: number[] }) {
  return (
    <g>
      <path d={`M${at} ${box.top}V${box.bottom}`} stroke="var(--ink)" strokeWidth="1" strokeDasharray="3 2" />
      {dots.map((cy, k) => <circle key={k} cx={at} cy={cy} r="3" fill="var(--sheet)" stroke="var(--ink)" strokeWidth="1.4" />)}
    </g>
  );
}
