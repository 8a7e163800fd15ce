import { describe, expect, it } from 'vitest';
import { decodeResult } from '#shared/decode';
import { randomScenario } from '../../backend/src/generator/scenarios/random-scenario.js';
import { judge } from './judge.js';
import { runScenario } from './run-scenario.js';

/**
 * Scenarios drawn by the project's generator, which shares nothing with the engine: from capture
 * bytes and snapshot texts to the first hint. Seeds are fixed; batch.ts runs as many as one likes.
 */
const CASES: readonly (readonly [number, Parameters<typeof randomScenario>[1]])[] = [
  [11, { kind: 'nr', relation: 'one-wrong', snrDb: [15, 25], maxRateHz: 31e6 }],
  [12, { kind: 'nr', relation: 'clean', snrDb: [15, 25], maxRateHz: 31e6 }],
  [13, { kind: 'lte', relation: 'one-wrong', snrDb: [15, 25], maxRateHz: 31e6 }],
  [14, { kind: 'wifi', relation: 'one-wrong', snrDb: [15, 25], maxRateHz: 41e6 }],
  [15, { kind: 'ofdm', relation: 'clean', snrDb: [15, 25], maxRateHz: 31e6 }],
  [16, { kind: 'nr', relation: 'both-wrong', snrDb: [15, 25], maxRateHz: 21e6 }],
  [17, { kind: 'nr', relation: 'capture', fault: 'format label', snrDb: [15, 25], maxRateHz: 21e6 }],
  [18, { kind: 'lte', relation: 'capture', fault: 'overdriven', snrDb: [15, 25], maxRateHz: 21e6 }],
  [19, { kind: 'nr', relation: 'capture', fault: 'clock', snrDb: [15, 25], maxRateHz: 21e6 }],
  // Twice the rate on the label: the cell of 15 kHz decodes as one of 30 kHz.
  [20105, { kind: 'nr', relation: 'capture', fault: 'rate label', maxRateHz: 32e6 }],
];

describe('a decode from bytes to its first hint', () => {
  it.each(CASES)('seed %d, %o', (seed, options) => {
    const spec = randomScenario(seed, options);
    const { record, result } = runScenario(spec);
    expect(() => decodeResult.parse(result)).not.toThrow();
    const outcome = judge(record, result);
    expect(outcome.hintRight, `${spec.about}: ${outcome.wrong.join('; ')}`).toBe(true);
  });
});
