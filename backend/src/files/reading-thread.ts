import { readFileSync } from 'node:fs';
import { parentPort } from 'node:worker_threads';
import { openFile } from '../captures/fileBytes.js';
import { CaptureError } from '../captures/formats/captureError.js';
import { readGlossary } from '../snapshots/glossary.js';
import { SnapshotError } from '../snapshots/error.js';
import { captureReading } from './capture-reading.js';
import type { Reading, ReadingRequest } from './reading.js';
import { snapshotReading } from './snapshot-reading.js';

const NOTHING: Reading = { capture: null, snapshot: null, unreadable: null };

function read(request: ReadingRequest): Reading {
  if (request.kind === 'snapshot') return { ...NOTHING, snapshot: snapshotReading(readFileSync(request.path), request.beside ? readGlossary(readFileSync(request.beside.path)) : null) };
  if (request.kind === 'glossary') {
    readGlossary(readFileSync(request.path));
    return NOTHING;
  }
  if (request.kind === 'attachment') return NOTHING;
  // The data half of a SigMF pair says nothing by itself; its metadata follows.
  if (request.name.endsWith('.sigmf-data')) return NOTHING;
  const files = [openFile(request.path), ...(request.beside ? [openFile(request.beside.path)] : [])];
  try {
    return { ...NOTHING, capture: captureReading(request, files[0], files[1] ?? null) };
  } finally {
    for (const file of files) file.close();
  }
}

function readOrSay(request: ReadingRequest): Reading {
  try {
    return read(request);
  } catch (error) {
    if (error instanceof CaptureError || error instanceof SnapshotError) return { ...NOTHING, unreadable: { code: error.code, message: error.message } };
    throw error;
  }
}

parentPort?.on('message', (request: ReadingRequest) => parentPort?.postMessage(readOrSay(request)));
