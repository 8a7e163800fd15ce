import type { Curve } from '#shared/decode';
import { fold } from './fold.js';
import { uniformPrefix, type Hypothesis } from './hypotheses.js';
import type { LagSpectrum } from './lag-spectrum.js';
import { stretchOf, type Scored } from './score.js';

const POINTS = 480;

/** Strength of the correlation with a later copy of the signal against the lag, the found useful symbol marked. */
export function lagCurve({ strength, rateHz }: LagSpectrum, found: Hypothesis | null): Curve {
  const longest = Math.min(strength.length, Math.ceil(rateHz * Math.max(80e-6, 2.2 * (found?.usefulS ?? 0))));
  const group = Math.max(1, Math.ceil(longest / POINTS));
  const x: number[] = [];
  const y: number[] = [];
  for (let from = 1; from < longest; from += group) {
    let at = from;
    for (let i = from; i < Math.min(longest, from + group); i++) if (strength[i] > strength[at]) at = i;
    x.push(Number(((at / rateHz) * 1e6).toFixed(4)));
    y.push(Number(Math.sqrt(strength[at]).toFixed(3)));
  }
  const markers = found ? [{ x: Number((found.usefulS * 1e6).toFixed(4)), label: `useful symbol, ${found.label}`, side: 'air' as const }] : undefined;
  return { title: 'Correlation against lag', xLabel: 'Lag', xUnit: 'µs', yLabel: 'Correlation over its scatter', yUnit: '', x, y, markers };
}

/** Correlation at the lag of one useful symbol, along one symbol from the start of its prefix: a step as long as the prefix. */
export function symbolCurve(scored: Scored, rateHz: number, startSample: number): Curve | null {
  const { hypothesis, sums, spans } = scored;
  const mean = hypothesis.prefixesS.reduce((a, b) => a + b, 0) / hypothesis.prefixesS.length;
  const one = uniformPrefix({ usefulS: hypothesis.usefulS, cyclicPrefixS: mean, family: 'free', symbols: 1 });
  const period = ((one.usefulS + mean) * rateHz) / sums.hop;
  const blocks = spans.apart ? spans.blocks.slice(0, 1) : spans.blocks;
  const folded = fold(sums, { period, spans: blocks, spectrum: stretchOf(sums, blocks).spectrum });
  if (!folded) return null;
  const turns = (startSample / sums.hop - folded.origin) / period;
  const first = Math.round((turns - Math.floor(turns)) * folded.bins);
  const shift = Math.round(0.15 * folded.bins);
  const level = folded.power.reduce((a, b) => a + b, 0) / folded.bins;
  const x: number[] = [];
  const y: number[] = [];
  for (let i = -shift; i < folded.bins - shift; i++) {
    const b = (first + i + 2 * folded.bins) % folded.bins;
    x.push(Number((((i + 0.5) / folded.bins) * (one.usefulS + mean) * 1e6).toFixed(4)));
    y.push(Number((Math.hypot(folded.profile[2 * b], folded.profile[2 * b + 1]) / Math.max(1e-300, level)).toFixed(4)));
  }
  const markers = [{ x: 0, label: 'prefix begins' }, { x: Number((hypothesis.cyclicPrefixS * 1e6).toFixed(4)), label: 'prefix ends' }];
  return { title: 'Prefix correlation along the symbol', xLabel: 'Time in the symbol', xUnit: 'µs', yLabel: 'Correlation', yUnit: '', x, y, markers };
}
