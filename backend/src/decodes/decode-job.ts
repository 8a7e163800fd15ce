import type { Pool } from 'pg';
import type { Logger } from 'pino';
import type { Side } from '#shared/vocabulary';
import type { Storage } from '../files/storage.js';
import { startThread } from '../workers/thread.js';
import type { DecodeTask, ThreadMessage } from './decode-task.js';
import { claim, LEASE_S, renew, reportProgress, storeFailure, storeResult, type Claimed } from './decode-records.js';

const LONGEST_MS = 10 * 60_000;
const PROGRESS_MS = 250;

export interface JobParts {
  readonly pool: Pool;
  readonly storage: Storage;
  readonly log: Pick<Logger, 'info' | 'error' | 'warn'>;
}

/** One decode from claim to record. Safe to run twice: the second run finds nothing to claim. */
export async function runDecode(parts: JobParts, decodeId: string): Promise<void> {
  const claimed = await claim(parts.pool, decodeId);
  if (!claimed) return;
  const task = await taskOf(parts, claimed);
  const outcome = await inThread(parts, claimed, task);
  if (outcome === 'taken-over') return;
  if (outcome.kind === 'result') await storeResult(parts.pool, claimed, outcome.result);
  else await storeFailure(parts.pool, claimed, outcome);
  parts.log.info({ decodeId, attempt: claimed.attempt, outcome: outcome.kind }, 'a decode has ended');
}

interface InputRow { role: string; name: string; sha256: string; storageId: string; options: NonNullable<DecodeTask['capture']>['label']; besideId: string | null; withdrawn: boolean }

async function taskOf({ pool, storage }: JobParts, claimed: Claimed): Promise<DecodeTask> {
  const { rows } = await pool.query<InputRow>(`
    select n.role, f.name, f.sha256, f.storage_id as "storageId", f.options, c.storage_id as "besideId", f.withdrawn_at is not null as withdrawn
    from decode_inputs n join files f on f.id = n.file_id left join files c on c.id = f.companion_id where n.decode_id = $1`, [claimed.id]);
  const input = (role: string) => rows.find((row) => row.role === role && !row.withdrawn);
  const capture = input('capture');
  const snapshot = (side: Side) => {
    const row = input(`snapshot-${side}`);
    return row ? { path: storage.path(row.storageId), glossaryPath: row.besideId ? storage.path(row.besideId) : null } : null;
  };
  return {
    capture: capture ? { path: storage.path(capture.storageId), name: capture.name, besidePath: capture.besideId ? storage.path(capture.besideId) : null, label: capture.options } : null,
    snapshots: { a: snapshot('a'), b: snapshot('b') },
    transmitter: claimed.transmitter, link: claimed.link === 'fronthaul' ? 'fronthaul' : 'air',
    inputs: rows.map((row) => ({ file: row.name, sha256: row.sha256, of: row.role === 'capture' ? 'capture' : row.role.endsWith('a') ? 'a' : 'b' })),
  };
}

type Outcome = Extract<ThreadMessage, { kind: 'result' | 'unreadable' }> | { kind: 'stopped'; code: string; message: string } | 'taken-over';

/** The engine runs in a thread of its own; this process keeps the lease and the progress. */
function inThread({ pool, log }: JobParts, claimed: Claimed, task: DecodeTask): Promise<Outcome> {
  return new Promise((resolve) => {
    const thread = startThread('decodes/decode-thread', { task });
    let reported = 0;
    let lastStep = '';
    const settle = (outcome: Outcome) => {
      clearInterval(lease);
      clearTimeout(limit);
      void thread.terminate();
      resolve(outcome);
    };
    const lease = setInterval(() => {
      renew(pool, claimed).then((kept) => kept || settle('taken-over'), (error: unknown) => log.warn({ error }, 'a lease could not be renewed'));
    }, (LEASE_S * 1000) / 3);
    const limit = setTimeout(() => settle({ kind: 'stopped', code: 'too-slow', message: 'The decode took longer than ten minutes and was stopped. Cut the capture to a few hundred milliseconds and try again.' }), LONGEST_MS);
    thread.on('message', (message: ThreadMessage) => {
      if (message.kind !== 'progress') return settle(message);
      const now = Date.now();
      if (message.step === lastStep && now - reported < PROGRESS_MS) return undefined;
      reported = now;
      lastStep = message.step;
      return void reportProgress(pool, claimed, message).catch((error: unknown) => log.warn({ error }, 'progress could not be written'));
    });
    thread.once('error', (error) => {
      log.error({ error, decodeId: claimed.id }, 'a decode thread failed');
      settle({ kind: 'stopped', code: 'engine-failed', message: 'The engine stopped on this capture. It has been noted; the files are kept.' });
    });
    thread.once('exit', (code) => settle({ kind: 'stopped', code: 'engine-failed', message: `The engine stopped on this capture (exit ${code}). It has been noted; the files are kept.` }));
  });
}
