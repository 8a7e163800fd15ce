import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import { extendedPrefix, normalPrefix, type Hypothesis } from '#engine/sync/hypotheses';
import { lagSums } from '#engine/sync/lag-sums';
import { scoreCoherent, stretchOf } from '#engine/sync/score';
import { symbolsOf } from '#engine/ofdm/symbols';
import { periodOf } from '#engine/sync/hypotheses';
import { white } from '../support/small-ofdm.js';
import type { Report } from './report.js';

const RATE = 122.88e6;
const SAMPLES = Math.round(0.02 * RATE);
const ROUNDS = 5;
const HYPOTHESES = [normalPrefix(0), normalPrefix(1), normalPrefix(2), extendedPrefix(60e3)];

/** Time of the engine over that of plain numpy for the same work on the same samples, in the same run, one thread each. */
export default async function bench(report: Report): Promise<void> {
  const iq = white(SAMPLES, 1);
  const peer = await startNumpy(iq);
  try {
    for (const { name, job, run } of jobsOn(iq)) {
      run();
      await peer.seconds(job);
      const ratios: number[] = [];
      for (let round = 0; round < ROUNDS; round++) {
        const theirs = await peer.seconds(job);
        const began = performance.now();
        run();
        ratios.push((performance.now() - began) / 1000 / theirs);
      }
      report(name, ratios, { lowerIsBetter: true });
    }
  } finally {
    await peer.stop();
  }
}

interface Job { readonly name: string; readonly job: string; readonly run: () => void }

function jobsOn(iq: Float32Array): Job[] {
  const working = { iq, rateHz: RATE, bandHz: 0.98 * RATE };
  return [
    { name: 'engine: prefix correlation at 10 lags, 20 ms at 122.88 Msps, time over numpy', job: 'correlations', run: () => {
      for (let lag = 1000; lag < 11_000; lag += 1000) lagSums(working, lag, 16);
    } },
    { name: 'engine: four hypotheses placed and transformed, 20 ms at 122.88 Msps, time over numpy', job: 'hypotheses', run: () => {
      for (const hypothesis of HYPOTHESES) placedAndTransformed(iq, hypothesis);
    } },
  ];
}

function placedAndTransformed(iq: Float32Array, hypothesis: Hypothesis): void {
  const lag = hypothesis.usefulS * RATE;
  const hop = Math.max(1, Math.floor(lag / 64));
  const sums = lagSums({ iq, rateHz: RATE, bandHz: 0.98 * RATE }, lag, hop);
  const { best } = scoreCoherent({ sums, rateHz: RATE }, hypothesis, stretchOf(sums, [{ from: 0, to: sums.re.length }]));
  const grid = {
    startSample: best!.match.phase * periodOf(hypothesis) * RATE, usefulSamples: lag, prefixSamples: hypothesis.prefixesS.map((p) => p * RATE),
    subcarrierSpacingHz: hypothesis.subcarrierSpacingHz, referenceHz: 0, placed: false,
  };
  symbolsOf({ iq, startSample: 0, sampleRateHz: RATE }, grid, { from: 0, to: SAMPLES, lowHz: -0.49 * RATE, highHz: 0.49 * RATE });
}

interface Peer { seconds(job: string): Promise<number>; stop(): Promise<void> }

async function startNumpy(iq: Float32Array): Promise<Peer> {
  const folder = mkdtempSync(join(tmpdir(), 'crosstie-bench-engine-'));
  const file = join(folder, 'samples.cf32');
  writeFileSync(file, Buffer.from(iq.buffer, iq.byteOffset, iq.byteLength));
  const python = ['/usr/bin/python3', 'python3'].find((p) => spawnSync(p, ['-c', 'import numpy'], { stdio: 'ignore' }).status === 0);
  if (!python) throw new Error('numpy is missing: install python3-numpy');
  const child = spawn(python, [fileURLToPath(new URL('engine.py', import.meta.url)), file, String(RATE)], {
    stdio: ['pipe', 'pipe', 'inherit'], env: { ...process.env, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1' },
  });
  const lines = createInterface({ input: child.stdout })[Symbol.asyncIterator]();
  return {
    async seconds(job) {
      child.stdin.write(`${job}\n`);
      const { value, done } = await lines.next();
      if (done) throw new Error('the numpy side ended');
      return Number(value);
    },
    async stop() {
      child.stdin.end();
      if (child.exitCode === null) await once(child, 'exit');
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
