import { describe, expect, it } from 'vitest';
import { categorical, normal } from '#backend/hints/measurements/likelihoods';
import { judgeContradiction, judgeDifference } from '#backend/hints/model';
import { PRIORS } from '#backend/hints/priors';

const seen = (value: string, confidence: number) => ({ value, confidence, method: 'seen' });

describe('two values that cannot both hold', () => {
  it('follow the theorem of Bayes, worked by hand', () => {
    // Four possible words, 0.97 sure of `x`, so 0.01 for each other; declared are x (side A) and y (side B).
    const judged = judgeDifference({ a: 'x', b: 'y' }, categorical(seen('x', 0.97), 4));
    const slip = PRIORS.detectorSlip;
    const other = (0.97 + 2 * 0.01) / 3;
    const each = (1 - PRIORS.bothAtOdds) / 2;
    const bAtOdds = each * ((1 - slip) * 0.97 + slip * other);
    const aAtOdds = each * ((1 - slip) * 0.01 + slip * other);
    // Were neither true, two words are left, and each shows `x` once in a hundred times.
    const both = PRIORS.bothAtOdds * 0.01;
    expect(judged).toMatchObject({ side: 'b', pattern: 'differ-decided' });
    expect(judged.probability).toBeCloseTo((PRIORS.differenceIsReal * bAtOdds) / (aAtOdds + bAtOdds + both), 9);
  });

  it('are both at odds where the air shows a third', () => {
    expect(judgeDifference({ a: 'x', b: 'y' }, categorical(seen('z', 0.97), 4))).toMatchObject({ side: 'both', pattern: 'neither' });
  });

  it('are never both at odds where there is no third', () => {
    for (const confidence of [0.55, 0.8, 0.99]) expect(judgeDifference({ a: true, b: false }, categorical({ value: true, confidence, method: 'seen' }, 2)).side).not.toBe('both');
    const sure = judgeDifference({ a: true, b: false }, categorical({ value: true, confidence: 0.99, method: 'seen' }, 2));
    expect(sure.side).toBe('b');
    expect(sure.probability).toBeGreaterThan(0.94);
  });

  it('stay open where nothing was measured, or the measurement lies between', () => {
    expect(judgeDifference({ a: 1, b: 2 }, null)).toMatchObject({ side: 'unknown', pattern: 'differ-open' });
    expect(judgeDifference({ a: 10, b: 12 }, normal({ value: 11, method: null, sigma: 1, range: 100, confidence: 0.99 })).side).toBe('unknown');
  });
});

describe('one value against the air', () => {
  const about = (declared: number, by: Parameters<typeof judgeContradiction>[2]) => judgeContradiction(declared, normal({ value: 100, method: null, sigma: 1, range: 1000, confidence: 0.999 }), by);

  it('is no finding within the scatter, and the transmitter’s beyond it where both agree', () => {
    expect(about(101.5, { sides: ['a', 'b'], transmitter: 'a' })).toBeNull();
    expect(about(120, { sides: ['a', 'b'], transmitter: 'a' })).toMatchObject({ side: 'a', pattern: 'agree-contradicted' });
    expect(about(120, { sides: ['a', 'b'], transmitter: null })).toMatchObject({ side: 'unknown' });
  });

  it('is that side’s own where only one speaks, whoever transmits', () => {
    expect(about(120, { sides: ['b'], transmitter: 'a' })).toMatchObject({ side: 'b', pattern: 'one-contradicted' });
  });
});
