import type { DecodeResult } from '#shared/decode';
import { parseArguments } from '../../backend/src/cli/decodeArguments.js';
import { memoryBytes } from '../../backend/src/captures/formats/bytes.js';
import { openCapture } from '../../backend/src/captures/formats/openCapture.js';
import { decodeInputs } from '../../backend/src/decodes/decode-inputs.js';
import { readGlossary } from '../../backend/src/snapshots/glossary.js';
import { readSnapshot } from '../../backend/src/snapshots/read.js';
import { caseRecord, makeScenario, scenarioArguments, scenarioFiles, type ScenarioSpec } from '../../backend/src/generator/scenarios/scenario.js';
import type { CaseRecord } from './judge.js';

/** `seconds` of processor time: other work on the machine does not count. */
export interface RunScenario { record: CaseRecord; result: DecodeResult; seconds: number }

/** Generates a scenario and decodes its files, all in memory, as the command would. */
export function runScenario(spec: ScenarioSpec): RunScenario {
  const scenario = makeScenario(spec);
  const files = new Map(scenarioFiles(scenario).map((file) => [file.name, file.bytes]));
  const args = parseArguments(scenarioArguments(scenario));
  const before = process.cpuUsage();
  const capture = args.capture === undefined ? null : openCapture({
    name: args.capture, bytes: memoryBytes(files.get(args.capture)!), datatype: args.datatype, sampleRateHz: args.sampleRateHz, centreFrequencyHz: args.centreFrequencyHz,
    beside: (name) => (files.has(name) ? memoryBytes(files.get(name)!) : null),
  });
  const side = (file: string | undefined, glossary: string | undefined) =>
    file === undefined ? null : readSnapshot(files.get(file)!, { glossary: glossary === undefined ? null : readGlossary(files.get(glossary)!) });
  const result = decodeInputs({ capture, a: side(args.sideA, args.glossaryA), b: side(args.sideB, args.glossaryB), transmitter: args.transmitter ?? null });
  return { record: caseRecord(scenario) as unknown as CaseRecord, result, seconds: process.cpuUsage(before).user / 1e6 };
}
