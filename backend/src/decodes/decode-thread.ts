import { readFileSync } from 'node:fs';
import { parentPort, workerData } from 'node:worker_threads';
import { openFile, type OpenFile } from '../captures/fileBytes.js';
import { CaptureError } from '../captures/formats/captureError.js';
import { openCapture } from '../captures/formats/openCapture.js';
import { SnapshotError } from '../snapshots/error.js';
import { readGlossary } from '../snapshots/glossary.js';
import { readSnapshot } from '../snapshots/read.js';
import type { SnapshotReading } from '../snapshots/types.js';
import type { DecodeTask, ThreadMessage } from './decode-task.js';
import { decodeInputs } from './decode-inputs.js';

const task = (workerData as { task: DecodeTask }).task;
const say = (message: ThreadMessage) => parentPort?.postMessage(message);

function run(): void {
  const opened: OpenFile[] = [];
  const began = performance.now();
  try {
    const capture = task.capture ? open(task.capture, opened) : null;
    const a = snapshot('a');
    const b = snapshot('b');
    const readMs = performance.now() - began;
    const result = decodeInputs({
      capture, a, b, transmitter: task.transmitter, link: task.link,
      onProgress: (step, fraction) => say({ kind: 'progress', step, fraction }),
    });
    const total = performance.now() - began;
    say({ kind: 'result', result: { ...result, inputs: [...task.inputs], tried: [...result.tried, ...unread], timingMs: { ...result.timingMs, read: readMs, total } } });
  } catch (error) {
    if (!(error instanceof CaptureError)) throw error;
    say({ kind: 'unreadable', code: error.code, message: error.message });
  } finally {
    for (const file of opened) file.close();
  }
}

function open(capture: NonNullable<DecodeTask['capture']>, opened: OpenFile[]) {
  const bytes = openFile(capture.path);
  opened.push(bytes);
  const beside = capture.besidePath === null ? null : openFile(capture.besidePath);
  if (beside) opened.push(beside);
  return openCapture({ name: capture.name, bytes, beside: () => beside, ...capture.label });
}

const unread: { what: string; result: string }[] = [];

/** A snapshot that cannot be read does not stop the decode of the air; why not is for its owner to see, at the file. */
function snapshot(side: 'a' | 'b'): SnapshotReading | null {
  const file = task.snapshots[side];
  if (!file) return null;
  try {
    const glossary = file.glossaryPath === null ? null : readGlossary(readFileSync(file.glossaryPath));
    return readSnapshot(readFileSync(file.path), { glossary });
  } catch (error) {
    if (!(error instanceof SnapshotError)) throw error;
    unread.push({ what: `reading side ${side.toUpperCase()}'s snapshot`, result: 'it cannot be read; the file says why' });
    return null;
  }
}

run();
