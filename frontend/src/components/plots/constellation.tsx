import { useMemo } from 'react';
import type { Demodulation } from '#shared/decode';
import { percent } from '../../lib/units.js';
import { SideMark } from '../marks/side-mark.js';

const SIZE = 220;
const MIDDLE = SIZE / 2;
/** Shared half-width of all constellations, in units of the root mean power, so that they compare. */
const HALF = 1.75;
const DECIMALS = 1;

/** Equalised points as one path of round dots: vectors, so that print stays sharp. Points outside stand at the edge. */
function dots(points: readonly number[]): string {
  const scale = MIDDLE / HALF;
  const place = (v: number): string => (MIDDLE + Math.max(-MIDDLE + 3, Math.min(MIDDLE - 3, v * scale))).toFixed(DECIMALS);
  const out: string[] = [];
  for (let k = 0; k + 1 < points.length; k += 2) out.push(`M${place(points[k]!)} ${place(-points[k + 1]!)}h0`);
  return out.join('');
}

const NAMES = { a: 'Under A', b: 'Under B', air: 'Under the best found' } as const;

/** `64qam` as the trade writes it. */
const orderName = (order: string): string => order.toUpperCase().replace(/^(\d+)-?QAM$/, '$1‑QAM');

function verdict(d: Demodulation): string {
  const random = d.evmRandomPercent === null ? '' : `; random points would give ${percent(d.evmRandomPercent)}`;
  return `${d.closes ? 'Closes' : 'Does not close'}${d.order ? ` as ${orderName(d.order)}` : ''}${random}.`;
}

/** The capture's points as one side's settings would receive them. */
export function Constellation({ demodulation: d }: { demodulation: Demodulation }) {
  const path = useMemo(() => dots(d.points), [d.points]);
  const name = NAMES[d.under];
  const evm = d.evmPercent === null ? null : `EVM ${percent(d.evmPercent)}`;
  const tick = MIDDLE / HALF;
  return (
    <figure className="plot constellation" aria-label={name}>
      <figcaption>
        <b>{d.under === 'air' ? name : <SideMark side={d.under} quiet>{name}</SideMark>}</b>
        <span className="fig">{evm ?? 'no EVM'}</span>
      </figcaption>
      <svg viewBox={`0 0 ${SIZE} ${SIZE}`} width="100%" role="img" aria-label={`${name}: ${evm ?? 'no EVM'}. ${verdict(d)}`}>
        <path d={`M${MIDDLE} 4V${SIZE - 4}M4 ${MIDDLE}H${SIZE - 4}`} stroke="var(--rule-strong)" strokeWidth=".8" />
        <path d={`M${MIDDLE - tick} ${MIDDLE - 3}v6M${MIDDLE + tick} ${MIDDLE - 3}v6M${MIDDLE - 3} ${MIDDLE - tick}h6M${MIDDLE - 3} ${MIDDLE + tick}h6`} stroke="var(--rule-strong)" />
        <text x={MIDDLE + tick} y={MIDDLE + 14} textAnchor="middle">1</text>
        <text x={SIZE - 4} y={MIDDLE - 5} textAnchor="end">I</text>
        <text x={MIDDLE + 6} y={12}>Q</text>
        <path d={path} stroke="var(--ink)" strokeOpacity=".6" strokeWidth="1.9" strokeLinecap="round" fill="none" />
      </svg>
      <p className="plot-note">{d.reason ? `${d.reason.replace(/\.$/, '')}.` : verdict(d)}</p>
    </figure>
  );
}
