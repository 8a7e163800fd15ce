import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { stringify } from 'yaml';
import { compareSnapshots } from '#backend/snapshots/compare';
import { SnapshotError } from '#backend/snapshots/error';
import { readGlossary } from '#backend/snapshots/glossary';
import { readSnapshot } from '#backend/snapshots/read';
import type { SnapshotReading } from '#backend/snapshots/types';
import { bytes, compareTexts, cpuSeconds, values } from './support.js';

/** Runs are seeded, so that a failure comes back. */
const RUNS = { seed: 20240611, numRuns: 150 } as const;

type Settings = Record<string, string | number | boolean | number[]>;

/** Legal NR settings in plain words, each present or not. */
const settings: fc.Arbitrary<Settings> = fc.record({
  technology: fc.constantFrom('nr', 'lte', 'wifi', 'ofdm'),
  subcarrierSpacing: fc.constantFrom(15000, 30000, 60000, 120000, 25000),
  cyclicPrefix: fc.constantFrom('normal', 'extended'),
  fftSize: fc.constantFrom(256, 512, 1024, 1536, 4096),
  sampleRate: fc.integer({ min: 1_000_000, max: 200_000_000 }),
  carrierFrequency: fc.integer({ min: 400_000_000, max: 71_000_000_000 }),
  nrArfcn: fc.integer({ min: 0, max: 3279165 }),
  resourceBlocks: fc.integer({ min: 1, max: 275 }),
  guardInterval: fc.constantFrom(0.0000004, 0.0000008, 0.000005),
  tddPeriodicity: fc.constantFrom(0.0005, 0.0025, 0.005, 0.01),
  tddDownlinkSlots: fc.integer({ min: 0, max: 40 }),
  physicalCellId: fc.integer({ min: 0, max: 1007 }),
  phaseCompensation: fc.boolean(),
  spectrumSense: fc.constantFrom('upright', 'inverted'),
  eaxcIds: fc.uniqueArray(fc.integer({ min: 0, max: 65535 }), { minLength: 1, maxLength: 6 }).map((ids) => ids.sort((a, b) => a - b)),
}, { requiredKeys: [] });

const nested = fc.record({ group: fc.constantFrom('radio', 'cell.rf', 'unit'), settings });

const snake = (key: string): string => key.replace(/[A-Z]/g, (c) => `_${c.toLowerCase()}`);
const kebab = (key: string): string => snake(key).replace(/_/g, '-');
const scalar = (value: Settings[string]): string => (Array.isArray(value) ? value.join(', ') : String(value));

function tree(group: string, flat: Settings): unknown {
  return group.split('.').reverse().reduce<unknown>((inner, key) => ({ [key]: inner }), flat);
}

/** The same settings in every syntax, and in other spellings of the names. */
const WRITERS: Readonly<Record<string, (group: string, flat: Settings) => string>> = {
  json: (group, flat) => JSON.stringify(tree(group, flat), null, 2),
  minified: (group, flat) => JSON.stringify(tree(group, flat)),
  yaml: (group, flat) => stringify(tree(group, Object.fromEntries(Object.entries(flat).map(([k, v]) => [snake(k), v])))),
  flow: (group, flat) => `---\n${group.split('.').map((g) => `{ ${g}: `).join('')}{ ${Object.entries(flat).map(([k, v]) => `${kebab(k)}: ${Array.isArray(v) ? `[${v.join(', ')}]` : v}`).join(', ')} }${' }'.repeat(group.split('.').length)}\n`,
  xml: (group, flat) => `<?xml version="1.0"?>\n<config>${group.split('.').map((g) => `<${g}>`).join('')}\n${Object.entries(flat).map(([k, v]) => `  <${k}>${Array.isArray(v) ? v.map((i) => `<value>${i}</value>`).join('') : v}</${k}>`).join('\n')}\n${group.split('.').reverse().map((g) => `</${g}>`).join('')}</config>\n`,
  sections: (group, flat) => `[${group}]\n${Object.entries(flat).map(([k, v]) => `${snake(k)} = ${scalar(v)}`).join('\n')}\n`,
  dotted: (group, flat) => Object.entries(flat).map(([k, v]) => `${group}.${k} = ${scalar(v)}`).join('\n'),
  braces: (group, flat) => `${group.split('.').map((g) => `${g} = {\n`).join('')}${Object.entries(flat).map(([k, v]) => `  ${k} = ${Array.isArray(v) ? `( ${v.join(', ')} )` : typeof v === 'string' ? `"${v}"` : v};`).join('\n')}\n${'};\n'.repeat(group.split('.').length)}`,
};

describe('any snapshot says the same in every syntax', () => {
  it.each(Object.keys(WRITERS))('%s', (syntax) => {
    fc.assert(fc.property(nested, ({ group, settings: flat }) => {
      fc.pre(Object.keys(flat).length > 0);
      const reading = readSnapshot(bytes(WRITERS[syntax](group, flat)));
      expect(values(reading)).toEqual(flat);
      expect(reading.notUnderstood).toEqual([]);
      expect(reading.values.every((v) => v.path.includes('.') && v.line >= 1)).toBe(true);
    }), RUNS);
  });
  it('and two of them agree in every parameter', () => {
    fc.assert(fc.property(nested, fc.constantFrom(...Object.keys(WRITERS)), fc.constantFrom(...Object.keys(WRITERS)), ({ group, settings: flat }, one, two) => {
      fc.pre(Object.keys(flat).length > 0);
      const { rows, causes } = compareSnapshots(readSnapshot(bytes(WRITERS[one](group, flat))), readSnapshot(bytes(WRITERS[two](group, flat))), { link: 'air' });
      expect(rows.filter((r) => r.verdict === 'differ' || r.verdict === 'one-sided')).toEqual([]);
      expect(causes).toEqual([]);
      expect(rows.length).toBeGreaterThan(0);
    }), RUNS);
  });
});

/** An NR carrier from first principles: spacing, blocks and a centre on the global raster. */
const carrier = fc.record({ mu: fc.integer({ min: 0, max: 2 }), blocks: fc.integer({ min: 11, max: 100 }), arfcn: fc.integer({ min: 620000, max: 653333 }), offset: fc.integer({ min: 0, max: 200 }) });

describe('equal in other words never differs, unequal always does', () => {
  const said = ({ mu, blocks, arfcn, offset }: { mu: number; blocks: number; arfcn: number; offset: number }): string[] => {
    const spacing = 15 * 2 ** mu;
    const centreKhz = 3_000_000 + 15 * (arfcn - 600_000);
    const pointA = arfcn - ((6 * blocks + 12 * offset) * spacing) / 15;
    const head = `technology: nr\nresource_blocks: ${blocks}\n`;
    return [
      `${head}numerology: ${mu}\nnr_arfcn: ${arfcn}\n`,
      `${head}subcarrier_spacing_khz: ${spacing}\ncarrier_frequency_khz: ${centreKhz}\n`,
      `${head}subcarrier_spacing: kHz${spacing}\ncarrier_frequency_mhz: ${(centreKhz / 1000).toFixed(3)}\n`,
      `${head}subcarrierSpacing: ${spacing * 1000}\npoint_a_arfcn: ${pointA}\noffset_to_carrier: ${offset}\n`,
    ];
  };
  it('spacings and carriers', () => {
    fc.assert(fc.property(carrier, (c) => {
      for (const a of said(c)) for (const b of said(c)) expect(compareTexts(a, b).causes).toEqual([]);
    }), { ...RUNS, numRuns: 30 });
  });
  it('a carrier moved by one raster step is the only difference, in any words', () => {
    fc.assert(fc.property(carrier, fc.integer({ min: 1, max: 50 }), (c, step) => {
      for (const a of said(c)) for (const b of said({ ...c, arfcn: c.arfcn + step })) expect(compareTexts(a, b).causes.map((x) => x.code)).toEqual(['carrier-frequency']);
    }), { ...RUNS, numRuns: 20 });
  });
  it('another numerology is one cause, in any words', () => {
    fc.assert(fc.property(carrier, (c) => {
      for (const a of said(c)) for (const b of said({ ...c, mu: (c.mu + 1) % 3 })) expect(compareTexts(a, b).causes.map((x) => x.code)).toEqual(['subcarrier-spacing']);
    }), { ...RUNS, numRuns: 20 });
  });
});

describe('any bytes are read or refused', () => {
  const survives = (content: Uint8Array): void => {
    let reading: SnapshotReading | null = null;
    const seconds = cpuSeconds(() => {
      try {
        reading = readSnapshot(content);
        readGlossary(content);
      } catch (error) {
        expect(error).toBeInstanceOf(SnapshotError);
        expect((error as SnapshotError).message).not.toMatch(/undefined|NaN|    at /);
      }
    });
    expect(seconds).toBeLessThan(1);
    if (reading !== null) {
      compareSnapshots(reading, reading, { link: 'air' });
      expect(JSON.parse(JSON.stringify(reading))).toEqual(reading);
    }
  };
  it('random bytes', () => fc.assert(fc.property(fc.uint8Array({ maxLength: 600 }), survives), RUNS));
  it('random text', () => fc.assert(fc.property(fc.string({ unit: 'grapheme', maxLength: 400 }), (text) => survives(bytes(text))), RUNS));
  it('text of the marks that syntaxes are made of', () => {
    const mark = fc.constantFrom('{', '}', '[', ']', '(', ')', '"', "'", ':', '=', ',', ';', '\n', ' ', '  ', '- ', '? ', '<a>', '</a>', '<a/>', '&a', '*a', '|', '>', '#', '//', '/*', '*/', '\\', '\t', 'a', '1', 'technology', 'numerology', '---\n', '<<', '!!', '%', '@', '0x', '1e9999', 'null');
    fc.assert(fc.property(fc.array(mark, { maxLength: 120 }), (marks) => survives(bytes(marks.join('')))), { ...RUNS, numRuns: 500 });
  });
  it('good snapshots with one byte changed, taken out or cut off', () => {
    fc.assert(fc.property(nested, fc.constantFrom(...Object.keys(WRITERS)), fc.nat(), fc.integer({ min: 0, max: 255 }), fc.constantFrom('change', 'drop', 'cut'), ({ group, settings: flat }, syntax, place, byte, how) => {
      const good = bytes(WRITERS[syntax](group, flat));
      fc.pre(good.length > 0);
      const at = place % good.length;
      const bad = how === 'cut' ? good.slice(0, at) : how === 'drop' ? Uint8Array.from([...good.slice(0, at), ...good.slice(at + 1)]) : good.map((b, i) => (i === at ? byte : b));
      survives(bad);
    }), { ...RUNS, numRuns: 400 });
  });
});
