import { describe, expect, it } from 'vitest';
import { decide } from '../../backend/src/hints/decide.js';
import { evidenceOf, type Scene } from './evidence.js';

const top = (scene: Scene) => {
  const [first] = decide(evidenceOf(scene));
  return first ? `${first.code} ${first.side}` : null;
};
const codes = (scene: Scene) => decide(evidenceOf(scene)).map((f) => `${f.code} ${f.side}`);

const nr = (more: object) => JSON.stringify({ technology: 'nr', ...more });
const AIR = { technology: 'nr', subcarrierSpacingHz: 30000, cyclicPrefix: 'normal', physicalCellId: 611, spectrumInverted: false, carrierOffsetHz: 0 };

// Each row is a rule of sides that the decode contract states in words.
describe('whose setting the evidence speaks against', () => {
  it.each<[string, Scene, string | null]>([
    ['the side that the air contradicts', { a: nr({ subcarrierSpacing: 15000 }), b: nr({ subcarrierSpacing: 30000 }), air: AIR }, 'subcarrier-spacing a'],
    ['the other side, mirrored', { a: nr({ subcarrierSpacing: 30000 }), b: nr({ subcarrierSpacing: 15000 }), air: AIR }, 'subcarrier-spacing b'],
    ['both, where the air shows a third value', { a: nr({ physicalCellId: 1 }), b: nr({ physicalCellId: 2 }), air: AIR }, 'physical-cell-id both'],
    ['unknown, where no capture is there', { a: nr({ physicalCellId: 1 }), b: nr({ physicalCellId: 2 }) }, 'physical-cell-id unknown'],
    ['unknown, where the capture does not show it', { a: nr({ physicalCellId: 1 }), b: nr({ physicalCellId: 2 }), air: { ...AIR, physicalCellId: null } }, 'physical-cell-id unknown'],
    ['the transmitter, where both agree against the air', { a: nr({ physicalCellId: 90 }), b: nr({ physicalCellId: 90 }), air: AIR, transmitter: 'b' }, 'physical-cell-id b'],
    ['unknown, where both agree and no transmitter is stated', { a: nr({ physicalCellId: 90 }), b: nr({ physicalCellId: 90 }), air: AIR }, 'physical-cell-id unknown'],
    ['the one snapshot there is, whoever transmits', { a: nr({ physicalCellId: 90 }), air: AIR, transmitter: 'b' }, 'physical-cell-id a'],
    ['nobody, where all agree', { a: nr({ physicalCellId: 611, subcarrierSpacing: 30000 }), b: nr({ physicalCellId: 611 }), air: AIR }, null],
    ['nobody, in other words for the same', { a: nr({ numerology: 1 }), b: nr({ subcarrierSpacing: 30000 }), air: AIR }, null],
    ['the recording, where nobody speaks of the sense', { a: nr({}), b: nr({}), air: { ...AIR, spectrumInverted: true } }, 'spectrum-inversion capture'],
    ['the side that says upright', { a: nr({ spectrumSense: 'inverted' }), b: nr({ spectrumSense: 'upright' }), air: { ...AIR, spectrumInverted: true } }, 'spectrum-inversion b'],
    ['the transmitter, where both say upright', { a: nr({ spectrumSense: 'upright' }), b: nr({ spectrumSense: 'upright' }), air: { ...AIR, spectrumInverted: true }, transmitter: 'a' }, 'spectrum-inversion a'],
    ['nobody, where both say inverted and it is', { a: nr({ spectrumSense: 'inverted' }), b: nr({ spectrumSense: 'inverted' }), air: { ...AIR, spectrumInverted: true } }, null],
    ['the side whose carrier is a raster step away', { a: nr({ carrierFrequency: 3500010000 }), b: nr({ carrierFrequency: 3500040000 }), air: { ...AIR, carrierOffsetHz: 10000 } }, 'carrier-frequency b'],
    ['the side whose broadcast field differs', { a: nr({ dmrsTypeAPosition: 'pos2' }), b: nr({ dmrsTypeAPosition: 'pos3' }), air: AIR, announced: { dmrsTypeAPosition: 'pos2' } }, 'configuration b'],
    ['the side with the wrong transform at the same rate', { a: nr({ fftSize: 2048, sampleRate: 30.72e6 }), b: nr({ fftSize: 1024, sampleRate: 30.72e6 }), air: AIR }, 'fft-size a'],
    ['the side with the three-quarter clock', { a: nr({ fftSize: 1024, sampleRate: 30.72e6 }), b: nr({ fftSize: 1024, sampleRate: 23.04e6 }), air: AIR }, 'sample-rate b'],
    ['nobody, for other transforms with the same spacing', { a: nr({ fftSize: 1024, sampleRate: 30.72e6 }), b: nr({ fftSize: 2048, sampleRate: 61.44e6 }), air: AIR }, null],
    ['the side whose setting the standard forbids', { a: nr({ subcarrierSpacing: 30000, cyclicPrefix: 'extended' }), b: nr({ subcarrierSpacing: 30000 }) }, 'not-permitted a'],
  ])('%s', (_, scene, expected) => {
    expect(top(scene)).toBe(expected);
  });

  it('says a wrong numerology once, with what follows from it', () => {
    const findings = decide(evidenceOf({
      a: nr({ subcarrierSpacing: 15000, resourceBlocks: 106, channelBandwidth: 20e6 }), b: nr({ subcarrierSpacing: 30000, resourceBlocks: 51, channelBandwidth: 20e6 }), air: AIR,
    }));
    expect(findings.map((f) => f.code)).toEqual(['subcarrier-spacing']);
    expect(findings[0]!.consequences).toContain('resourceBlocks');
  });

  it('claims nothing on a capture that shows nothing', () => {
    const nothing = Object.fromEntries(Object.keys(AIR).map((name) => [name, null]));
    expect(codes({ a: nr({ physicalCellId: 1, subcarrierSpacing: 30000 }), b: nr({ physicalCellId: 1 }), air: nothing })).toEqual([]);
  });
});

describe('a carrier that is a little off', () => {
  // TS 38.104 clause 6.5.1 (0.1 ppm at most) and a recorder of ±2 ppm: 2.1 ppm of 3.5 GHz is 7.35 kHz.
  const off = (hz: number, more: object = {}): Scene => ({ a: nr({ carrierFrequency: 3.5e9 }), b: nr({ carrierFrequency: 3.5e9 }), air: { ...AIR, carrierOffsetHz: hz, ...more }, transmitter: 'a' });
  it.each<[number, object, string | null]>([
    [0, {}, null],
    [5_000, {}, null],
    [35_000, { sampleClockOffsetPpm: 10 }, 'reference-clock capture'],
    [-41_300, { sampleClockOffsetPpm: -11.8 }, 'reference-clock capture'],
    [300_000, { sampleClockOffsetPpm: 0 }, 'carrier-frequency a'],
    [30_000, { sampleClockOffsetPpm: 0 }, 'carrier-frequency a'],
    [2_100_000, {}, 'carrier-frequency a'],
  ])('%d Hz with %o', (hz, more, expected) => {
    expect(top(off(hz, more))).toBe(expected);
  });
});
