import type { DeclaredSettings } from '../analyse.js';
import type { Look } from './look.js';
import { prepare } from '../sync/prepare.js';
import { patternLikelihood, symbolLevels } from './tdd-levels.js';

export interface SidedPattern {
  readonly side: 'a' | 'b';
  readonly logLikelihood: number;
  readonly reason: string;
}

/** Each declared downlink-uplink pattern against the level of every symbol; empty without a frame's start. */
export function declaredPatterns(look: Look, declared: { readonly a: DeclaredSettings | null; readonly b: DeclaredSettings | null }): SidedPattern[] {
  const frameStartS = look.choice.finding?.air['frameStartS']?.value;
  const grid = look.choice.finding?.grid;
  if (typeof frameStartS !== 'number' || !grid || (!declared.a?.tddPattern && !declared.b?.tddPattern)) return [];
  const { occupied, noisePower } = look.spectrum;
  // Only the carrier's own band: noise beside it would hide the pauses.
  const band = prepare(look.window, { occupied, on: null });
  const window = { iq: band.iq, startSample: band.startSample / band.decimation, sampleRateHz: band.rateHz };
  const noise = noisePower > 0 && occupied ? (noisePower * band.rateHz) / (occupied.highHz - occupied.lowHz) : null;
  const symbolsPerSlot = grid.prefixSamples.length / (grid.subcarrierSpacingHz / 30e3);
  const levels = symbolLevels(window, { startSample: frameStartS * band.rateHz, spacingHz: grid.subcarrierSpacingHz, symbolsPerSlot: Math.round(symbolsPerSlot), noisePower: noise });
  return (['a', 'b'] as const).flatMap((side) => {
    const pattern = declared[side]?.tddPattern;
    return pattern ? [{ side, ...patternLikelihood(levels, pattern) }] : [];
  });
}
