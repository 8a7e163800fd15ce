import type { AirValue, CaptureFacts, SettingValue } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import { compareSnapshots } from '../../backend/src/snapshots/compare.js';
import { readSnapshot } from '../../backend/src/snapshots/read.js';
import type { Evidence } from '../../backend/src/hints/types.js';

export interface Scene {
  readonly a?: string;
  readonly b?: string;
  readonly transmitter?: Side;
  readonly air?: Record<string, SettingValue>;
  readonly method?: Record<string, string>;
  readonly announced?: Record<string, string | number | boolean>;
  readonly centreHz?: number | null;
  readonly rest?: Partial<Evidence>;
}

const FACTS: CaptureFacts = { format: 'sigmf', datatype: 'ci16_le', sampleRateHz: 30.72e6, centreFrequencyHz: 3.5e9, samples: 614400, durationS: 0.02, rmsDbfs: -15, clippedFraction: 0 };

/** Evidence from real snapshot texts and stated air values, each measured with confidence 0.999. */
export function evidenceOf(scene: Scene): Evidence {
  const read = (text: string | undefined) => (text === undefined ? null : readSnapshot(new TextEncoder().encode(text)));
  const air: Record<string, AirValue> = {};
  for (const [name, value] of Object.entries(scene.air ?? {})) air[name] = { value, confidence: 0.999, method: scene.method?.[name] ?? 'measured' };
  const centreFrequencyHz = scene.centreHz === undefined ? FACTS.centreFrequencyHz : scene.centreHz;
  const comparison = compareSnapshots(read(scene.a), read(scene.b), { link: 'air', air, announced: scene.announced ?? {}, centreFrequencyHz });
  return {
    comparison, air, given: { a: scene.a !== undefined, b: scene.b !== undefined }, transmitter: scene.transmitter ?? null,
    capture: scene.air ? { ...FACTS, centreFrequencyHz } : null, announced: scene.announced ?? {}, labels: [], gaps: null, patterns: [], under: [], ...scene.rest,
  };
}
