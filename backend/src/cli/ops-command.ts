import { BackupError } from '../ops/manifest.js';

/** A command used wrongly; the message shows how it is meant. */
export class UsageError extends Error {
  override name = 'UsageError';
}

/** An address or folder that npm run set or the person must. */
export function needed(name: string): string {
  const value = process.env[name]?.trim();
  if (!value) throw new UsageError(`Set ${name}; the README's table says what it takes.`);
  return value;
}

export function say(line: string): void {
  process.stdout.write(`${line}\n`);
}

/** Runs a command; a foreseen failure is one plain line, exit code 1. */
export async function runOpsCommand(work: () => Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    const plain = error instanceof BackupError || error instanceof UsageError;
    process.stderr.write(`${plain ? error.message : describe(error)}\n`);
    process.exitCode = 1;
  }
}

function describe(error: unknown): string {
  return error instanceof Error ? error.message : String(error);
}
