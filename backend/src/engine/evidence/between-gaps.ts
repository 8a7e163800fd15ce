import type { SampleSource } from '../types.js';
import { look, type Look, type LookOptions } from './look.js';
import { from } from './recording.js';
import type { Gap } from './sample-gaps.js';

/** Little less than half a frame of LTE: the least that is likely to hold a synchronisation signal. */
const LEAST_S = 3.5e-3;
/** A place is the first stretch that is timed anew: the loss lies up to this much before it. */
const DOUBT_S = 0.5e-3;
const MOST_PARTS = 3;

/**
 * The reading of a stretch without a loss, where the whole did not yield everything: signals
 * that are summed over frames do not add up across a loss. The plain look where none shows more.
 */
export function betweenGaps(plain: Look, gaps: Gap | null, options: LookOptions): Look {
  if (!gaps || isComplete(plain) || plain.choice.technology === 'wifi') return plain;
  let best = plain;
  for (const part of partsOf(plain.source, gaps).slice(0, MOST_PARTS)) {
    const found = look(part, plain.facts, options);
    if (isComplete(found)) return found;
    if (best.choice.finding === null && found.choice.finding !== null) best = found;
  }
  return best;
}

function isComplete({ choice }: Look): boolean {
  return choice.finding?.air['mib']?.value != null;
}

/** The longest first. */
function partsOf(source: SampleSource, { places }: Gap): SampleSource[] {
  const { sampleRateHz, samples } = source;
  const doubt = Math.round(DOUBT_S * sampleRateHz);
  const edges = [0, ...places, samples + doubt];
  return edges.slice(1).map((to, i) => ({ start: edges[i]!, count: to - edges[i]! - doubt }))
    .filter(({ count }) => count > LEAST_S * sampleRateHz)
    .sort((a, b) => b.count - a.count)
    .map(({ start, count }) => from(source, start, count));
}
