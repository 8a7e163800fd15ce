import { basename } from 'node:path';
import { openFile, type OpenFile } from '../captures/fileBytes.js';
import { CaptureError } from '../captures/formats/captureError.js';
import { openCapture, type OpenedCapture } from '../captures/formats/openCapture.js';
import { SnapshotError } from '../snapshots/error.js';
import { parseArguments, UsageError, type DecodeArguments } from './decodeArguments.js';
import { besideFile, digest, readSmall, resolvePath, type Digest } from './input-files.js';

/**
 * `npm run --silent decode -- [options]`: one JSON object on standard output, progress on
 * standard error. Exit 0: the decode ran; 2: an input could not be read; 1: a fault of our own.
 */

const SNAPSHOT_BYTES = 5 * 1024 * 1024;

/** What could not be read, with the file it concerns. */
class InputFailure extends Error {
  constructor(readonly code: string, message: string, readonly file: string | null) {
    super(message);
  }
}

interface HashedInput { file: string; sha256: string; of: 'capture' | 'a' | 'b' }

async function main(): Promise<void> {
  const began = performance.now();
  const args = parseArguments(process.argv.slice(2));
  const hashing: Promise<HashedInput>[] = [];
  const capture = args.capture === undefined ? null : withFile(args.capture, () => openNamed(args, hashing));
  const snapshots = await readSides(args, hashing);
  const readMs = performance.now() - began;
  // The engine is loaded only now: an unreadable input is answered without waiting for it.
  const { decodeInputs } = await import('../decodes/decode-inputs.js');
  const result = decodeInputs({ capture, ...snapshots, transmitter: args.transmitter ?? null, onProgress: report });
  const inputs = await Promise.all(hashing);
  const total = performance.now() - began;
  print({ ...result, inputs, timingMs: { read: rounded(readMs), decode: result.timingMs.decode, total: rounded(total) } });
}

function openNamed(args: DecodeArguments, hashing: Promise<HashedInput>[]): OpenedCapture {
  const path = resolvePath(args.capture!);
  const opened: OpenFile[] = [];
  const capture = openCapture({
    name: basename(path), bytes: openFile(path), beside: besideFile(path, opened),
    datatype: args.datatype, sampleRateHz: args.sampleRateHz, centreFrequencyHz: args.centreFrequencyHz,
  });
  hashing.push(hashed(args.capture!, path, 'capture'));
  if (capture.dataFile !== null) hashing.push(hashedData(args.capture!, path, capture));
  for (const warning of capture.warnings) note(warning);
  return capture;
}

async function hashed(file: string, path: string, of: HashedInput['of']): Promise<HashedInput> {
  return { file, sha256: (await digest(path)).sha256, of };
}

/** The data file beside the metadata; a stated hash that differs is said, not refused. */
async function hashedData(file: string, path: string, capture: OpenedCapture): Promise<HashedInput> {
  const name = capture.dataFile!;
  const dataPath = path.replace(/[^/\\]*$/, name);
  const found: Digest = await digest(dataPath, capture.statedSha512 !== null);
  if (found.sha512 !== null && found.sha512 !== capture.statedSha512) note(`${name}: its SHA-512 is not the one in core:sha512; the samples may have changed since they were recorded`);
  return { file: file.replace(/[^/\\]*$/, name), sha256: found.sha256, of: 'capture' };
}

async function readSides(args: DecodeArguments, hashing: Promise<HashedInput>[]) {
  const { readSnapshot } = await import('../snapshots/read.js');
  const { readGlossary } = await import('../snapshots/glossary.js');
  const side = (of: 'a' | 'b', file: string | undefined, glossaryFile: string | undefined) => {
    const glossary = glossaryFile === undefined ? null : withFile(glossaryFile, () => readGlossary(readSmall(resolvePath(glossaryFile), SNAPSHOT_BYTES)));
    if (glossaryFile !== undefined) hashing.push(hashed(glossaryFile, resolvePath(glossaryFile), of));
    if (file === undefined) return null;
    const reading = withFile(file, () => readSnapshot(readSmall(resolvePath(file), SNAPSHOT_BYTES), { glossary }));
    hashing.push(hashed(file, resolvePath(file), of));
    for (const problem of reading.problems) note(`${file}: ${problem.message}`);
    return reading;
  };
  return { a: side('a', args.sideA, args.glossaryA), b: side('b', args.sideB, args.glossaryB) };
}

/** Names the file in whatever goes wrong while it is read. */
function withFile<T>(file: string, act: () => T): T {
  try {
    return act();
  } catch (error) {
    if (error instanceof CaptureError || error instanceof SnapshotError) throw new InputFailure(error.code, error.message, file);
    throw error;
  }
}

function report(step: string, fraction: number): void {
  note(`${step} ${Math.round(fraction * 100)} %`);
}

function note(text: string): void {
  process.stderr.write(`${text}\n`);
}

function rounded(ms: number): number {
  return Math.round(ms * 10) / 10;
}

function print(value: unknown): void {
  process.stdout.write(`${JSON.stringify(value, null, 1)}\n`);
}

function fail(error: unknown): void {
  if (error instanceof InputFailure || error instanceof UsageError) {
    process.exitCode = 2;
    print({ error: { code: error.code, message: error.message, file: error instanceof InputFailure ? error.file : null } });
    return;
  }
  const system = (error as NodeJS.ErrnoException | null)?.code;
  process.exitCode = typeof system === 'string' && system.startsWith('E') ? 2 : 1;
  const message = error instanceof Error ? error.message : String(error);
  print({ error: { code: process.exitCode === 2 ? 'unreadable' : 'internal', message: `The decode stopped: ${message}`, file: null } });
}

// A reader that closes early ends the command quietly.
process.stdout.on('error', () => process.exit(process.exitCode ?? 0));
main().catch(fail);
