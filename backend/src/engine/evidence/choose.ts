import type { BlindOfdm, TechnologyFinding } from '../types.js';

export interface Choice {
  readonly technology: 'nr' | 'lte' | 'wifi' | 'ofdm' | null;
  readonly confidence: number;
  readonly finding: TechnologyFinding | null;
  readonly reason: string;
}

/** A technology's own signals count from here on. */
const LEAST_CONFIDENCE = 0.5;
/** A spacing and prefix found blindly count from here on. */
const LEAST_BLIND = 0.9;

/** The surest technology; else OFDM without one; else nothing. */
export function choose(findings: readonly TechnologyFinding[], blind: BlindOfdm | null): Choice {
  const best = [...findings].sort((a, b) => b.confidence - a.confidence)[0];
  if (best && best.confidence >= LEAST_CONFIDENCE) {
    return { technology: best.technology, confidence: best.confidence, finding: best, reason: `${best.technology} synchronisation found` };
  }
  if (blind && blind.confidence >= LEAST_BLIND) {
    return { technology: 'ofdm', confidence: blind.confidence, finding: null, reason: 'symbols repeat their ends, but no known synchronisation was found' };
  }
  return { technology: null, confidence: 0, finding: null, reason: 'nothing repeats as an OFDM symbol does' };
}
