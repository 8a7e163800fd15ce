import { describe, expect, it } from 'vitest';
import { openCapture } from '#backend/captures/formats/openCapture';
import { decodeInputs } from '#backend/decodes/decode-inputs';
import { judge } from '#backend/generator/scenarios/judge';
import { randomScenario, type ScenarioKind } from '#backend/generator/scenarios/random-scenario';
import { makeScenario } from '#backend/generator/scenarios/scenario';

const source = (bytes: Uint8Array) => ({ size: bytes.length, read: (offset: number, length: number) => bytes.slice(offset, offset + length) });

/** The generator and the engine were written apart: what one sends, the other must read. */
function readBack(kind: ScenarioKind, seed: number) {
  const spec = randomScenario(seed, { kind, relation: 'capture-only', maxRateHz: 23.04e6, snrDb: [18, 25] });
  const { files, options } = makeScenario(spec).capture!;
  const option = (name: string) => (options.includes(name) ? options[options.indexOf(name) + 1] : undefined);
  const number = (name: string) => (option(name) === undefined ? undefined : Number(option(name)));
  const capture = openCapture({
    name: files[0].name, bytes: source(files[0].bytes),
    beside: (name) => { const file = files.find((f) => f.name === name); return file ? source(file.bytes) : null; },
    datatype: option('--datatype'), sampleRateHz: number('--sample-rate'), centreFrequencyHz: number('--centre-frequency'),
  });
  return { about: spec.about, judgement: judge(spec.expect, decodeInputs({ capture, a: null, b: null, transmitter: null })) };
}

describe.each([['nr', 1], ['nr', 3], ['nr', 5], ['lte', 1], ['lte', 4], ['wifi', 2], ['ofdm', 2]] as const)('%s, scenario %i', (kind, seed) => {
  it('is read as it was sent', () => {
    const { about, judgement } = readBack(kind, seed);
    expect(judgement, about).toMatchObject({ hint: 'right', air: [] });
  });
});
