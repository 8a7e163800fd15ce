import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { memoryBytes } from '../../backend/src/captures/formats/bytes.js';
import { CaptureError } from '../../backend/src/captures/formats/captureError.js';
import { parseDatatype } from '../../backend/src/captures/formats/datatype.js';
import { openCapture, type CaptureRequest } from '../../backend/src/captures/formats/openCapture.js';

const folder = mkdtempSync(join(tmpdir(), 'formats-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const enc = new TextEncoder();
const meta = (global: object, captures: object[] = [{ 'core:sample_start': 0, 'core:frequency': 3.5e9 }]) =>
  JSON.stringify({ global: { 'core:datatype': 'ci16_le', 'core:sample_rate': 1e6, 'core:version': '1.2.5', ...global }, captures, annotations: [] });

function open(name: string, bytes: Uint8Array | string, more: Partial<CaptureRequest> & { data?: Uint8Array } = {}) {
  const data = more.data;
  return openCapture({
    name,
    bytes: memoryBytes(typeof bytes === 'string' ? enc.encode(bytes) : bytes),
    beside: () => (data ? memoryBytes(data) : null),
    ...more,
  });
}

function failure(act: () => unknown): CaptureError {
  try {
    act();
  } catch (error) {
    if (error instanceof CaptureError) return error;
    throw error;
  }
  throw new Error('nothing was refused');
}

/** Writes components with DataView, whose byte order and widths are ECMA-262's, not ours. */
function packed(values: number[], put: (view: DataView, at: number, value: number) => void, width: number): Uint8Array {
  const view = new DataView(new ArrayBuffer(values.length * width));
  values.forEach((value, i) => put(view, i * width, value));
  return new Uint8Array(view.buffer);
}

describe('datatypes', () => {
  const cases: [string, number[], number[], number, (v: DataView, at: number, x: number) => void][] = [
    ['ci16_le', [-32768, 16384, 1, 0], [-1, 0.5, 1 / 32768, 0], 2, (v, at, x) => v.setInt16(at, x, true)],
    ['ci16_be', [-32768, 16384, 1, 0], [-1, 0.5, 1 / 32768, 0], 2, (v, at, x) => v.setInt16(at, x, false)],
    ['ci8', [-128, 64], [-1, 0.5], 1, (v, at, x) => v.setInt8(at, x)],
    ['cu8', [0, 255], [-1, 1], 1, (v, at, x) => v.setUint8(at, x)],
    ['cu16_be', [0, 65535], [-1, 1], 2, (v, at, x) => v.setUint16(at, x, false)],
    ['ci32_le', [-(2 ** 31), 2 ** 30], [-1, 0.5], 4, (v, at, x) => v.setInt32(at, x, true)],
    ['cf32_be', [0.25, -3.5], [0.25, -3.5], 4, (v, at, x) => v.setFloat32(at, x, false)],
    ['cf64_le', [0.25, -3.5], [0.25, -3.5], 8, (v, at, x) => v.setFloat64(at, x, true)],
  ];
  it.each(cases)('reads %s at full scale 1', (datatype, values, expected, width, put) => {
    const capture = open('x.iq', packed(values, put, width), { datatype, sampleRateHz: 1e6 });
    const iq = capture.samples.read(0, 10);
    expect(iq.length).toBe(values.length);
    expected.forEach((want, i) => expect(iq[i]).toBeCloseTo(want, 6));
  });

  it('refuses real and unknown datatypes with what to do', () => {
    expect(failure(() => parseDatatype('rf32_le')).message).toMatch(/real samples/);
    expect(failure(() => parseDatatype('cq15')).code).toBe('unsupported-datatype');
  });
});

describe('windows', () => {
  const bytes = packed(Array.from({ length: 2000 }, (_, i) => i - 1000), (v, at, x) => v.setInt16(at, x, true), 2);

  it('reads any place, and less only at the end', () => {
    const { samples } = open('x.iq', bytes, { datatype: 'ci16_le', sampleRateHz: 1e6 });
    expect(samples.samples).toBe(1000);
    expect(Array.from(samples.read(500, 2), (x) => Math.round(x * 32768))).toEqual([0, 1, 2, 3]);
    expect(samples.read(999, 5).length).toBe(2);
    expect(samples.read(1000, 5).length).toBe(0);
  });

  it('exchanges I and Q under a changed label', () => {
    const capture = open('x.iq', bytes, { datatype: 'ci16_le', sampleRateHz: 1e6 });
    const iq = capture.under({ swapIq: true }).read(500, 1);
    expect(Array.from(iq, (x) => Math.round(x * 32768))).toEqual([1, 0]);
  });

  it('reads NaN and infinity as zero and counts them', () => {
    const floats = packed([Number.NaN, 0.5, Infinity, -0.5], (v, at, x) => v.setFloat32(at, x, true), 4);
    const { samples } = open('x.iq', floats, { datatype: 'cf32_le', sampleRateHz: 1e6 });
    expect(Array.from(samples.read(0, 2))).toEqual([0, 0.5, 0, -0.5]);
    expect(samples.notFinite()).toBe(2);
  });

  it('reads the first of several channels', () => {
    const capture = open('x.sigmf-meta', meta({ 'core:num_channels': 2 }), { data: bytes });
    expect(capture.samples.samples).toBe(500);
    expect(Array.from(capture.samples.read(0, 2), (x) => Math.round(x * 32768))).toEqual([-1000, -999, -996, -995]);
    expect(capture.warnings.join()).toMatch(/2 channels/);
  });
});

describe('SigMF pair', () => {
  const data = new Uint8Array(4000);

  it('reads rate, centre, header and trailing bytes', () => {
    const capture = open('x.sigmf-meta', meta({ 'core:dataset': 'x.bin', 'core:trailing_bytes': 100 }, [{ 'core:sample_start': 0, 'core:header_bytes': 300, 'core:frequency': 2.1e9 }]), { data });
    expect(capture.samples).toMatchObject({ samples: 900, sampleRateHz: 1e6, centreFrequencyHz: 2.1e9 });
    expect(capture.dataFile).toBe('x.bin');
  });

  it('stops where the recorder retuned, and reports announced gaps', () => {
    const capture = open('x.sigmf-meta', meta({}, [
      { 'core:sample_start': 0, 'core:frequency': 1e9, 'core:global_index': 0 },
      { 'core:sample_start': 200, 'core:frequency': 1e9, 'core:global_index': 260 },
      { 'core:sample_start': 600, 'core:frequency': 2e9, 'core:global_index': 660 },
    ]), { data });
    expect(capture.samples.samples).toBe(600);
    expect(capture.announcedGaps).toEqual([{ atSample: 200, missing: 60 }]);
  });

  it.each<[string, string, RegExp]>([
    ['a brace too few', '{"global": {"core:datatype": "ci16_le"},\n"captures": [', /line 2, column 14/],
    ['an unquoted word', '{"global":\n {"core:datatype": ci16_le}}', /line 2/],
    ['no rate', meta({ 'core:sample_rate': undefined }), /core:sample_rate/],
    ['no datatype', meta({ 'core:datatype': undefined }), /core:datatype/],
    ['a rate in words', meta({ 'core:sample_rate': '1 MHz' }), /core:sample_rate/],
    ['a data file elsewhere', meta({ 'core:dataset': '../../etc/x' }), /core:dataset/],
    ['deep nesting', `{"global": ${'['.repeat(5000)}`, /nested deeper/],
  ])('refuses %s and says where', (_, text, where) => {
    expect(failure(() => open('x.sigmf-meta', text, { data })).message).toMatch(where);
  });

  it.each<[string, Uint8Array | undefined, string]>([
    ['no data file', undefined, 'missing-data-file'],
    ['no samples', new Uint8Array(0), 'empty'],
    ['an odd number of bytes', new Uint8Array(4001), 'odd-byte-count'],
    ['half a sample at the end', new Uint8Array(4002), 'truncated'],
  ])('refuses %s', (_, bytes, code) => {
    expect(failure(() => open('x.sigmf-meta', meta({}), bytes ? { data: bytes } : {})).code).toBe(code);
  });

  it('keeps a capture whose bytes would fit another datatype', () => {
    const capture = open('x.sigmf-meta', meta({ 'core:datatype': 'cf32_le' }), { data: new Uint8Array(4004) });
    expect(capture.samples.samples).toBe(500);
    expect(capture.warnings.join()).toMatch(/left over/);
  });
});

describe('SigMF archive', () => {
  const pack = (name: string, args: string[]) => {
    execFileSync('tar', ['-C', folder, ...args, '-cf', join(folder, name), 'rec.sigmf-meta', 'rec.sigmf-data']);
    return new Uint8Array(readFileSync(join(folder, name)));
  };
  writeFileSync(join(folder, 'rec.sigmf-meta'), meta({}));
  writeFileSync(join(folder, 'rec.sigmf-data'), packed([1, 2, 3, 4], (v, at, x) => v.setInt16(at, x, true), 2));

  // GNU tar is the independent writer; its three formats differ in headers and long names.
  it.each(['ustar', 'pax', 'gnu'])('reads samples from a %s archive where they lie', (format) => {
    const capture = open('r.sigmf', pack(`${format}.sigmf`, [`--format=${format}`]));
    expect(capture.format).toBe('sigmf-archive');
    expect(Array.from(capture.samples.read(1, 1), (x) => Math.round(x * 32768))).toEqual([3, 4]);
  });

  it('refuses compression, links, names that leave it, and cut archives', () => {
    expect(failure(() => open('r.sigmf', pack('z.sigmf', ['-z']))).code).toBe('compressed');
    symlinkSync('rec.sigmf-data', join(folder, 'link'));
    execFileSync('tar', ['-C', folder, '-cf', join(folder, 'l.sigmf'), 'rec.sigmf-meta', 'link']);
    expect(failure(() => open('l.sigmf', new Uint8Array(readFileSync(join(folder, 'l.sigmf'))))).code).toBe('unsafe-archive');
    const outside = pack('o.sigmf', ['--format=ustar', '-P', '--transform=s,^,../,']);
    expect(failure(() => open('o.sigmf', outside)).code).toBe('unsafe-archive');
    expect(failure(() => open('c.sigmf', pack('c.sigmf', ['--format=ustar']).slice(0, 1500))).code).toBe('truncated');
  });
});

/** A WAV file by hand after RIFF's chunk layout. */
function wav(fields: { channels?: number; bits?: number; tag?: number; statedData?: number; form?: string; extra?: Uint8Array } = {}, data: Uint8Array = new Uint8Array(16)): Uint8Array {
  const { channels = 2, bits = 16, tag = 1, statedData = data.length, form = 'RIFF', extra = new Uint8Array(0) } = fields;
  const out = new Uint8Array(44 + extra.length + data.length);
  const view = new DataView(out.buffer);
  out.set(enc.encode(`${form}    WAVEfmt `));
  view.setUint32(16, 16, true);
  view.setUint16(20, tag, true);
  view.setUint16(22, channels, true);
  view.setUint32(24, 7680000, true);
  view.setUint16(32, (channels * bits) / 8, true);
  view.setUint16(34, bits, true);
  out.set(extra, 36);
  out.set(enc.encode('data'), 36 + extra.length);
  view.setUint32(40 + extra.length, statedData, true);
  out.set(data, 44 + extra.length);
  return out;
}

describe('WAV', () => {
  it('reads two channels as I and Q, and lets the given rate win', () => {
    const capture = open('x.wav', wav({}, packed([16384, -16384], (v, at, x) => v.setInt16(at, x, true), 2)), { centreFrequencyHz: 1e9 });
    expect(capture.label).toMatchObject({ sampleRateHz: 7680000, centreFrequencyHz: 1e9 });
    expect(Array.from(capture.samples.read(0, 1))).toEqual([0.5, -0.5]);
    expect(open('x.wav', wav(), { sampleRateHz: 5e6 }).label.sampleRateHz).toBe(5e6);
  });

  it('reads 24-bit, 8-bit and float samples', () => {
    expect(Array.from(open('x.wav', wav({ bits: 24 }, new Uint8Array([0, 0, 0xc0, 0, 0, 0x40]))).samples.read(0, 1))).toEqual([-0.5, 0.5]);
    expect(Array.from(open('x.wav', wav({ bits: 8 }, new Uint8Array([0, 255]))).samples.read(0, 1))).toEqual([-1, 1]);
    expect(open('x.wav', wav({ bits: 32, tag: 3 })).label.datatype.name).toBe('cf32_le');
  });

  it('takes sizes that a stopped recorder left wrong, and says so', () => {
    for (const statedData of [0, 0xffffffff, 4000]) {
      const capture = open('x.wav', wav({ statedData }));
      expect(capture.samples.samples).toBe(4);
      expect(capture.warnings.join()).toMatch(/header states/);
    }
  });

  it('reads the true size of RF64 and the centre of auxi', () => {
    const ds64 = new Uint8Array(36);
    ds64.set(enc.encode('ds64'));
    new DataView(ds64.buffer).setUint32(4, 28, true);
    new DataView(ds64.buffer).setBigUint64(16, 8n, true);
    expect(open('x.wav', wav({ form: 'RF64', extra: ds64, statedData: 0xffffffff })).samples.samples).toBe(2);
    const auxi = new Uint8Array(72);
    auxi.set(enc.encode('auxi'));
    new DataView(auxi.buffer).setUint32(4, 64, true);
    new DataView(auxi.buffer).setUint32(40, 2125100000, true);
    expect(open('x.wav', wav({ extra: auxi })).label.centreFrequencyHz).toBe(2125100000);
  });

  it.each<[string, Uint8Array, string]>([
    ['one channel', wav({ channels: 1 }), 'unsupported-format'],
    ['a-law', wav({ tag: 6, bits: 8 }), 'unsupported-format'],
    ['no data chunk', wav().slice(0, 36), 'truncated'],
    ['a header cut short', enc.encode('RIFF    WA'), 'truncated'],
    ['no samples', wav({}, new Uint8Array(0)), 'empty'],
    ['another file under its name', enc.encode('no wave at all here'), 'mislabelled'],
  ])('refuses %s', (_, bytes, code) => {
    expect(failure(() => open('x.wav', bytes)).code).toBe(code);
  });
});

describe('what is not an I/Q capture', () => {
  it.each<[string, Uint8Array, string]>([
    ['x.iq', new Uint8Array(0), 'empty'],
    ['x.iq', new Uint8Array(400), 'missing-label'],
    ['x.iq', new Uint8Array([0x1f, 0x8b, 8, 0, 0, 0]), 'compressed'],
    ['x.sigmf', new Uint8Array(2048), 'mislabelled'],
    ['x.pcap', new Uint8Array(40), 'not-yet-supported'],
    ['x.iq', new Uint8Array([0xd4, 0xc3, 0xb2, 0xa1, 2, 0, 4, 0]), 'not-yet-supported'],
    ['x.iq', new Uint8Array([0x0a, 0x0d, 0x0d, 0x0a, 28, 0, 0, 0]), 'not-yet-supported'],
  ])('%s is answered with a code', (name, bytes, code) => {
    expect(failure(() => open(name, bytes)).code).toBe(code);
  });
});
