import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';

export interface SecondCluster {
  ownerUrl: string;
  appUrl: string;
  backupUrl: string;
  stop(): Promise<void>;
}

/** An empty cluster beside the run's own: roles and an empty database, nothing else. */
export async function openSecondCluster(): Promise<SecondCluster> {
  const script = fileURLToPath(new URL('second-cluster.mjs', import.meta.url));
  const child = spawn(process.execPath, [script], { stdio: ['pipe', 'pipe', 'inherit'] });
  const ended = once(child, 'exit');
  const lines = createInterface({ input: child.stdout });
  const first = await Promise.race([once(lines, 'line'), ended.then(() => null)]);
  if (!first) throw new Error('the second cluster did not start');
  const addresses = JSON.parse(String(first[0])) as Record<string, string>;
  return {
    ownerUrl: addresses['DATABASE_OWNER_URL'],
    appUrl: addresses['DATABASE_URL'],
    backupUrl: addresses['DATABASE_BACKUP_URL'],
    async stop() {
      child.stdin.end();
      await ended;
    },
  };
}
