import type { CaptureReading, SnapshotReading } from '#shared/api/files';
import type { FileKind } from '#shared/vocabulary';
import { startThread } from '../workers/thread.js';

/** What the reading thread is asked: paths on disk, names for messages, the label of raw I/Q. */
export interface ReadingRequest {
  readonly kind: FileKind;
  readonly path: string;
  readonly name: string;
  readonly beside: { readonly path: string; readonly name: string } | null;
  readonly datatype?: string | undefined;
  readonly sampleRateHz?: number | undefined;
  readonly centreFrequencyHz?: number | undefined;
}

export interface Reading {
  readonly capture: CaptureReading | null;
  readonly snapshot: SnapshotReading | null;
  readonly unreadable: { readonly code: string; readonly message: string } | null;
}

const LONGEST_MS = 20_000;
const TOO_SLOW: Reading = { capture: null, snapshot: null, unreadable: { code: 'too-slow', message: 'Reading this file took too long and was stopped. Check that it is what its name says, and send it again.' } };
const TOO_HEAVY: Reading = { capture: null, snapshot: null, unreadable: { code: 'too-heavy', message: 'This file needs more memory to read than Crosstie gives it. Check that it is what its name says.' } };

/** Reads an upload in a thread of its own: a hostile file can stop that thread and nothing else. */
export function readUpload(request: ReadingRequest): Promise<Reading> {
  return new Promise((resolve, reject) => {
    const thread = startThread('files/reading-thread', { request }, { maxOldGenerationSizeMb: 512 });
    const timer = setTimeout(() => settle(() => resolve(TOO_SLOW)), LONGEST_MS);
    function settle(answer: () => void): void {
      clearTimeout(timer);
      void thread.terminate();
      answer();
    }
    thread.once('message', (reading: Reading) => settle(() => resolve(reading)));
    thread.once('error', (error: NodeJS.ErrnoException) => settle(() => error.code === 'ERR_WORKER_OUT_OF_MEMORY' ? resolve(TOO_HEAVY) : reject(error)));
  });
}
