import { describe, expect, it } from 'vitest';
import { readGlossary } from '#backend/snapshots/glossary';
import { bytes, read, refusal, values } from './support.js';

const YAML = `
dl.mu:          { parameter: numerology }
phy.cpType:     { parameter: cyclicPrefix, values: { 0: normal, 1: extended } }
rf.centre_kHz:  { parameter: carrierFrequency, unit: kHz }
phy.rot:        { parameter: phaseCompensation, values: { PER_SYMBOL: true, FREE: false } }
`;

describe('a glossary gives a party\'s own words a meaning', () => {
  it('nested keys, numbers and words', () => {
    const reading = read('dl: { mu: 1 }\nphy: { cpType: 1, rot: FREE }\nrf: { centre_kHz: 3489420 }\n', YAML);
    expect(values(reading)).toEqual({ numerology: 1, cyclicPrefix: 'extended', phaseCompensation: false, carrierFrequency: 3489420000 });
    expect(reading.values[1]).toMatchObject({ vocabulary: 'glossary', path: 'phy.cpType', raw: '1', line: 2 });
  });
  it('SECTION.KEY in key = value files', () => {
    expect(values(read('[dl]\nmu = 2\n[phy]\ncpType = 0x1\n', YAML))).toEqual({ numerology: 2, cyclicPrefix: 'extended' });
  });
  it('XML with or without the outermost element, places in lists left out', () => {
    expect(values(read('<config><dl><mu>1</mu></dl><phy><cpType>0</cpType></phy></config>', YAML))).toEqual({ numerology: 1, cyclicPrefix: 'normal' });
    expect(values(read('{"cells": [{"mu": 1}]}', 'cells.mu: { parameter: numerology }'))).toEqual({ numerology: 1 });
  });
  it('as JSON, with nested paths, short forms and other spellings', () => {
    expect(values(read('dl: { mu: 1, scs: 30, id: 9 }\n', '{"dl": {"mu": {"parameter": "numerology"}, "id": {"parameter": "physical-cell-id"}}}'))).toMatchObject({ numerology: 1, physicalCellId: 9 });
    expect(values(read('dl: { mu: 1 }\n', 'dl.mu: numerology\n'))).toEqual({ numerology: 1 });
  });
  it('values match as text or number', () => {
    const glossary = 'a.b: { parameter: spectrumSense, values: { 1.0: inverted, "no": upright } }';
    expect(values(read('a: { b: 1 }', glossary))['spectrumSense']).toBe('inverted');
    expect(values(read('a: { b: NO }', glossary))['spectrumSense']).toBe('upright');
  });
  it('comes before the public names', () => {
    expect(values(read('numerology: 30\n', 'numerology: { parameter: subcarrierSpacing, unit: kHz }'))).toEqual({ subcarrierSpacing: 30000 });
  });
  it('says which value it has no word for, and which of its paths do not occur', () => {
    const reading = read('phy: { cpType: 7 }\n', YAML);
    expect(reading.problems.map((p) => p.code)).toEqual(['value', 'glossary-unused', 'glossary-unused', 'glossary-unused', 'nothing-understood']);
    expect(reading.problems[0].message).toContain('"7"');
  });
});

describe('a glossary that is wrong is refused, with its line', () => {
  it.each([
    ['dl.mu: { parameter: numerolgy }', 1, 'did you mean "numerology"'],
    ['a: { parameter: numerology }\nb: { parameter: colour }', 2, '"colour" is no common parameter'],
    ['a: { parameter: carrierFrequency, unit: furlong }', 1, 'furlong'],
    ['a: { unit: kHz }', 1, '"parameter" is missing'],
    ['a: { parameter: numerology, scale: 2 }', 1, '"scale" is not read'],
    ['a: { parameter: cyclicPrefix, values: [normal] }', 1, '"values" must be a map'],
    ['a: { parameter: numerology }\na: { parameter: band }', 2, 'stands here again'],
    ['- a\n- b\n', 1, ''],
    ['[a]\nb = numerology\n', 1, 'YAML or JSON'],
  ])('%j', (text, line, says) => {
    const error = refusal(() => readGlossary(bytes(text)));
    expect(error.line).toBe(line);
    expect(error.message).toContain(says);
  });
});
