import { describe, expect, it } from 'vitest';
import type { AirValue, CaptureFacts } from '#shared/decode';
import { recordedSignal } from '#backend/generator/scenarios/capture';
import { meets } from '#backend/generator/scenarios/judge';
import { randomScenario } from '#backend/generator/scenarios/random-scenario';
import { detectLte } from '#engine/lte/detect';
import { detectNr } from '#engine/nr/detect';
import type { DetectionContext, TechnologyFinding } from '#engine/types';
import { detectWifi } from '#engine/wifi/detect';

/** The generator and the engine were written apart: what one sends, the other must read. */
const DETECTORS: Record<'nr' | 'lte' | 'wifi', (context: DetectionContext) => TechnologyFinding | null> = { nr: detectNr, lte: detectLte, wifi: detectWifi };
/** Found by the blind estimation of the data, which is not part of these detectors for NR. */
const BLIND = new Set(['subcarrierSpacingHz', 'cyclicPrefix']);

function find(kind: 'nr' | 'lte' | 'wifi', seed: number) {
  const spec = randomScenario(seed, { kind, relation: 'clean', maxRateHz: 23.04e6, snrDb: [15, 25] });
  const { iq, sampleRateHz } = recordedSignal(spec.capture!);
  const samples = iq.length / 2;
  const { centreHz } = spec.capture!.receiver;
  const facts: CaptureFacts = { format: 'sigmf', datatype: 'cf32_le', sampleRateHz, centreFrequencyHz: centreHz, samples, durationS: samples / sampleRateHz, rmsDbfs: null, clippedFraction: null };
  const source = { sampleRateHz, centreFrequencyHz: centreHz, samples, read: (start: number, count: number) => iq.slice(2 * start, 2 * Math.min(samples, start + count)) };
  return { expected: spec.expect.air, finding: DETECTORS[kind]({ source, facts, occupied: null, blind: null }) };
}

describe.each([['nr', 1], ['nr', 9], ['nr', 14], ['lte', 1], ['lte', 9], ['wifi', 2], ['wifi', 5]] as const)('%s, scenario %i', (kind, seed) => {
  it('is read as it was sent', () => {
    const { expected, finding } = find(kind, seed);
    expect(finding).not.toBeNull();
    const read: Record<string, AirValue> = { ...finding!.air, technology: { value: finding!.technology }, spectrumInverted: { value: finding!.spectrumInverted } };
    const missed = Object.entries(expected).filter(([name, due]) => !(kind === 'nr' && BLIND.has(name)) && !meets(read[name], due)).map(([name, due]) => ({ name, due, found: read[name] }));
    expect(missed).toEqual([]);
  });
});
