import type { ScaleLinear } from 'd3-scale';
import { number } from '../../lib/units.js';

export interface Box { left: number; right: number; top: number; bottom: number }
type Scale = ScaleLinear<number, number>;

const shownTick = (value: number, scale: Scale, count: number): string => {
  const step = Math.abs((scale.ticks(count)[1] ?? 1) - (scale.ticks(count)[0] ?? 0)) || 1;
  return number(value, Math.max(0, Math.ceil(-Math.log10(step) - 1e-9)));
};

/** Two axes with ticks, their titles and units; x below, y at the left with its title above. */
export function Axes({ x, y, box, xTitle, yTitle, xTicks, yTicks }: {
  x: Scale; y: Scale; box: Box; xTitle: string; yTitle: string; xTicks: number; yTicks: number;
}) {
  return (
    <g className="axes">
      <path d={`M${box.left} ${box.top}V${box.bottom}H${box.right}`} fill="none" stroke="var(--rule-strong)" />
      {x.ticks(xTicks).map((tick) => (
        <g key={tick}>
          <path d={`M${x(tick)} ${box.bottom}v4`} stroke="var(--rule-strong)" />
          <text x={x(tick)} y={box.bottom + 15} textAnchor="middle">{shownTick(tick, x, xTicks)}</text>
        </g>
      ))}
      {y.ticks(yTicks).map((tick) => (
        <g key={tick}>
          <path d={`M${box.left - 4} ${y(tick)}h4`} stroke="var(--rule-strong)" />
          <path d={`M${box.left} ${y(tick)}H${box.right}`} stroke="var(--rule)" strokeWidth=".6" />
          <text x={box.left - 7} y={y(tick) + 3.5} textAnchor="end">{shownTick(tick, y, yTicks)}</text>
        </g>
      ))}
      <text x={box.right} y={box.bottom + 30} textAnchor="end" className="axis-title">{xTitle}</text>
      <text x={4} y={box.top - 9} className="axis-title">{yTitle}</text>
    </g>
  );
}
