import type { Pool } from 'pg';
import type { Logger } from 'pino';
import type { Side } from '#shared/vocabulary';
import type { Storage } from '../files/storage.js';
import { startThread } from '../workers/thread.js';
import type { DecodeTask, ThreadMessage } from './decode-task.js';
import { claim, LEASE_S, release, renew, reportProgress, storeFailure, storeResult, type Claimed } from './decode-records.js';

const LONGEST_MS = 10 * 60_000;
const PROGRESS_MS = 250;
const THREAD_HEAP_MB = 2048;

export interface JobParts {
  readonly pool: Pool;
  readonly storage: Storage;
  readonly log: Pick<Logger, 'info' | 'error' | 'warn'>;
  /** Decodes that this worker runs at the moment; it adds and removes them. */
  readonly running: Set<Claimed>;
}

/** One decode from claim to record. Safe to run twice: the second run finds nothing to claim. */
export async function runDecode(parts: JobParts, decodeId: string): Promise<void> {
  const claimed = await claim(parts.pool, decodeId);
  if (!claimed) return;
  parts.running.add(claimed);
  try {
    const outcome = await inThread(parts, claimed, await taskOf(parts, claimed));
    if (outcome === 'taken-over') return;
    if (outcome.kind === 'result') await storeResult(parts.pool, claimed, outcome.result);
    else await storeFailure(parts.pool, claimed, outcome);
    parts.log.info({ decodeId, attempt: claimed.attempt, outcome: outcome.kind }, 'a decode has ended');
  } finally {
    parts.running.delete(claimed);
  }
}

/** A worker that stops in order leaves its decodes to the next one at once. */
export async function releaseAll({ pool, running }: Pick<JobParts, 'pool' | 'running'>): Promise<void> {
  for (const claimed of running) await release(pool, claimed);
}

interface InputRow { role: string; name: string; sha256: string; storageId: string; options: NonNullable<DecodeTask['capture']>['label']; besideId: string | null }

async function taskOf({ pool, storage }: JobParts, claimed: Claimed): Promise<DecodeTask> {
  const { rows } = await pool.query<InputRow>(`
    select n.role, f.name, f.sha256, f.storage_id as "storageId", f.options, c.storage_id as "besideId"
    from decode_inputs n join files f on f.id = n.file_id left join files c on c.id = f.companion_id where n.decode_id = $1 order by n.role`, [claimed.id]);
  const input = (role: string) => rows.find((row) => row.role === role);
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
const stopped = (code: string, message: string): Outcome => ({ kind: 'stopped', code, message });

/** The engine runs in a thread of its own; this process keeps the lease and the progress. */
function inThread({ pool, log }: JobParts, claimed: Claimed, task: DecodeTask): Promise<Outcome> {
  return new Promise((resolve) => {
    const thread = startThread('decodes/decode-thread', { task }, { maxOldGenerationSizeMb: THREAD_HEAP_MB });
    const progress = new Progress((message) => reportProgress(pool, claimed, message).catch((error: unknown) => log.warn({ error }, 'progress could not be written')));
    const settle = (outcome: Outcome) => {
      clearInterval(lease);
      clearTimeout(limit);
      void thread.terminate();
      void progress.end().then(() => resolve(outcome));
    };
    const lease = setInterval(() => {
      renew(pool, claimed).then((kept) => kept || settle('taken-over'), (error: unknown) => log.warn({ error }, 'a lease could not be renewed'));
    }, (LEASE_S * 1000) / 4);
    const limit = setTimeout(() => settle(stopped('too-slow', 'The decode took longer than ten minutes and was stopped. Cut the capture to a few hundred milliseconds and try again.')), LONGEST_MS);
    thread.on('message', (message: ThreadMessage) => {
      if (message.kind === 'progress') progress.report(message);
      else settle(message);
    });
    thread.once('error', (error: NodeJS.ErrnoException) => {
      log.error({ error, decodeId: claimed.id }, 'a decode thread failed');
      settle(error.code === 'ERR_WORKER_OUT_OF_MEMORY'
        ? stopped('too-heavy', 'The decode of this capture needs more memory than it is given. Cut the capture to a few hundred milliseconds and try again.')
        : stopped('engine-failed', 'The engine stopped on this capture. It has been noted; the files are kept.'));
    });
    thread.once('exit', (code) => settle(stopped('engine-failed', `The engine stopped on this capture (exit ${code}). It has been noted; the files are kept.`)));
  });
}

interface Step { readonly step: string; readonly fraction: number }

/** Progress as it is written down: every new stage, a few times a second within one, in order. */
class Progress {
  #writing: Promise<void> = Promise.resolve();
  #at = 0;
  #step = '';

  constructor(private readonly write: (step: Step) => Promise<void>) {}

  report({ step, fraction }: Step): void {
    const now = Date.now();
    // Done is what the record says once it is stored.
    if (step === 'done' || (step === this.#step && now - this.#at < PROGRESS_MS)) return;
    this.#at = now;
    this.#step = step;
    this.#writing = this.#writing.then(() => this.write({ step, fraction }));
  }

  end(): Promise<void> {
    return this.#writing;
  }
}
