import { createHash, randomBytes } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createWorld, ISSUER, issueOn, type World } from '../support/world.js';

let world: World;
beforeAll(async () => {
  world = await createWorld({ PARTY_QUOTA_BYTES: '50000' });
});
afterAll(() => world.close());

async function file(): Promise<string> {
  const filed = await world.as('mara').post('/api/issues').send(issueOn(world));
  return `/api/issues/SKH/${filed.body.number}`;
}
const version = async (path: string) => (await world.as('mara').get(path)).body.version as number;
const statuses = (answers: { status: number }[]) => answers.map(({ status }) => status).toSorted((a, b) => a - b);

describe('at the same moment', () => {
  it('two changes of one reading: one is made, the other is told', async () => {
    const path = await file();
    const read = await version(path);
    const answers = await Promise.all(['One headline', 'Another headline', 'A third headline'].map((title) => world.as('mara').patch(path).send({ version: read, title })));
    expect(statuses(answers)).toEqual([200, 409, 409]);
    expect(await version(path)).toBe(read + 1);
  });

  it('two moves of the stage: one is made', async () => {
    const path = await file();
    const read = await version(path);
    const answers = await Promise.all([world.as('rao').post(`${path}/moves`).send({ version: read, to: 'taken-up' }), world.as('ines').post(`${path}/moves`).send({ version: read, to: 'taken-up' })]);
    expect(statuses(answers)).toEqual([200, 409]);
    const { rows } = await world.admin.query("select 1 from stage_intervals s join issues i on i.id = s.issue_id where i.number = $1 and s.ended_at is null", [path.slice(-4)]);
    expect(rows).toHaveLength(1);
  });

  it('two next moves: one party has it', async () => {
    const path = await file();
    const read = await version(path);
    const ask = (partyId: string) => world.as('mara').post(`${path}/next-moves`).send({ version: read, partyId, ask: 'look', due: null });
    expect(statuses(await Promise.all([ask(world.parties.device), ask(world.parties.lab)]))).toEqual([200, 409]);
    expect((await ask(world.parties.device)).status).toBe(409);
  });

  it('the two signatures of a waiver: it takes force', async () => {
    for (let round = 0; round < 3; round++) {
      const path = await file();
      const asked = await world.as('edda').post(`${path}/moves`).send({ version: await version(path), to: 'waived', reason: 'x', endsOn: '2099-01-01' });
      const sign = (person: 'rao' | 'ines') => world.as(person).post(`${path}/waivers/${asked.body.waiver.id}/signatures`);
      expect(statuses(await Promise.all([sign('rao'), sign('ines')]))).toEqual([200, 200]);
      expect((await world.as('mara').get(path)).body.stage).toBe('waived');
    }
  });

  it('two signatures of one party: one counts', async () => {
    const path = await file();
    const asked = await world.as('edda').post(`${path}/moves`).send({ version: await version(path), to: 'waived', reason: 'x', endsOn: '2099-01-01' });
    const sign = () => world.as('rao').post(`${path}/waivers/${asked.body.waiver.id}/signatures`);
    expect(statuses(await Promise.all([sign(), sign()]))).toEqual([200, 409]);
    expect((await world.as('mara').get(path)).body.stage).toBe('raised');
  });

  it('one issue filed twice with one key: both get the one', async () => {
    const body = issueOn(world);
    const answers = await Promise.all([1, 2, 3].map(() => world.as('mara').post('/api/issues').send(body)));
    expect(statuses(answers)).toEqual([200, 200, 200]);
    expect(new Set(answers.map((answer) => answer.body.number)).size).toBe(1);
  });

  it('several issues: each has a number of its own', async () => {
    const answers = await Promise.all(Array.from({ length: 6 }, () => world.as('mara').post('/api/issues').send(issueOn(world))));
    expect(statuses(answers)).toEqual([200, 200, 200, 200, 200, 200]);
    expect(new Set(answers.map((answer) => answer.body.number)).size).toBe(6);
  });

  it('several decodes: each has a number of its own', async () => {
    const upload = await world.as('mara').post('/api/snapshots?programme=SKH&side=a&reach=everyone').attach('file', Buffer.from('cyclic_prefix = normal\n'), 'a.conf');
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { snapshotAFileId: upload.body.id }));
    const ask = () => world.as('mara').post(`/api/issues/SKH/${filed.body.number}/decodes`).send({ captureFileId: null, snapshotAFileId: upload.body.id, snapshotBFileId: null });
    const answers = await Promise.all([ask(), ask(), ask()]);
    expect(statuses(answers)).toEqual([200, 200, 200]);
    expect(answers.map((answer) => answer.body.number).toSorted()).toEqual([2, 3, 4]);
  });

  it('one draft filed with two issues: it stands on one', async () => {
    const upload = await world.as('mara').post('/api/attachments?programme=SKH').attach('file', Buffer.from('x'), 'a.txt');
    const answers = await Promise.all([1, 2].map(() => world.as('mara').post('/api/issues').send(issueOn(world, { fileIds: [upload.body.id] }))));
    expect(statuses(answers)).toEqual([200, 409]);
  });

  it('uploads that fit the quota one by one and not together: what fits is kept', async () => {
    const send = () => world.as('rao').post('/api/attachments?programme=SKH').attach('file', Buffer.alloc(20_000, 1), 'a.bin');
    const answers = await Promise.all([send(), send(), send()]);
    expect(statuses(answers)).toEqual([201, 201, 413]);
  });

  it('one invitation opened by two people: one comes in, once', async () => {
    for (let round = 0; round < 3; round++) {
      const token = randomBytes(32);
      const hash = createHash('sha256').update(token).digest();
      await world.admin.query(`insert into invitations (programme_id, party_id, email, role, token_hash, invited_by, expires_at) values ($1, $2, 'new@radio.example', 'observer', $3, 'x', now() + interval '1 day')`, [world.programmeId, world.parties.radio, hash]);
      const open = (subject: string) => world.services.database.rows<{ outcome: string }>(
        `select outcome from auth.begin_session($1, $2, 'new@radio.example', true, 'New', $3, $4, interval '1 hour', interval '1 day')`, [ISSUER, subject, randomBytes(32), hash]);
      const outcomes = (await Promise.all([open(`one-${round}`), open(`two-${round}`)])).map(([row]) => row?.outcome).toSorted();
      expect(outcomes).toEqual(['ok', 'refused']);
    }
  });

  it('two administrators that remove each other: one stays', async () => {
    await world.admin.query("update memberships set role = 'programme-administrator' where person_id = $1", [world.people.edda]);
    const { rows } = await world.admin.query('select id, person_id from memberships where person_id in ($1, $2)', [world.people.edda, world.people.tobin]);
    const of = (person: string) => rows.find((row) => row.person_id === person).id;
    const answers = await Promise.all([
      world.as('edda').patch(`/api/programmes/SKH/memberships/${of(world.people.tobin)}`).send({ role: 'observer' }),
      world.as('tobin').patch(`/api/programmes/SKH/memberships/${of(world.people.edda)}`).send({ role: 'observer' }),
    ]);
    expect(answers.filter(({ status }) => status === 204)).toHaveLength(1);
    const { rows: left } = await world.admin.query("select 1 from memberships where left_at is null and role = 'programme-administrator'");
    expect(left).toHaveLength(1);
  });
});
