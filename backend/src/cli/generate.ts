import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parseArgs } from 'node:util';
import { KINDS, randomScenario, RELATIONS, type Relation, type ScenarioKind } from '#backend/generator/scenarios/random-scenario';
import { caseRecord, makeScenario, scenarioFiles } from '#backend/generator/scenarios/scenario';

const USAGE = `usage: generate --seed N --out DIR [--count N] [--kind ${KINDS.join('|')}] [--relation ${RELATIONS.join('|')}] [--fault NAME] [--snr-db LOW,HIGH] [--max-rate HZ]

Writes scenarios (capture, snapshots, glossaries and case.json with arguments and expectation).
With --count, each goes into a folder of its own, and DIR/cases.json holds all records.`;

/** Writes one scenario and returns its record. */
function writeScenario(seed: number, folder: string, options: Parameters<typeof randomScenario>[1]): Record<string, unknown> {
  const scenario = makeScenario(randomScenario(seed, options));
  mkdirSync(folder, { recursive: true });
  for (const file of scenarioFiles(scenario)) writeFileSync(join(folder, file.name), file.bytes);
  const record = caseRecord(scenario);
  writeFileSync(join(folder, 'case.json'), `${JSON.stringify(record, null, 1)}\n`);
  return record;
}

function run(): number {
  const { values } = parseArgs({
    options: {
      seed: { type: 'string' }, out: { type: 'string' }, count: { type: 'string' }, kind: { type: 'string' }, relation: { type: 'string' }, fault: { type: 'string' },
      'snr-db': { type: 'string' }, 'max-rate': { type: 'string' }, help: { type: 'boolean' },
    },
  });
  if (values.help || !values.seed || !values.out || (values.kind && !KINDS.includes(values.kind as ScenarioKind)) || (values.relation && !RELATIONS.includes(values.relation as Relation))) {
    console.error(USAGE);
    return values.help ? 0 : 2;
  }
  const snr = values['snr-db']?.split(',').map(Number);
  const options = {
    ...(values.kind ? { kind: values.kind as ScenarioKind } : {}), ...(values.relation ? { relation: values.relation as Relation } : {}), ...(values.fault ? { fault: values.fault } : {}),
    ...(snr ? { snrDb: [snr[0], snr[1] ?? snr[0]] as const } : {}), ...(values['max-rate'] ? { maxRateHz: Number(values['max-rate']) } : {}),
  };
  const seed = Number(values.seed);
  const count = Number(values.count ?? 1);
  const records = Array.from({ length: count }, (_, i) => {
    const record = writeScenario(seed + i, values.count ? join(values.out!, `s${seed + i}`) : values.out!, options);
    console.log(`${String(record.id)}: ${String(record.about)}`);
    return record;
  });
  if (values.count) writeFileSync(join(values.out, 'cases.json'), `${JSON.stringify(records, null, 1)}\n`);
  return 0;
}

process.exitCode = run();
