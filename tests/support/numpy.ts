import { spawnSync } from 'node:child_process';

/** A Python that has numpy: Debian's own with python3-numpy first. */
const PYTHONS = ['/usr/bin/python3', 'python3'];
let found: string | null = null;

function pythonWithNumpy(): string {
  found ??= PYTHONS.find((python) => spawnSync(python, ['-c', 'import numpy'], { stdio: 'ignore' }).status === 0) ?? null;
  if (!found) throw new Error('numpy is missing: install python3-numpy');
  return found;
}

/**
 * Runs numpy on float32 samples: `script` finds them as the complex array `x` and leaves its
 * answer, an array of real numbers, in `y`.
 */
export function numpy(iq: Float32Array, script: string): Float64Array {
  const program = `import sys, numpy as np
x = np.frombuffer(sys.stdin.buffer.read(), dtype=np.complex64).astype(np.complex128)
${script}
sys.stdout.buffer.write(np.asarray(y, dtype=np.float64).tobytes())`;
  const input = Buffer.from(iq.buffer, iq.byteOffset, iq.byteLength);
  const run = spawnSync(pythonWithNumpy(), ['-c', program], { input, maxBuffer: 1 << 28 });
  if (run.status !== 0) throw new Error(`numpy failed: ${run.stderr.toString()}`);
  return new Float64Array(run.stdout.buffer.slice(run.stdout.byteOffset, run.stdout.byteOffset + run.stdout.byteLength));
}
