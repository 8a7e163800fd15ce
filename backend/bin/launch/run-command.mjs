/** Runs one command to its end. */
import { spawn } from 'node:child_process';
import { PlainError } from './say.mjs';

/**
 * Resolves with the command's exit code and output; never rejects for a non-zero code.
 * `show` lets the output through instead of collecting it. `track` receives the child, so that a
 * caller that is told to stop can end it.
 */
export function runCommand(command, args, { show = false, track, ...options } = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { stdio: ['ignore', show ? 'inherit' : 'pipe', show ? 'inherit' : 'pipe'], ...options });
    track?.(child);
    let output = '';
    child.stdout?.on('data', (bytes) => { output += bytes; });
    child.stderr?.on('data', (bytes) => { output += bytes; });
    child.on('error', reject);
    child.on('close', (code, signal) => resolve({ code: code ?? 1, signal, output }));
  });
}

/** As runCommand, but a failure ends the whole run with what the command said. */
export async function mustRun(command, args, options = {}) {
  const result = await runCommand(command, args, options);
  if (result.code !== 0) {
    const said = result.output.trimEnd().split('\n').slice(-25).join('\n');
    throw new PlainError(`${options.purpose ?? [command, ...args].join(' ')} failed (exit code ${result.code}).\n${said}`);
  }
  return result;
}
