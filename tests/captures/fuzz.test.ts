import fc from 'fast-check';
import { expect, it } from 'vitest';
import { memoryBytes } from '../../backend/src/captures/formats/bytes.js';
import { CaptureError } from '../../backend/src/captures/formats/captureError.js';
import { openCapture } from '../../backend/src/captures/formats/openCapture.js';

const SEED = 20260302;
const names = fc.constantFrom('x.sigmf-meta', 'x.sigmf', 'x.wav', 'x.iq', 'x.pcap', 'x');
const starts = fc.constantFrom<readonly number[]>([], [...Buffer.from('RIFF\x10\0\0\0WAVEfmt ')], [...Buffer.from('RF64\xff\xff\xff\xffWAVEds64', 'latin1')], [...Buffer.from('{"global":{')], [0x1f, 0x8b], [0xd4, 0xc3, 0xb2, 0xa1]);

/** Opens and reads a little; whatever is wrong has to come as CaptureError. */
function tried(name: string, bytes: Uint8Array, datatype: string | undefined): void {
  try {
    const capture = openCapture({ name, bytes: memoryBytes(bytes), beside: () => memoryBytes(bytes), datatype, sampleRateHz: datatype ? 1e6 : undefined });
    const iq = capture.samples.read(0, 64);
    expect(iq.length).toBeLessThanOrEqual(128);
    expect(iq.every((value) => Number.isFinite(value))).toBe(true);
  } catch (error) {
    expect(error).toBeInstanceOf(CaptureError);
    expect((error as CaptureError).message.length).toBeGreaterThan(20);
  }
}

it('arbitrary bytes under any name are read or refused, never anything else', () => {
  fc.assert(fc.property(names, starts, fc.uint8Array({ maxLength: 700 }), fc.constantFrom(undefined, 'ci16_le', 'cf32_be', 'cu8'), (name, start, rest, datatype) => {
    tried(name, new Uint8Array([...start, ...rest]), datatype);
  }), { seed: SEED, numRuns: 1500 });
});

it('a header with one byte changed is read or refused, never anything else', () => {
  const tar = new Uint8Array(2048);
  tar.set(Buffer.from('rec.sigmf-meta'), 0);
  tar.set(Buffer.from('ustar'), 257);
  fc.assert(fc.property(fc.nat(2047), fc.nat(255), (at, value) => {
    const changed = tar.slice();
    changed[at] = value;
    tried('x.sigmf', changed, undefined);
  }), { seed: SEED, numRuns: 500 });
});
