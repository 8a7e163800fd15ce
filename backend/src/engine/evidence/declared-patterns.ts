import type { DeclaredSettings } from '../analyse.js';
import type { Look } from './look.js';
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
  const levels = symbolLevels(look.window, { startSample: frameStartS * look.source.sampleRateHz, spacingHz: grid.subcarrierSpacingHz });
  return (['a', 'b'] as const).flatMap((side) => {
    const pattern = declared[side]?.tddPattern;
    return pattern ? [{ side, ...patternLikelihood(levels, pattern) }] : [];
  });
}
