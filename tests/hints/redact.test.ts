import { describe, expect, it } from 'vitest';
import type { DecodeResult } from '#shared/decode';
import { decideAndWrite } from './result.js';
import { redactResult } from '../../backend/src/hints/redact.js';
import type { View } from '../../backend/src/hints/types.js';

/** Marks that stand in side B's file only: in keys, values and comments. */
const B = `
# marker-comment-zq1
radio:
  technology: nr
  subcarrierSpacing: 15000   # marker-trailing-zq2
  marker-key-zq3: 5
  referenceClock: marker-value-zq4
  ssbPeriodicity: 0.0427
cell:
  physicalCellId: 771
  spectrumSense: upright
marker-section-zq5:
  offsetToPointA: 1733
`;
const A = JSON.stringify({ technology: 'nr', subcarrierSpacing: 30000, cyclicPrefix: 'normal' });
const AIR = { technology: 'nr', subcarrierSpacingHz: 30000, physicalCellId: 12, spectrumInverted: true };
const PRIVATE = [/zq\d/, /1733/, /0\.0427|42\.7/, /\b771\b/, /side-b\.yaml/, /bbbbbbbb/];

const result: DecodeResult = decideAndWrite({ a: A, b: B, air: AIR, transmitter: 'b' });
const seen = (view: View) => JSON.stringify(redactResult(result, view));

describe('what side A\'s people read of side B', () => {
  it('is everything when B shares its snapshot', () => {
    expect(redactResult(result, { a: 'full', b: 'full' })).toEqual(result);
    expect(seen({ a: 'full', b: 'full' })).toMatch(/771/);
  });

  it('is, compare only, what both declare, and no word of B\'s file', () => {
    const text = seen({ a: 'full', b: 'compare-only' });
    for (const mark of PRIVATE) expect(text).not.toMatch(mark);
    const { hints, comparison } = redactResult(result, { a: 'full', b: 'compare-only' });
    const spacing = comparison.find((row) => row.parameter === 'subcarrierSpacing')!;
    expect(spacing.b).toMatchObject({ value: 15000, path: null, raw: null });
    expect(comparison.find((row) => row.parameter === 'physicalCellId')!.b).toMatchObject({ value: null, declaredBy: 'b' });
    expect(hints.find((hint) => hint.code === 'subcarrier-spacing')!.summary).toMatch(/Side B has subcarrier spacing 15 kHz/);
    const identity = hints.find((hint) => hint.code === 'physical-cell-id')!;
    expect(identity.evidence.map((item) => item.text)).toContain('declared by side B');
  });

  it('is nothing at all when B keeps its snapshot to itself', () => {
    const text = seen({ a: 'full', b: 'none' });
    for (const mark of PRIVATE) expect(text).not.toMatch(mark);
    const { hints, comparison } = redactResult(result, { a: 'full', b: 'none' });
    expect(comparison.every((row) => row.b === null)).toBe(true);
    expect(comparison.map((row) => row.parameter)).not.toContain('physicalCellId');
    expect(JSON.stringify(hints)).not.toMatch(/15 kHz|15000/);
  });

  it('gives the same reply whatever B\'s hidden file says', () => {
    const other = decideAndWrite({ a: A, b: B.replace('15000', '60000').replace('771', '12').replace('upright', 'inverted'), air: AIR, transmitter: 'b' });
    expect(JSON.stringify(redactResult(other, { a: 'full', b: 'none' }))).toBe(seen({ a: 'full', b: 'none' }));
  });
});
