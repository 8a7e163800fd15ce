import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { DECODE_STEPS } from '#shared/vocabulary';
import { openMailSink, type MailSink } from '../support/mail-sink.js';
import { ofdmCapture } from '../support/own-ofdm-capture.js';
import { until } from '../support/until.js';
import { startWorker, type WorkerProcess } from '../support/worker-process.js';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

// A decode takes as long as the machine is busy.
vi.setConfig({ testTimeout: 300_000, hookTimeout: 300_000 });

let world: World;
let mail: MailSink;
let worker: WorkerProcess;
const newWorker = () => startWorker(world, { SMTP_URL: mail.url });

beforeAll(async () => {
  world = await createWorld();
  mail = await openMailSink();
  worker = await newWorker();
});
afterAll(async () => {
  await worker?.kill('SIGKILL');
  await mail?.close();
  await world?.close();
});

type Side = 'a' | 'b';
const PARTY = { a: 'radio', b: 'device' } as const;
/** Words that stand in one side's file alone: a key, a comment, a section, and a value that the other does not declare. */
const snapshotOf = (side: Side, spacingKhz: number) => Buffer.from(`# zq${side}comment\nsubcarrier_spacing_khz: ${spacingKhz}\ncyclic_prefix: normal\nzq${side}key: zq${side}value\n`);

async function upload(kind: string, query: Record<string, string>, file: { name: string; bytes: Buffer }, person: PersonKey = 'mara'): Promise<string> {
  const sent = await world.as(person).post(`/api/${kind}?${new URLSearchParams({ programme: 'SKH', ...query })}`).attach('file', file.bytes, file.name);
  expect(sent.status, JSON.stringify(sent.body)).toBe(201);
  return sent.body.id as string;
}
const snapshot = (side: Side, reach: string, spacingKhz: number) =>
  upload('snapshots', { side, ownerPartyId: world.parties[PARTY[side]], reach }, { name: `zq${side}name.yaml`, bytes: snapshotOf(side, spacingKhz) });

async function file(change: Record<string, unknown> = {}): Promise<{ path: string; decodeId: string; issueId: string }> {
  const filed = await world.as('mara').post('/api/issues').send(issueOn(world, change));
  expect(filed.status, JSON.stringify(filed.body)).toBe(200);
  const path = `/api/issues/SKH/${filed.body.number}`;
  const { body } = await world.as('mara').get(path);
  return { path, decodeId: body.decodes[0]?.id ?? '', issueId: body.id };
}
const decodeRow = async (id: string) => (await world.admin.query('select * from decodes where id = $1', [id])).rows[0];
const results = async (id: string) => (await world.admin.query('select audience_party_id as party, attempt, result from decode_results where decode_id = $1', [id])).rows;
const ended = (id: string) => until('the decode has ended', async () => ['done', 'failed'].includes((await decodeRow(id)).state), { timeoutMs: 200_000 });
const issueRow = async (id: string) => (await world.admin.query('select * from issues where id = $1', [id])).rows[0];
const seenBy = async (person: PersonKey, id: string) => (await world.as(person).get(`/api/decodes/${id}`)).text;

describe('a queued decode', () => {
  let decodeId = '';
  let issueId = '';
  const capture = ofdmCapture(0.02);
  beforeAll(async () => {
    const captureFileId = await upload('captures', capture.query, { name: 'crane.sc16', bytes: capture.bytes });
    ({ decodeId, issueId } = await file({ captureFileId, snapshotAFileId: await snapshot('a', 'compare-only', 30), snapshotBFileId: await snapshot('b', 'compare-only', 15) }));
    await ended(decodeId);
  });

  it('travels through the queue as an identifier and nothing else', async () => {
    const { rows } = await world.admin.query("select data from pgboss.job where name = 'decode' union all select data from pgboss.archive where name = 'decode'");
    expect(rows.map(({ data }) => data)).toContainEqual({ decodeId });
    expect(rows.every(({ data }) => Object.keys(data).join() === 'decodeId')).toBe(true);
  });

  it('ends with a result, once for its one attempt, with the engine\'s version and the hashes of what it was made from', async () => {
    const row = await decodeRow(decodeId);
    expect(row, row.error_message).toMatchObject({ state: 'done', attempt: 1, progress: 1, leased_until: null });
    const [whole] = (await results(decodeId)).filter(({ party }) => party === world.parties.lab);
    expect(row.engine_version).toBe(whole.result.engine.version);
    const sha256 = (bytes: Buffer) => createHash('sha256').update(bytes).digest('hex');
    expect(new Set(whole.result.inputs.map((input: { sha256: string }) => input.sha256))).toEqual(new Set([sha256(capture.bytes), sha256(snapshotOf('a', 30)), sha256(snapshotOf('b', 15))]));
  });

  it('told its stages on the way, in order, and that it is done only at the end', async () => {
    const { rows } = await world.admin.query("select step, progress, party_id from live_events where decode_id = $1 and topic = 'decode' order by place", [decodeId]);
    const steps = rows.map(({ step }) => DECODE_STEPS.indexOf(step));
    expect(new Set(steps).size).toBeGreaterThanOrEqual(3);
    expect(steps.toSorted((x, y) => x - y)).toEqual(steps);
    expect(rows.filter(({ step }) => step === 'done')).toHaveLength(1);
    expect(rows.at(-1)).toMatchObject({ step: 'done', progress: 1, party_id: null });
  });

  it('is stored in one version an audience: no party meets the other\'s own words', async () => {
    const stored = await results(decodeId);
    expect(new Set(stored.map(({ party }) => party))).toEqual(new Set([null, world.parties.lab, world.parties.radio, world.parties.device]));
    expect(stored).toHaveLength(4);
    expect(stored.every(({ attempt }) => attempt === 1)).toBe(true);
    expect(await seenBy('ines', decodeId)).toMatch(/zqaname/);
    expect(await seenBy('ines', decodeId)).not.toMatch(/zqb/);
    expect(await seenBy('rao', decodeId)).toMatch(/zqbname/);
    expect(await seenBy('rao', decodeId)).not.toMatch(/zqa/);
    expect(await seenBy('edda', decodeId)).toMatch(/zqaname[^]*zqbname|zqbname[^]*zqaname/);
    const everyones = stored.find(({ party }) => party === null);
    expect(JSON.stringify(everyones.result)).not.toMatch(/zq[ab]/);
  });

  it('leaves its hints, and the likeliest in the register', async () => {
    const [whole] = (await results(decodeId)).filter(({ party }) => party === world.parties.lab);
    const { rows } = await world.admin.query('select rank, code, side, confidence from hints where decode_id = $1 order by rank', [decodeId]);
    expect(rows.length).toBeGreaterThan(0);
    expect(rows).toEqual(whole.result.hints.map((hint: { code: string; side: string; confidence: number }, rank: number) => ({ rank, code: hint.code, side: hint.side, confidence: hint.confidence })));
    expect(await issueRow(issueId)).toMatchObject({ decode_state: 'hint', likely_code: rows[0].code, likely_side: rows[0].side, likely_confidence: rows[0].confidence });
    const listed = (await world.as('rao').get('/api/issues?standing=any')).body.items[0];
    expect(listed.hint.code).toBe(rows[0].code);
  });
});

describe('a decode that cannot be made', () => {
  it('fails with a code and a message that says what to do', async () => {
    const captureFileId = await upload('captures', {}, { name: 'crane.sigmf-meta', bytes: Buffer.from('{"global": {}') });
    const { decodeId, issueId, path } = await file({ captureFileId });
    await ended(decodeId);
    const shown = (await world.as('rao').get(`/api/decodes/${decodeId}`)).body;
    expect(shown).toMatchObject({ state: 'failed', result: null, hints: [], error: { code: expect.stringMatching(/^[a-z-]+$/), message: expect.stringMatching(/.{20}/) } });
    expect(await issueRow(issueId)).toMatchObject({ decode_state: 'failed', likely_code: null });
    const history = (await world.as('ines').get(`${path}/history`)).body.items as { text: string }[];
    expect(history.filter(({ text }) => text === 'decode 1 could not run')).toHaveLength(1);
  });

  it('is not made from files of another kind, of the other side, or from one file laid beside itself', async () => {
    const [a, b] = [await snapshot('a', 'compare-only', 30), await snapshot('b', 'compare-only', 15)];
    const { path } = await file({ snapshotAFileId: a, snapshotBFileId: b });
    const none = { captureFileId: null, snapshotAFileId: null, snapshotBFileId: null };
    for (const asked of [{ ...none, captureFileId: b }, { ...none, snapshotAFileId: b }, { ...none, snapshotAFileId: b, snapshotBFileId: b }]) {
      expect((await world.as('ines').post(`${path}/decodes`).send(asked)).status, JSON.stringify(asked)).toBe(422);
    }
  });
});

describe('a decode of what only my party may see', () => {
  it('is that party\'s alone, and leaves no trace for the others', async () => {
    const { path, issueId } = await file();
    const own = await upload('snapshots', { side: 'b', reach: 'my-party' }, { name: 'zqbname.yaml', bytes: snapshotOf('b', 60) }, 'rao');
    expect((await world.as('rao').post(`${path}/files`).send({ fileIds: [own] })).status).toBe(200);
    const before = await issueRow(issueId);
    const asked = await world.as('rao').post(`${path}/decodes`).send({ captureFileId: null, snapshotAFileId: null, snapshotBFileId: own });
    expect(asked.status, JSON.stringify(asked.body)).toBe(200);
    await ended(asked.body.id);
    expect((await decodeRow(asked.body.id)).state).toBe('done');
    expect((await results(asked.body.id)).map(({ party }) => party)).toEqual([world.parties.device]);
    expect(await seenBy('rao', asked.body.id)).toContain('zqbname');
    for (const person of ['mara', 'edda', 'ines', 'petra'] as const) {
      expect((await world.as(person).get(`/api/decodes/${asked.body.id}`)).status, person).toBe(404);
      const read = await world.as(person).get(path);
      if (read.status === 200) expect(read.body.decodes, person).toEqual([]);
    }
    expect(await issueRow(issueId)).toEqual(before);
    const { rows } = await world.admin.query('select distinct party_id from live_events where decode_id = $1', [asked.body.id]);
    expect(rows).toEqual([{ party_id: world.parties.device }]);
  });
});

describe('a file whose reach is narrowed', () => {
  it('to compare only: the result goes at once and is made again for the fewer, and what people said of a hint stays', async () => {
    const a = await snapshot('a', 'everyone', 30);
    const { decodeId, path } = await file({ snapshotAFileId: a, snapshotBFileId: await snapshot('b', 'everyone', 15) });
    await ended(decodeId);
    expect(await seenBy('rao', decodeId)).toContain('zqaname');
    const [hint] = (await world.as('rao').get(path)).body.hints;
    expect((await world.as('rao').post(`/api/hints/${hint.id}/verdicts`).send({ verdict: 'refuted', reason: 'The file is older.' })).status).toBe(204);
    await worker.kill('SIGTERM');
    expect((await world.as('ines').patch(`/api/files/${a}`).send({ reach: 'compare-only' })).status).toBe(200);
    expect(await results(decodeId)).toEqual([]);
    expect((await decodeRow(decodeId)).state).toBe('queued');
    expect(await seenBy('rao', decodeId)).not.toMatch(/zqa/);
    worker = await newWorker();
    await ended(decodeId);
    expect(await seenBy('rao', decodeId)).not.toMatch(/zqa/);
    expect(await seenBy('ines', decodeId)).toMatch(/zqaname/);
    const after = (await world.as('rao').get(path)).body.hints.find(({ id }: { id: string }) => id === hint.id);
    expect(after.verdicts).toEqual([expect.objectContaining({ verdict: 'refuted', reason: 'The file is older.' })]);
  });

  it('to one party: what derives from it goes, the decode says so, and the register goes back to the decode before', async () => {
    const a = await snapshot('a', 'everyone', 30);
    const { decodeId, path, issueId } = await file({ snapshotAFileId: a });
    await ended(decodeId);
    const before = await issueRow(issueId);
    const b = await upload('snapshots', { side: 'b', reach: 'everyone' }, { name: 'zqbname.yaml', bytes: snapshotOf('b', 15) }, 'rao');
    await world.as('rao').post(`${path}/files`).send({ fileIds: [b] });
    const second = (await world.as('rao').post(`${path}/decodes`).send({ captureFileId: null, snapshotAFileId: a, snapshotBFileId: b })).body;
    await ended(second.id);
    expect((await issueRow(issueId)).likely_code).not.toBeNull();
    expect((await world.as('rao').patch(`/api/files/${b}`).send({ reach: 'my-party' })).status).toBe(200);
    expect(await results(second.id)).toEqual([]);
    expect((await world.admin.query('select 1 from hints where decode_id = $1', [second.id])).rows).toEqual([]);
    expect((await world.as('ines').get(`/api/decodes/${second.id}`)).body).toMatchObject({ inputWithdrawn: true, result: null, hints: [] });
    const { decode_state, likely_code, likely_side, likely_confidence } = await issueRow(issueId);
    expect({ decode_state, likely_code, likely_side, likely_confidence }).toEqual({ decode_state: before.decode_state, likely_code: before.likely_code, likely_side: before.likely_side, likely_confidence: before.likely_confidence });
  });
});

describe('a file that is withdrawn before its decode has ended', () => {
  it('ends the decode without a result', async () => {
    await worker.kill('SIGTERM');
    const a = await snapshot('a', 'everyone', 30);
    const { decodeId } = await file({ snapshotAFileId: a });
    expect((await world.as('mara').delete(`/api/files/${a}`)).status).toBe(204);
    worker = await newWorker();
    const { rows } = await world.admin.query("select 1 from pgboss.job where name = 'decode' and data->>'decodeId' = $1 and state < 'completed'", [decodeId]);
    await expect.poll(async () => (await world.admin.query("select 1 from pgboss.job where name = 'decode' and data->>'decodeId' = $1 and state < 'completed'", [decodeId])).rowCount, { timeout: 30_000 }).toBe(0);
    expect(rows.length).toBeLessThanOrEqual(1);
    expect(await decodeRow(decodeId)).toMatchObject({ state: 'failed', error_code: 'input-withdrawn', input_withdrawn: true, attempt: 0 });
    expect(await results(decodeId)).toEqual([]);
  });
});

describe('a worker that goes', () => {
  const capture = ofdmCapture(0.1);

  async function runningDecode(): Promise<string> {
    const captureFileId = await upload('captures', capture.query, { name: 'long.sc16', bytes: capture.bytes });
    const { decodeId } = await file({ captureFileId });
    await until('the decode runs', async () => (await decodeRow(decodeId)).state === 'running', { everyMs: 20 });
    return decodeId;
  }

  it('killed in the middle: another runs the job again within a minute, and the result is recorded once', async () => {
    const decodeId = await runningDecode();
    await worker.kill('SIGKILL');
    const killedAt = Date.now();
    expect(await decodeRow(decodeId)).toMatchObject({ state: 'running', attempt: 1 });
    worker = await newWorker();
    await until('another attempt runs', async () => (await decodeRow(decodeId)).attempt === 2);
    expect(Date.now() - killedAt).toBeLessThan(60_000);
    await ended(decodeId);
    const row = await decodeRow(decodeId);
    expect(row, row.error_message).toMatchObject({ state: 'done', attempt: 2 });
    expect((await results(decodeId)).map(({ party, attempt }) => ({ party, attempt }))).toEqual([{ party: null, attempt: 2 }]);
    const { rows } = await world.admin.query("select 1 from events where issue_id = $1 and text like 'decode 1 found%'", [row.issue_id]);
    expect(rows).toHaveLength(1);
  });

  it('stopped in order: the next takes over at once', async () => {
    const decodeId = await runningDecode();
    await worker.kill('SIGTERM');
    expect((await decodeRow(decodeId)).leased_until.getTime()).toBeLessThanOrEqual(Date.now());
    worker = await newWorker();
    // Well within the lease that a killed worker would leave behind.
    await until('another attempt runs', async () => (await decodeRow(decodeId)).attempt === 2, { timeoutMs: 15_000 });
    await ended(decodeId);
    expect((await decodeRow(decodeId)).state).toBe('done');
  });

  it('has nothing to complain about', () => {
    expect(worker.complaints).toEqual([]);
  });
});
