import type { Worker } from 'node:worker_threads';
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

/** One thread is kept warm; a hostile file can stop it and nothing else, and the next file gets another. */
let idle: Worker | null = null;
let turn: Promise<unknown> = Promise.resolve();

/** Reads an upload in a thread of its own, one at a time. */
export function readUpload(request: ReadingRequest): Promise<Reading> {
  const reading = turn.then(() => readNow(request));
  turn = reading.catch(() => undefined);
  return reading;
}

function readNow(request: ReadingRequest): Promise<Reading> {
  const thread = idle ?? startThread('files/reading-thread', {}, { maxOldGenerationSizeMb: 512 });
  idle = null;
  thread.ref();
  return new Promise((resolve, reject) => {
    const finish = (answer: () => void) => {
      clearTimeout(timer);
      thread.off('message', answered).off('error', failed).off('exit', ended);
      answer();
    };
    const lose = (answer: () => void) => {
      void thread.terminate();
      finish(answer);
    };
    const answered = (reading: Reading) => finish(() => {
      // A warm thread must not keep the process alive.
      thread.unref();
      idle = thread;
      resolve(reading);
    });
    const failed = (error: NodeJS.ErrnoException) => lose(() => error.code === 'ERR_WORKER_OUT_OF_MEMORY' ? resolve(TOO_HEAVY) : reject(error));
    const ended = () => lose(() => reject(new Error('the reading thread ended before it answered')));
    const timer = setTimeout(() => lose(() => resolve(TOO_SLOW)), LONGEST_MS);
    thread.on('message', answered).on('error', failed).on('exit', ended);
    thread.postMessage(request);
  });
}
