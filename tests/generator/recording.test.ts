import { createHash } from 'node:crypto';
import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { raw, sigmfArchive, sigmfPair, wav, type Recording } from '#backend/generator/recording';

const RECORDING: Recording = { iq: Float32Array.from([0.5, -0.25, 0, 1, -1, 0.125]), datatype: 'ci16_le', sampleRateHz: 15.36e6, centreHz: 3.5e9 };
const json = (bytes: Uint8Array) => JSON.parse(new TextDecoder().decode(bytes));

describe('SigMF 1.2', () => {
  it('writes the required keys and the hash of the samples', () => {
    const [meta, data] = sigmfPair('x', RECORDING);
    const document = json(meta.bytes);
    expect([meta.name, data.name]).toEqual(['x.sigmf-meta', 'x.sigmf-data']);
    expect(document.global).toMatchObject({ 'core:datatype': 'ci16_le', 'core:sample_rate': 15.36e6, 'core:sha512': createHash('sha512').update(data.bytes).digest('hex') });
    expect(document.captures).toEqual([{ 'core:sample_start': 0, 'core:frequency': 3.5e9 }]);
    expect(document.annotations).toEqual([]);
    expect(data.bytes).toHaveLength(12);
  });
  it('writes what the label claims, and leaves out a centre that is not known', () => {
    const document = json(sigmfPair('x', { ...RECORDING, centreHz: null, stated: { datatype: 'cf32_le', sampleRateHz: 1e6 } })[0].bytes);
    expect(document.global).toMatchObject({ 'core:datatype': 'cf32_le', 'core:sample_rate': 1e6 });
    expect(document.captures).toEqual([{ 'core:sample_start': 0 }]);
  });
});

describe('archive', () => {
  const folder = { path: '' };
  beforeAll(() => { folder.path = mkdtempSync(join(tmpdir(), 'archive-')); });
  afterAll(() => rmSync(folder.path, { recursive: true }));

  it('is unpacked by the system\'s tar to the same pair', () => {
    const archive = sigmfArchive('x', RECORDING);
    writeFileSync(join(folder.path, archive.name), archive.bytes);
    execFileSync('tar', ['xf', archive.name], { cwd: folder.path });
    for (const file of sigmfPair('x', RECORDING)) expect(new Uint8Array(readFileSync(join(folder.path, 'x', file.name)))).toEqual(file.bytes);
  });
});

describe('WAV (RIFF, two channels)', () => {
  it('has the header of the format', () => {
    const { bytes } = wav('x', RECORDING);
    const view = new DataView(bytes.buffer);
    const text = (at: number) => String.fromCharCode(...bytes.subarray(at, at + 4));
    expect([text(0), text(8), text(12), text(36)]).toEqual(['RIFF', 'WAVE', 'fmt ', 'data']);
    expect([view.getUint32(4, true), view.getUint32(40, true)]).toEqual([bytes.length - 8, 12]);
    expect([view.getUint16(20, true), view.getUint16(22, true), view.getUint32(24, true), view.getUint16(32, true), view.getUint16(34, true)]).toEqual([1, 2, 15_360_000, 4, 16]);
    expect([view.getInt16(44, true), view.getInt16(46, true)]).toEqual([16384, -8192]);
  });
  it('marks floats with format code 3', () => {
    const view = new DataView(wav('x', RECORDING, 'float32').bytes.buffer);
    expect([view.getUint16(20, true), view.getUint16(34, true), view.getFloat32(44, true)]).toEqual([3, 32, 0.5]);
  });
});

it('raw samples are named by what they are', () => {
  expect(raw('x', RECORDING).name).toBe('x.sc16');
  expect(raw('x', { ...RECORDING, datatype: 'cu8' }).bytes).toHaveLength(6);
});
