import { existsSync } from 'node:fs';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { dropForgottenDrafts, removeDiscarded } from '#backend/files/sweep';
import { endWaivers } from '#backend/moves/end-waivers';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

let world: World;
let pool: pg.Pool;
beforeAll(async () => {
  world = await createWorld();
  pool = new pg.Pool({ connectionString: world.database.workerUrl, max: 2 });
});
afterAll(async () => {
  await pool.end();
  await world.close();
});

async function upload(kind: string, query: Record<string, string>, file: { name: string; text: string }, person: PersonKey = 'mara'): Promise<string> {
  const sent = await world.as(person).post(`/api/${kind}?${new URLSearchParams({ programme: 'SKH', ...query })}`).attach('file', Buffer.from(file.text), file.name);
  expect(sent.status, JSON.stringify(sent.body)).toBe(201);
  return sent.body.id as string;
}
const onDisk = async (id: string) => {
  const { rows: [row] } = await world.admin.query('select storage_id from files where id = $1', [id]);
  return row ? world.storage.path(row.storage_id) : null;
};
const older = (ids: string[]) => world.admin.query("update files set uploaded_at = now() - interval '25 hours' where id = any($1)", [ids]);
const META = JSON.stringify({ global: { 'core:datatype': 'ci16_le', 'core:sample_rate': 1e6, 'core:version': '1.0.0' }, captures: [{ 'core:sample_start': 0 }], annotations: [] });

describe('drafts', () => {
  it('that were filed nowhere go after a day, with their bytes; younger and filed ones stay', async () => {
    const [old, young, filed] = [await upload('attachments', {}, { name: 'old.txt', text: 'x' }), await upload('attachments', {}, { name: 'young.txt', text: 'x' }), await upload('attachments', {}, { name: 'filed.txt', text: 'x' })];
    expect((await world.as('mara').post('/api/issues').send(issueOn(world, { fileIds: [filed] }))).status).toBe(200);
    await older([old, filed]);
    const [oldPath, youngPath, filedPath] = [await onDisk(old), await onDisk(young), await onDisk(filed)];
    expect(await dropForgottenDrafts(pool)).toBe(1);
    expect(existsSync(oldPath!)).toBe(true);
    expect(await removeDiscarded(pool, world.storage)).toBe(1);
    expect([oldPath, youngPath, filedPath].map((path) => existsSync(path!))).toEqual([false, true, true]);
    expect(await removeDiscarded(pool, world.storage)).toBe(0);
  });

  it('that a younger one was read beside wait for it, and then go with it', async () => {
    const data = await upload('captures', {}, { name: 'a.sigmf-data', text: 'x'.repeat(4000) });
    const meta = await upload('captures', { dataFileId: data }, { name: 'a.sigmf-meta', text: META });
    await older([data]);
    expect(await dropForgottenDrafts(pool)).toBe(0);
    await older([data, meta]);
    expect(await dropForgottenDrafts(pool)).toBe(2);
    expect(await removeDiscarded(pool, world.storage)).toBe(2);
  });

  it('dropped by hand go at once, with what was sent beside them', async () => {
    const data = await upload('captures', {}, { name: 'a.sigmf-data', text: 'x'.repeat(4000) });
    const meta = await upload('captures', { dataFileId: data }, { name: 'a.sigmf-meta', text: META });
    const paths = [await onDisk(data), await onDisk(meta)];
    expect((await world.as('ines').delete(`/api/files/${meta}`)).status).toBe(404);
    expect((await world.as('mara').delete(`/api/files/${meta}`)).status).toBe(204);
    expect(paths.map((path) => existsSync(path!))).toEqual([false, false]);
    expect((await world.as('mara').get(`/api/files/${data}`)).status).toBe(404);
  });
});

describe('a withdrawn file', () => {
  it('of a pair takes the other half with it: no sample of it stays', async () => {
    const data = await upload('captures', {}, { name: 'a.sigmf-data', text: 'x'.repeat(4000) });
    const meta = await upload('captures', { dataFileId: data }, { name: 'a.sigmf-meta', text: META });
    expect((await world.as('mara').post('/api/issues').send(issueOn(world, { captureFileId: meta }))).status).toBe(200);
    const paths = [await onDisk(data), await onDisk(meta)];
    expect((await world.as('mara').delete(`/api/files/${meta}`)).status).toBe(204);
    expect(paths.map((path) => existsSync(path!))).toEqual([false, false]);
    for (const id of [data, meta]) expect((await world.as('mara').get(`/api/files/${id}`)).body).toMatchObject({ withdrawnAt: expect.any(String), capture: null, sha256: '' });
    expect((await world.as('mara').get(`/api/files/${data}/content`)).status).toBe(404);
  });

  it('that is a glossary takes with it what was read with it, and leaves the snapshot', async () => {
    const glossary = await upload('glossaries', { reach: 'compare-only' }, { name: 'words.yaml', text: 'zqword: subcarrierSpacing\n' });
    const snapshot = await upload('snapshots', { side: 'b', glossaryFileId: glossary }, { name: 'own.conf', text: 'zqword = 30000\n' });
    expect((await world.as('mara').post('/api/issues').send(issueOn(world, { snapshotBFileId: snapshot }))).status).toBe(200);
    expect((await world.as('mara').delete(`/api/files/${glossary}`)).status).toBe(204);
    const left = (await world.as('mara').get(`/api/files/${snapshot}`)).body;
    expect(left).toMatchObject({ withdrawnAt: null, snapshot: null, unreadable: { code: 'glossary-withdrawn' } });
    expect(existsSync((await onDisk(snapshot))!)).toBe(true);
    expect(existsSync((await onDisk(glossary))!)).toBe(false);
  });

  it('narrowed to its party leaves the reach of whoever sent it for them', async () => {
    const sent = await upload('snapshots', { side: 'b', ownerPartyId: world.parties.device, reach: 'everyone' }, { name: 'theirs.conf', text: 'cyclic_prefix = normal\n' });
    expect((await world.as('mara').post('/api/issues').send(issueOn(world, { snapshotBFileId: sent }))).status).toBe(200);
    expect((await world.as('mara').patch(`/api/files/${sent}`).send({ reach: 'my-party' })).status).toBe(403);
    expect((await world.as('rao').patch(`/api/files/${sent}`).send({ reach: 'my-party' })).status).toBe(200);
    expect((await world.as('mara').get(`/api/files/${sent}`)).status).toBe(404);
    expect((await world.as('rao').get(`/api/files/${sent}`)).body.reach).toBe('my-party');
  });
});

describe('a waiver whose last day has passed', () => {
  it('returns the issue to Cause agreed, with a next move, a line of history and letters; once', async () => {
    const { body: filed } = await world.as('mara').post('/api/issues').send(issueOn(world));
    const path = `/api/issues/SKH/${filed.number}`;
    const version = async () => (await world.as('rao').get(path)).body.version as number;
    const asked = await world.as('rao').post(`${path}/moves`).send({ version: await version(), to: 'waived', reason: 'Not before spring.', endsOn: '2099-01-01' });
    expect((await world.as('ines').post(`${path}/waivers/${asked.body.waiver.id}/signatures`)).body.stage).toBe('waived');
    expect(await endWaivers(pool)).toBe(0);
    await world.admin.query('update waivers set ends_on = current_date where id = $1', [asked.body.waiver.id]);
    // The last day is still the waiver's.
    expect(await endWaivers(pool)).toBe(0);
    await world.admin.query('update waivers set ends_on = current_date - 1 where id = $1', [asked.body.waiver.id]);
    await world.admin.query('delete from outbox');
    expect(await endWaivers(pool)).toBe(1);
    expect(await endWaivers(pool)).toBe(0);
    const after = (await world.as('mara').get(path)).body;
    expect(after).toMatchObject({ stage: 'cause-agreed', waiver: { inForce: false }, nextMove: { party: { name: 'Tarnbeck Radio' } } });
    const history = (await world.as('mara').get(`${path}/history`)).body.items as { text: string; person: string | null }[];
    expect(history.filter(({ text }) => text.includes('the waiver has ended'))).toEqual([expect.objectContaining({ person: null })]);
    const { rows } = await world.admin.query("select p.subject from outbox o join people p on p.id = o.person_id where o.kind = 'stage'");
    expect(rows.map(({ subject }) => subject)).toEqual(['mara']);
  });

  it('that was asked for and never signed by both changes nothing', async () => {
    const { body: filed } = await world.as('mara').post('/api/issues').send(issueOn(world));
    const path = `/api/issues/SKH/${filed.number}`;
    const { version } = (await world.as('rao').get(path)).body;
    const asked = await world.as('rao').post(`${path}/moves`).send({ version, to: 'waived', reason: 'x', endsOn: '2099-01-01' });
    await world.admin.query('update waivers set ends_on = current_date - 1 where id = $1', [asked.body.waiver.id]);
    expect(await endWaivers(pool)).toBe(0);
    expect((await world.as('mara').get(path)).body.stage).toBe('raised');
  });
});
