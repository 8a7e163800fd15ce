import { request as httpRequest } from 'node:http';
import { createServer, type Server } from 'node:http';
import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import type { AddressInfo } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createWorld, issueOn, type World } from '../support/world.js';

let world: World;
let server: Server;
beforeAll(async () => {
  world = await createWorld({ MAX_SNAPSHOT_BYTES: '20000', MAX_CAPTURE_BYTES: '3000000', PARTY_QUOTA_BYTES: '2500000' });
  server = createServer(world.app).listen(0, '127.0.0.1');
});
afterAll(async () => {
  server.closeAllConnections();
  server.close();
  await world.close();
});

const send = (kind: string, query: Record<string, string>, file: { name: string; bytes: Buffer }, person: 'mara' | 'rao' | 'osk' = 'mara') =>
  world.as(person).post(`/api/${kind}?${new URLSearchParams({ programme: 'SKH', ...query })}`).attach('file', file.bytes, file.name);
const stored = () => readdirSync(join(world.services.config.storageDir, 'files'), { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile()).length
  + readdirSync(join(world.services.config.storageDir, 'incoming')).length;

/** A tone at an eighth of the rate, ci16: enough for a level and a spectrum. */
function tone(samples: number): Buffer {
  const out = Buffer.alloc(samples * 4);
  for (let n = 0; n < samples; n++) {
    out.writeInt16LE(Math.round(16384 * Math.cos((Math.PI * n) / 4)), 4 * n);
    out.writeInt16LE(Math.round(16384 * Math.sin((Math.PI * n) / 4)), 4 * n + 2);
  }
  return out;
}

describe('an upload', () => {
  it('is read at once: a capture shows format, rate, centre, level and a spectrum', async () => {
    const { status, body } = await send('captures', { datatype: 'ci16_le', sampleRateHz: '1920000', centreFrequencyHz: '3500000000' }, { name: 'crane.iq', bytes: tone(20_000) });
    expect(status, JSON.stringify(body)).toBe(201);
    // Half of full scale in both components: 20·log10(0.5) = −6.02 dB.
    expect(body.capture.facts).toMatchObject({ format: 'raw', datatype: 'ci16_le', sampleRateHz: 1_920_000, centreFrequencyHz: 3_500_000_000, samples: 20_000 });
    expect(body.capture.facts.rmsDbfs).toBeCloseTo(-6.02, 1);
    const { x, y } = body.capture.spectrum;
    expect(Math.abs(x[y.indexOf(Math.max(...y))])).toBeGreaterThan(0);
  });

  it('is taken for what it holds, not for its name: an .xml with key = value lines', async () => {
    const { status, body } = await send('snapshots', { side: 'a' }, { name: 'cell.xml', bytes: Buffer.from('[radio]\nsubcarrier_spacing_khz = 30\nunknown_thing = 7\n') });
    expect(status).toBe(201);
    expect(body.snapshot.syntax).toBe('key-value');
    expect(body.snapshot.parameters).toContainEqual(expect.objectContaining({ parameter: 'subcarrierSpacing', value: 30_000, line: 2 }));
    expect(body.snapshot.notUnderstood).toContainEqual(expect.objectContaining({ line: 3 }));
    expect(body.snapshot.missing.length).toBeGreaterThan(0);
  });

  it('that cannot be read is kept and says why', async () => {
    const { status, body } = await send('snapshots', { side: 'a' }, { name: 'broken.json', bytes: Buffer.from('{"radio": {') });
    expect(status).toBe(201);
    expect(body.snapshot).toBeNull();
    expect(body.unreadable.message.length).toBeGreaterThan(20);
  });

  it.each([
    ['<!DOCTYPE a [<!ENTITY b "c">]><a>&b;</a>', 'entity'],
    [`a: &a [x,x,x,x,x,x,x,x,x]\n${'bcdefgh'.split('').map((k, i) => `${k}: &${k} [${`*${'abcdefg'[i]},`.repeat(9)}]`).join('\n')}`, 'alias'],
    ['['.repeat(9000), 'nesting'],
  ])('that is a bomb is refused in words: %#', async (text) => {
    const { body } = await send('snapshots', { side: 'a' }, { name: 'x.yaml', bytes: Buffer.from(text) });
    expect(body.unreadable).toMatchObject({ code: expect.any(String), message: expect.stringMatching(/.{20}/) });
  });

  it('keeps its name for display only', async () => {
    const { body } = await send('attachments', {}, { name: '../../etc/\u202Epasswd', bytes: Buffer.from('x') });
    expect(body.name).toBe('passwd');
  });

  it('is refused before its bytes where it is too large, over quota, or not the caller\'s to send', async () => {
    const before = stored();
    expect((await send('snapshots', {}, { name: 'big.yaml', bytes: Buffer.alloc(40_000, 97) })).status).toBe(413);
    expect((await send('captures', { datatype: 'ci16_le', sampleRateHz: '1e6' }, { name: 'big.iq', bytes: Buffer.alloc(2_600_000) })).status).toBe(413);
    expect((await send('captures', {}, { name: 'a.iq', bytes: tone(10) }, 'osk')).status).toBe(403);
    expect((await world.as('mara').post('/api/captures?programme=QQQ').attach('file', tone(10), 'a.iq')).status).toBe(404);
    expect((await send('snapshots', {}, { name: 'empty.yaml', bytes: Buffer.alloc(0) })).status).toBe(422);
    expect(stored()).toBe(before);
  });

  it('that breaks off leaves nothing', async () => {
    const before = stored();
    await new Promise<void>((resolve) => {
      const broken = httpRequest({ port: (server.address() as AddressInfo).port, method: 'POST', path: '/api/captures?programme=SKH&datatype=ci16_le&sampleRateHz=1000000', headers: {
        cookie: world.cookieOf('mara'), 'x-crosstie': '1', 'content-type': 'multipart/form-data; boundary=b', 'content-length': 500_000,
      } });
      broken.on('error', () => resolve());
      broken.write('--b\r\ncontent-disposition: form-data; name="file"; filename="a.iq"\r\n\r\n');
      broken.write(Buffer.alloc(200_000));
      setTimeout(() => broken.destroy(), 150);
      broken.on('close', () => resolve());
    });
    await expect.poll(stored, { timeout: 5000 }).toBe(before);
  });
});

describe('a stored file', () => {
  let id = '';
  let path = '';
  beforeAll(async () => {
    const sent = await send('snapshots', { side: 'b', reach: 'everyone', ownerPartyId: world.parties.device }, { name: 'měření "1".conf', bytes: Buffer.from('cyclic_prefix = extended\n') });
    id = sent.body.id;
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { snapshotBFileId: id }));
    path = `/api/issues/SKH/${filed.body.number}`;
  });

  it('is served as an attachment that a browser neither sniffs, runs nor keeps', async () => {
    const { status, headers, body } = await world.as('ines').get(`/api/files/${id}/content`).buffer(true).parse((response, done) => {
      const parts: Buffer[] = [];
      response.on('data', (part: Buffer) => parts.push(part)).on('end', () => done(null, Buffer.concat(parts)));
    });
    expect(status).toBe(200);
    expect(body.toString()).toBe('cyclic_prefix = extended\n');
    expect(headers).toMatchObject({ 'x-content-type-options': 'nosniff', 'cache-control': 'private, no-store', 'content-type': 'application/octet-stream' });
    expect(headers['content-security-policy']).toContain('sandbox');
    // RFC 6266: a name beyond ASCII travels in filename*, percent-encoded as UTF-8.
    expect(headers['content-disposition']).toContain("filename*=UTF-8''m%C4%9B");
  });

  it('answers ranges, with access checked on each', async () => {
    const ranged = await world.as('ines').get(`/api/files/${id}/content`).set('range', 'bytes=0-5');
    expect(ranged.status).toBe(206);
    expect(ranged.headers['content-range']).toBe('bytes 0-5/25');
    expect((await world.as('petra').get(`/api/files/${id}/content`).set('range', 'bytes=0-5')).status).toBe(404);
    const { rows } = await world.admin.query("select party_id from audit where action = 'download' and person_id = $1", [world.people.ines]);
    expect(rows.every((row) => row.party_id === world.parties.device)).toBe(true);
    expect(rows.length).toBeGreaterThan(0);
  });

  it('can be narrowed by its party, never widened', async () => {
    const narrowed = await world.as('rao').patch(`/api/files/${id}`).send({ reach: 'compare-only' });
    expect(narrowed.status, JSON.stringify(narrowed.body)).toBe(200);
    expect((await world.as('ines').get(`/api/files/${id}`)).status).toBe(404);
    expect((await world.as('rao').patch(`/api/files/${id}`).send({ reach: 'everyone' })).status).toBe(403);
    expect((await world.as('ines').get(path)).body.files).toContainEqual(expect.objectContaining({ veiled: true, side: 'b' }));
  });

  it('can be withdrawn: the bytes and what was read go, a tombstone stays', async () => {
    expect((await world.as('ines').delete(`/api/files/${id}`)).status).toBe(404);
    expect((await world.as('rao').delete(`/api/files/${id}`)).status).toBe(204);
    expect((await world.as('rao').get(`/api/files/${id}/content`)).status).toBe(404);
    const left = (await world.as('rao').get(`/api/files/${id}`)).body;
    expect(left).toMatchObject({ snapshot: null, sha256: '' });
    expect(left.withdrawnAt).not.toBeNull();
    const { decodes } = (await world.as('mara').get(path)).body;
    expect(decodes[0].inputWithdrawn).toBe(true);
    const { rows } = await world.admin.query('select 1 from snapshot_parameters where file_id = $1', [id]);
    expect(rows).toEqual([]);
  });
});
