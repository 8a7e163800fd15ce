import { parseArgs } from 'node:util';
import { randomScenario, type Relation, type ScenarioKind } from '../../backend/src/generator/scenarios/random-scenario.js';
import { judge, type Outcome } from './judge.js';
import { runScenario } from './run-scenario.js';

/**
 * Random scenarios by the hand: what is wrong, by group, and how the probabilities stand.
 *   node --conditions source --import tsx tests/decode/batch.ts --seed N --count N [--kind K] [--relation R] [--fault F]
 */
const { values } = parseArgs({ options: { seed: { type: 'string' }, count: { type: 'string' }, kind: { type: 'string' }, relation: { type: 'string' }, fault: { type: 'string' }, snr: { type: 'string' }, rate: { type: 'string' } } });
const options = {
  ...(values.kind && { kind: values.kind as ScenarioKind }), ...(values.relation && { relation: values.relation as Relation }), ...(values.fault && { fault: values.fault }),
  ...(values.snr && { snrDb: values.snr.split(',').map(Number) as [number, number] }), ...(values.rate && { maxRateHz: Number(values.rate) }),
};
const outcomes: (Outcome & { seconds: number })[] = [];
for (let seed = Number(values.seed ?? 1); seed < Number(values.seed ?? 1) + Number(values.count ?? 10); seed += 1) {
  try {
    const spec = randomScenario(seed, options);
    const { record, result, seconds } = runScenario(spec);
    const outcome = judge(record, result);
    outcomes.push({ ...outcome, seconds });
    if (outcome.wrong.length > 0) console.log(`FAIL ${record.id} ${seconds.toFixed(1)} s [${record.group}] ${spec.about}  top: ${outcome.top}\n     ${outcome.wrong.map((line) => line.slice(0, 260)).join('\n     ')}`);
  } catch (error) {
    console.log(`CRASH ${seed} ${error instanceof Error ? error.stack : String(error)}`);
  }
}
const right = (list: Outcome[], test: (o: Outcome) => boolean) => `${list.filter(test).length}/${list.length}`;
for (const group of [...new Set(outcomes.map((o) => o.group))].sort()) {
  const list = outcomes.filter((o) => o.group === group);
  console.log(`${group.padEnd(24)} hint ${right(list, (o) => o.hintRight)}  all ${right(list, (o) => o.wrong.length === 0)}`);
}
for (const [low, high] of [[0, 0.7], [0.7, 0.8], [0.8, 0.9], [0.9, 0.95], [0.95, 1.01]] as const) {
  const list = outcomes.filter((o) => o.confidence !== null && o.confidence >= low && o.confidence < high);
  if (list.length > 0) console.log(`stated ${low} to ${high}: mean ${(list.reduce((s, o) => s + o.confidence!, 0) / list.length).toFixed(3)}, right ${right(list, (o) => o.hintRight)}`);
}
const brier = outcomes.filter((o) => o.confidence !== null).reduce((s, o) => s + (o.confidence! - (o.hintRight ? 1 : 0)) ** 2, 0) / Math.max(1, outcomes.filter((o) => o.confidence !== null).length);
console.log(`${right(outcomes, (o) => o.wrong.length === 0)} all right, hint ${right(outcomes, (o) => o.hintRight)}, Brier ${brier.toFixed(4)}, mean ${(outcomes.reduce((s, o) => s + o.seconds, 0) / outcomes.length).toFixed(2)} s`);
