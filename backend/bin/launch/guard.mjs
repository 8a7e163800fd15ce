/**
 * Outlives the launcher by a moment: when the launcher's end of the pipe closes, however it died,
 * every process it still named is stopped and every folder it named for removal is removed.
 * Lines on standard input: `watch PID SIGNAL`, `forget PID`, `remove FOLDER`.
 * A PID is the leader of a process group of its own.
 */
import { rmSync } from 'node:fs';
import { createInterface } from 'node:readline';
import { setTimeout as delay } from 'node:timers/promises';

const watched = new Map();
const folders = new Set();
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => {});

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal);
    return true;
  } catch {
    return false;
  }
}

/** PostgreSQL's postmaster stops its own processes; a signal to its whole group would disturb that. */
function signalLeader(pid, signal) {
  try {
    process.kill(pid, signal);
  } catch {
    watched.delete(pid);
  }
}

async function stopAll() {
  for (const [pid, signal] of watched) {
    if (signal === 'SIGINT') signalLeader(pid, signal);
    else signalGroup(pid, signal);
  }
  for (let tenths = 0; tenths < 150; tenths++) {
    for (const pid of watched.keys()) if (!signalGroup(pid, 0)) watched.delete(pid);
    if (watched.size === 0) break;
    await delay(100);
  }
  for (const pid of watched.keys()) signalGroup(pid, 'SIGKILL');
  for (const folder of folders) rmSync(folder, { recursive: true, force: true, maxRetries: 5, retryDelay: 200 });
}

const lines = createInterface({ input: process.stdin });
lines.on('line', (line) => {
  const [, verb, rest] = /^(\S+) (.*)$/.exec(line) ?? [];
  if (verb === 'watch') watched.set(Number(rest.split(' ')[0]), rest.split(' ')[1]);
  if (verb === 'forget') watched.delete(Number(rest));
  if (verb === 'remove') folders.add(rest);
});
lines.on('close', () => void stopAll().then(() => process.exit(0)));
