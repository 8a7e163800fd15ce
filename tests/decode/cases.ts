import { execFile } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { judge, type CaseRecord, type Outcome } from './judge.js';

/**
 * Runs the decode command over a folder with a cases.json and prints what is right and wrong.
 *   node --conditions source --import tsx tests/decode/cases.ts FOLDER [ID ...]
 */
const [folder, ...only] = process.argv.slice(2);
if (!folder) {
  console.error('usage: cases.ts FOLDER [ID ...]');
  process.exit(2);
}
const root = new URL('../..', import.meta.url).pathname;
const records = (JSON.parse(readFileSync(join(folder, 'cases.json'), 'utf8')) as CaseRecord[]).filter((record) => only.length === 0 || only.includes(record.id));

function run(record: CaseRecord): Promise<{ result: unknown; seconds: number; stderr: string }> {
  const began = performance.now();
  const args = ['--conditions', 'source', '--import', 'tsx', join(root, 'backend/src/cli/decode.ts'), ...record.args];
  const cwd = join(folder!, record.id);
  return new Promise((done) => {
    execFile('node', args, { cwd: root, env: { ...process.env, INIT_CWD: cwd }, maxBuffer: 1 << 28 }, (_, stdout, stderr) => {
      done({ result: stdout ? JSON.parse(stdout) : null, seconds: (performance.now() - began) / 1000, stderr });
    });
  });
}

const outcomes: Outcome[] = [];
for (const record of records) {
  const { result, seconds, stderr } = await run(record);
  const outcome = judge(record, result, stderr);
  outcomes.push(outcome);
  console.log(`${outcome.wrong.length === 0 ? 'pass' : 'FAIL'} ${record.id} [${record.group}] ${seconds.toFixed(1)} s  top: ${outcome.top}`);
  for (const line of outcome.wrong) console.log(`     ${line}`);
}
const passed = outcomes.filter((outcome) => outcome.wrong.length === 0).length;
const hints = outcomes.filter((outcome) => outcome.hintRight).length;
const brier = outcomes.filter((outcome) => outcome.confidence !== null).reduce((sum, outcome) => sum + ((outcome.confidence ?? 0) - (outcome.hintRight ? 1 : 0)) ** 2, 0) / Math.max(1, outcomes.length);
console.log(`${passed} of ${outcomes.length} all right; top hint right in ${hints}; Brier score of the top hint ${brier.toFixed(4)}`);
