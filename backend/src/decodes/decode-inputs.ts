import type { DecodeResult, SettingValue } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import { analyse, type Analysis } from '#engine/analyse';
import { ENGINE } from '#engine/version';
import type { OpenedCapture } from '../captures/formats/openCapture.js';
import { decide } from '../hints/decide.js';
import { lookNext } from '../hints/look-next.js';
import { FULL_VIEW, type Evidence, type UnderSettings } from '../hints/types.js';
import { writeHint } from '../hints/wording/writeHint.js';
import { compareSnapshots } from '../snapshots/compare.js';
import type { Comparison, SnapshotReading } from '../snapshots/types.js';
import { declaredSettings } from './declared-settings.js';
import { recordingOf } from './open-recording.js';

/** Everything that one decode is made from; at least one of the three is given. */
export interface DecodeInputs {
  readonly capture: OpenedCapture | null;
  readonly a: SnapshotReading | null;
  readonly b: SnapshotReading | null;
  readonly transmitter: Side | null;
  readonly link?: 'air' | 'fronthaul';
  /** A step's name and a fraction from 0 to 1; throw to stop. */
  readonly onProgress?: (step: string, fraction: number) => void;
}

/**
 * The whole decode, from opened inputs to the contract's result. `inputs` and `timingMs.read`
 * belong to whoever read the files and are left empty.
 */
export function decodeInputs(inputs: DecodeInputs): DecodeResult {
  const began = performance.now();
  const plain = compareSnapshots(inputs.a, inputs.b, { link: linkOf(inputs) });
  const analysis = inputs.capture ? analyse(recordingOf(inputs.capture), { declared: declaredSettings(plain), onProgress: inputs.onProgress }) : null;
  inputs.onProgress?.('comparison', 0.95);
  const comparison = analysis ? comparedWithAir(inputs, analysis) : plain;
  const evidence = evidenceOf(inputs, comparison, analysis);
  const findings = decide(evidence);
  inputs.onProgress?.('done', 1);
  const decode = Math.round((performance.now() - began) * 10) / 10;
  return {
    contract: 1,
    engine: ENGINE,
    inputs: [],
    capture: analysis?.facts ?? null,
    air: { ...analysis?.air },
    comparison: [...comparison.rows],
    hints: findings.map((finding) => writeHint(finding, FULL_VIEW)),
    tried: [...(analysis?.tried ?? []), ...readingNotes(inputs)],
    lookNext: lookNext(evidence, findings),
    timingMs: { read: 0, decode, total: decode },
    plots: analysis?.plots ?? null,
  };
}

function comparedWithAir(inputs: DecodeInputs, analysis: Analysis): Comparison {
  return compareSnapshots(inputs.a, inputs.b, {
    link: linkOf(inputs), air: analysis.air, announced: analysis.announced, centreFrequencyHz: analysis.facts.centreFrequencyHz,
    direction: analysis.air['direction']?.value === 'uplink' ? 'uplink' : 'downlink',
  });
}

/** An I/Q capture is of the air; files that speak of the fronthaul's compression describe a split radio. */
function linkOf({ link, capture, a, b }: DecodeInputs): 'air' | 'fronthaul' {
  if (link) return link;
  const split = [a, b].some((reading) => reading?.values.some((v) => ['compressionMethod', 'iqBitWidth', 'eaxcIds', 'frameStructure'].includes(v.parameter)));
  return capture === null && split ? 'fronthaul' : 'air';
}

function evidenceOf(inputs: DecodeInputs, comparison: Comparison, analysis: Analysis | null): Evidence {
  return {
    comparison,
    given: { a: inputs.a !== null, b: inputs.b !== null },
    transmitter: inputs.transmitter,
    capture: analysis?.facts ?? null,
    air: analysis?.air ?? {},
    announced: (analysis?.announced ?? {}) as Record<string, SettingValue>,
    labels: analysis?.labels ?? [],
    gaps: analysis?.gaps ?? null,
    patterns: analysis?.patterns ?? [],
    under: underSettings(analysis),
  };
}

function underSettings(analysis: Analysis | null): UnderSettings[] {
  return (analysis?.plots.demodulations ?? []).flatMap(({ under, closes, evmPercent, evmRandomPercent }) =>
    under === 'air' || evmPercent === null || evmRandomPercent === null ? [] : [{ side: under, closes, evmPercent, evmRandomPercent }]);
}

/** What the reader of the samples met on the way. */
function readingNotes({ capture }: DecodeInputs): { what: string; result: string }[] {
  if (!capture) return [];
  const bad = capture.samples.notFinite();
  return [
    ...capture.warnings.map((result) => ({ what: 'reading the recording', result })),
    ...(bad > 0 ? [{ what: 'reading the recording', result: `${bad} values are not finite numbers; each was read as zero` }] : []),
  ];
}
