import { describe, expect, it } from 'vitest';
import { gscnHz, nrArfcn, nrArfcnHz } from '#backend/generator/nr/raster';
import { DECLARED_FAULTS } from '#backend/generator/scenarios/declared-faults';
import { earfcnHz } from '#backend/generator/scenarios/draw-lte';
import { randomScenario } from '#backend/generator/scenarios/random-scenario';
import { makeScenario, type ScenarioSide } from '#backend/generator/scenarios/scenario';
import type { Declared } from '#backend/generator/snapshots/declared';
import { readGlossary } from '#backend/snapshots/glossary';
import { readSnapshot } from '#backend/snapshots/read';

const utf8 = (text: string) => new TextEncoder().encode(text);

function readBack(side: ScenarioSide): Map<string, unknown> {
  const glossary = side.glossary ? readGlossary(utf8(side.glossary.text)) : null;
  return new Map(readSnapshot(utf8(side.text), { glossary }).values.map((v) => [v.parameter, v.value]));
}

/** The same in other words: channel numbers are compared by their frequency. */
function agrees(declared: Declared, name: string, value: unknown, read: Map<string, unknown>): boolean {
  if (name === 'carrierFrequency') {
    const pointA = read.get('pointAArfcn');
    if (typeof pointA === 'number') return value === nrArfcnHz(pointA) + 6 * declared.resourceBlocks! * declared.subcarrierSpacing!;
    return read.get(name) === value || (declared.earfcn !== undefined && earfcnHz(Number(read.get('earfcn'))) === value);
  }
  if (name === 'subcarrierSpacing' && read.has('numerology')) return 15000 * 2 ** Number(read.get('numerology')) === value;
  if (name === 'cyclicPrefix' && !read.has(name)) return value === 'normal';
  const found = read.get(name);
  return typeof value === 'number' && typeof found === 'number' ? Math.abs(found - value) <= 1e-9 * Math.abs(value) : found === value;
}

describe('snapshots that the generator writes', () => {
  it.each(Array.from({ length: 60 }, (_, seed) => seed))('say to the reader what side A and side B declare, scenario %i', (seed) => {
    const spec = randomScenario(seed, { relation: seed % 2 ? 'clean' : 'snapshots-only', kind: (['nr', 'lte', 'wifi', 'ofdm', 'nr'] as const)[seed % 5] });
    const { sideA, sideB } = makeScenario({ ...spec, capture: null });
    for (const side of [sideA!, sideB!]) {
      const read = readBack(side);
      const missed = Object.entries(side.declared).filter(([name, value]) => !agrees(side.declared, name, value, read));
      expect(missed, side.text).toEqual([]);
    }
  });

  it('state the wrong setting on the side that is named, and the right one on the other', () => {
    for (let seed = 0; seed < 40; seed++) {
      const { sideA, sideB, expect: due } = randomScenario(seed, { kind: 'nr', relation: 'one-wrong', fault: 'physical-cell-id' });
      const [wrong, right] = due.hint!.side[0] === 'a' ? [sideA, sideB] : [sideB, sideA];
      const air = due.air.physicalCellId as { value: number };
      expect(right!.declared.physicalCellId).toBe(air.value);
      expect(wrong!.declared.physicalCellId).not.toBe(air.value);
    }
  });

  it('keep channel numbers and frequencies of a file in step', () => {
    for (let seed = 100; seed < 140; seed++) {
      const { declared } = randomScenario(seed, { kind: 'nr', relation: 'clean' }).sideA!;
      if (declared.gscn !== undefined && declared.ssbArfcn !== undefined) expect(nrArfcn(gscnHz(declared.gscn))).toBe(declared.ssbArfcn);
    }
  });

  it('can show every fault', () => {
    for (const fault of DECLARED_FAULTS) {
      const kind = fault.kinds[0] as 'nr';
      expect(randomScenario(1, { kind, relation: 'one-wrong', fault: fault.name }).expect.hint?.code).toBe(fault.code);
    }
  });
});
