/** Long-lived child processes: started in groups of their own, watched, stopped in order. */
import { spawn } from 'node:child_process';
import { closeSync, existsSync, fstatSync, openSync, renameSync, statSync } from 'node:fs';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const LOG_LIMIT_BYTES = 5_000_000;

/** Starts the guard; see guard.mjs. Its end is the end of this process's pipe. */
export function startGuard() {
  const guard = spawn(process.execPath, [fileURLToPath(new URL('guard.mjs', import.meta.url))], {
    stdio: ['pipe', 'ignore', 'ignore'], detached: true, cwd: '/',
  });
  guard.stdin.on('error', () => {});
  const tell = (line) => guard.stdin.write(`${line}\n`);
  return {
    watch: (pid, signal = 'SIGTERM') => tell(`watch ${pid} ${signal}`),
    forget: (pid) => tell(`forget ${pid}`),
    remove: (folder) => tell(`remove ${folder}`),
    async close() {
      guard.stdin.end();
      if (guard.exitCode === null) await once(guard, 'exit');
    },
  };
}

function openLog(file) {
  if (existsSync(file) && statSync(file).size > LOG_LIMIT_BYTES) renameSync(file, `${file}.1`);
  return openSync(file, 'a', 0o600);
}

/**
 * Starts one process of the product in its own group (so that Ctrl-C reaches only the launcher, which
 * then stops the parts in order) with its output in `logFile`.
 * `stopSignal` SIGINT means: to the leader alone (PostgreSQL's fast shutdown).
 */
export function startProcess(name, { command = process.execPath, args, env, logFile, guard, stopSignal = 'SIGTERM', ...options }) {
  const log = openLog(logFile);
  const logStart = fstatSync(log).size;
  const child = spawn(command, args, { stdio: ['ignore', log, log], env, detached: true, ...options });
  closeSync(log);
  const part = { name, logFile, logStart, child, stopping: false, ended: undefined, onUnexpectedEnd: undefined };
  if (child.pid) guard?.watch(child.pid, stopSignal);
  part.exited = new Promise((resolve) => {
    const finish = (how) => {
      part.ended = how;
      if (child.pid) guard?.forget(child.pid);
      resolve(how);
      if (!part.stopping) part.onUnexpectedEnd?.(part);
    };
    child.once('error', (error) => finish(error.message));
    child.once('exit', (code, signal) => finish(signal ? `signal ${signal}` : `exit code ${code}`));
  });
  part.stop = () => stopProcess(part, stopSignal);
  return part;
}

async function stopProcess(part, stopSignal) {
  part.stopping = true;
  if (part.ended !== undefined) return;
  const target = stopSignal === 'SIGINT' ? part.child.pid : -part.child.pid;
  signal(target, stopSignal);
  const timer = setTimeout(() => signal(-part.child.pid, 'SIGKILL'), 15_000);
  await part.exited;
  clearTimeout(timer);
  signal(-part.child.pid, 'SIGKILL');
}

function signal(target, name) {
  try {
    process.kill(target, name);
  } catch {
    // It ended by itself in the meantime.
  }
}
