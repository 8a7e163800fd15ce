/** What the launcher prints: one plain line for each thing it does. */
import { closeSync, existsSync, fstatSync, openSync, readSync } from 'node:fs';

export function say(line) {
  process.stdout.write(`${line}\n`);
}

export function complain(line) {
  process.stderr.write(`${line}\n`);
}

/** A failure whose message is all that a person needs; no stack is printed for it. */
export class PlainError extends Error {}

/** Ends the process with one clear message for a PlainError, and the stack for anything unforeseen. */
export function fail(error) {
  complain(error instanceof PlainError ? error.message : String(error?.stack ?? error));
  process.exitCode = 1;
}

/** The last lines of a log that were written after its first `from` bytes; read from its end, whatever its length. */
export function lastLines({ logFile: file, logStart: from = 0 }, count = 15) {
  if (!file || !existsSync(file)) return '';
  const handle = openSync(file, 'r');
  try {
    const { size } = fstatSync(handle);
    const bytes = Buffer.alloc(Math.min(Math.max(size - from, 0), 8192));
    readSync(handle, bytes, 0, bytes.length, size - bytes.length);
    return bytes.toString('utf8').trimEnd().split('\n').slice(-count).join('\n');
  } finally {
    closeSync(handle);
  }
}
