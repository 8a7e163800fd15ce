import type { ComparisonRow } from '#shared/decode';
import type { ParameterName } from '#shared/parameters';
import { spacingStatements, transformSpacing } from './derive.js';
import type { Pair } from './families.js';
import { pairRow } from './row.js';
import type { View } from './view.js';

/**
 * Transform size and sample rate are each unit's own business. They are at odds only where the
 * spacing that they imply differs: from the other side's, or from what is stated outright.
 */
export function transformRows(pair: Pair): ComparisonRow[] {
  const [a, b] = [impliedSpacing(pair.a), impliedSpacing(pair.b)];
  const odds = a !== null && b !== null && !sameSpacing(a, b);
  const culprit = odds ? culpritOf(pair) : null;
  return (['fftSize', 'sampleRate'] as const).flatMap((name) => {
    const [x, y] = [pair.a.get(name), pair.b.get(name)];
    if (x === null && y === null) return [];
    const compared = pairRow(name, [x, y]);
    if (name === culprit) return [{ ...compared, verdict: 'differ' as const, note: spacingNote(a, b) }];
    const shown: ComparisonRow = { ...compared, verdict: x === null || y === null ? 'one-sided' : 'agree' };
    return [x !== null && y !== null && x.value !== y.value ? { ...shown, note: odds ? spacingNote(a, b) : 'a local choice: the spacing that rate and size imply is the same, or only one side implies one' } : shown];
  });
}

const sameSpacing = (x: number, y: number): boolean => Math.abs(x - y) <= 1e-3 * Math.max(x, y);

/** What rate and size imply; without both, nothing is implied. */
const impliedSpacing = (view: View): number | null => transformSpacing(view)?.value ?? null;

const spacingNote = (a: number | null, b: number | null): string => `the spacing implied is ${kHz(a)} on side A and ${kHz(b)} on side B`;
const kHz = (hz: number | null): string => (hz === null ? 'open' : `${Number((hz / 1e3).toFixed(4))} kHz`);

/**
 * Which of the two changed: the one that differs where the other is equal. Where both differ, the
 * one that a side would have to change to reach the spacing it states: a rate that is no
 * power-of-two multiple of the other's is the rate's.
 */
function culpritOf(pair: Pair): ParameterName {
  const [sizeA, sizeB] = [pair.a.number('fftSize'), pair.b.number('fftSize')];
  const [rateA, rateB] = [pair.a.number('sampleRate'), pair.b.number('sampleRate')];
  if (rateA === rateB) return 'fftSize';
  if (sizeA === sizeB) return 'sampleRate';
  const octaves = Math.log2((rateA ?? 1) / (rateB ?? 1));
  return Math.abs(octaves - Math.round(octaves)) < 1e-6 ? 'fftSize' : 'sampleRate';
}

/** Spacing that a side states outright against the one its rate and size imply. */
export function transformContradiction(view: View): { stated: number; implied: number; culprit: ParameterName } | null {
  const implied = impliedSpacing(view);
  const stated = spacingStatements(view).find((s) => s.name !== 'fftSize')?.value ?? null;
  if (implied === null || stated === null || sameSpacing(implied, stated)) return null;
  return { stated, implied, culprit: ownCulprit(view, stated) };
}

/** A power-of-two transform beside a rate that fits none (three quarters of one, say) speaks against the rate. */
function ownCulprit(view: View, stated: number): ParameterName {
  const octave = (size: number): boolean => Number.isInteger(Math.log2(size));
  return octave(view.number('fftSize') ?? 0) && !octave((view.number('sampleRate') ?? 0) / stated) ? 'sampleRate' : 'fftSize';
}
