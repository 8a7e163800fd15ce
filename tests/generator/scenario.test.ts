import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { HINT_CODES } from '#shared/vocabulary';
import { judge, meets } from '#backend/generator/scenarios/judge';
import { randomScenario, RELATIONS } from '#backend/generator/scenarios/random-scenario';
import { caseRecord, makeScenario, scenarioArguments, scenarioFiles } from '#backend/generator/scenarios/scenario';

const digest = (seed: number) => {
  const hash = createHash('sha256');
  for (const file of scenarioFiles(makeScenario(randomScenario(seed, { kind: 'lte', maxRateHz: 4e6, relation: 'one-wrong' })))) hash.update(file.name).update(file.bytes);
  return hash.digest('hex');
};

describe('scenarios', () => {
  it('are the same for the same number and differ for another', () => {
    expect(digest(11)).toBe(digest(11));
    expect(digest(11)).not.toBe(digest(12));
  });

  it('name on the command line only files that they hold', () => {
    for (let seed = 0; seed < 12; seed++) {
      const scenario = makeScenario(randomScenario(seed, { kind: 'ofdm', maxRateHz: 4e6 }));
      const names = scenarioFiles(scenario).map((f) => f.name);
      const args = scenarioArguments(scenario);
      for (const option of ['--capture', '--side-a', '--side-b', '--glossary-a', '--glossary-b']) {
        if (args.includes(option)) expect(names).toContain(args[args.indexOf(option) + 1]);
      }
      expect(args.includes('--datatype')).toBe(scenario.spec.capture?.recording.format === 'raw');
      expect(caseRecord(scenario)).toMatchObject({ id: `s${seed}`, kind: 'decode', args });
    }
  });

  it('cover every relation and the air-side hints of the contract', () => {
    const specs = Array.from({ length: 1500 }, (_, seed) => randomScenario(seed));
    const codes = new Set(specs.flatMap((s) => (s.expect.hint ? [s.expect.hint.code] : [])));
    // The rest belong to the fronthaul.
    const fronthaul = ['iq-compression', 'iq-bit-width', 'frame-structure', 'fronthaul-cp-length', 'eaxc-mapping', 'prb-allocation', 'timing-window', 'packet-loss'];
    expect(HINT_CODES.filter((c) => !fronthaul.includes(c) && !codes.has(c))).toEqual([]);
    expect(specs.some((s) => s.capture === null)).toBe(true);
    expect(specs.some((s) => s.sideA === null && s.sideB === null)).toBe(true);
    expect(specs.some((s) => (s.sideA === null) !== (s.sideB === null))).toBe(true);
    for (const relation of RELATIONS) expect(randomScenario(3, { kind: 'nr', relation }).about).toBeTruthy();
  });

  it('give the transmitter as the side where both files agree against the air', () => {
    for (let seed = 0; seed < 40; seed++) {
      const { transmitter, expect: due } = randomScenario(seed, { kind: 'nr', relation: 'agreed', fault: 'physical-cell-id' });
      expect(due.hint!.side).toEqual([transmitter ?? 'unknown']);
    }
  });

  it('draw carriers that lie in their band and blocks that lie in their carrier', () => {
    for (let seed = 0; seed < 200; seed++) {
      const spec = randomScenario(seed, { kind: 'nr', relation: 'capture-only' });
      if (spec.capture?.signal.kind !== 'nr') throw new Error('not NR');
      const { spec: nr } = spec.capture.signal;
      const half = 6 * nr.resourceBlocks * nr.spacingHz;
      const block = 120 * (nr.blocks!.blockCase === 'A' ? 15e3 : nr.blocks!.blockCase < 'D' ? 30e3 : nr.blocks!.blockCase === 'D' ? 120e3 : 240e3);
      expect(Math.abs(nr.blocks!.frequencyHz - nr.carrierHz) + block).toBeLessThanOrEqual(half);
      expect(nr.mib.kSsb).toBeGreaterThanOrEqual(0);
      expect(nr.mib.kSsb).toBeLessThan(24);
    }
  });
});

describe('the judge', () => {
  const hint = (code: string, side: string) => [{ code, side, confidence: 0.9, summary: '', evidence: [], wouldDisprove: '' }] as never;
  const due = { hint: { code: 'physical-cell-id', side: ['a'] }, allowed: [], air: {} } as const;
  it.each([['physical-cell-id', 'a', 'right'], ['physical-cell-id', 'b', 'wrong-side'], ['carrier-frequency', 'a', 'wrong-code']])('calls %s/%s %s', (code, side, verdict) => {
    expect(judge(due, { hints: hint(code, side), air: {} }).hint).toBe(verdict);
  });
  it('tells a miss from a false alarm', () => {
    expect(judge(due, { hints: [], air: {} }).hint).toBe('missed');
    expect(judge({ ...due, hint: null }, { hints: hint('technology', 'a'), air: {} }).hint).toBe('false-alarm');
    expect(judge({ ...due, hint: null }, { hints: [], air: {} }).hint).toBe('right');
  });
  it('takes a residue for a whole offset only where the method says so', () => {
    const offset = { value: 31_000, tol: 100, modulo: 15_000 };
    expect(meets({ value: 1000, method: 'fractional, from the prefix' }, offset)).toBe(true);
    expect(meets({ value: 1000, method: 'placed by the block' }, offset)).toBe(false);
    expect(meets({ value: null, reason: 'quiet' }, offset)).toBe(false);
  });
});
