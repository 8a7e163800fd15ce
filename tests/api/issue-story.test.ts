import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createWorld, issueOn, type World } from '../support/world.js';

let world: World;
beforeAll(async () => {
  world = await createWorld();
});
afterAll(() => world.close());

const upload = (person: 'mara' | 'ines' | 'rao', kind: string, query: Record<string, string>, file: [string, string]) =>
  world.as(person).post(`/api/${kind}?${new URLSearchParams({ programme: 'SKH', ...query })}`).attach('file', Buffer.from(file[1]), file[0]);

describe('an issue from filing to settled', () => {
  let path = '';

  it('is filed with two snapshots and reaches its parties only', async () => {
    const a = await upload('mara', 'snapshots', { side: 'a', ownerPartyId: world.parties.radio, reach: 'compare-only' }, ['cell.yaml', 'subcarrier_spacing_khz: 15\ncyclic_prefix: normal\ncarrier_frequency_mhz: 3489.42\n']);
    expect(a.status, JSON.stringify(a.body)).toBe(201);
    expect(a.body.snapshot.parameters.map((p: { parameter: string }) => p.parameter)).toContain('subcarrierSpacing');
    const b = await upload('mara', 'snapshots', { side: 'b', ownerPartyId: world.parties.device, reach: 'compare-only' }, ['ue.conf', '[radio]\nsubcarrier_spacing_khz = 30\n']);
    expect(b.status).toBe(201);
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { snapshotAFileId: a.body.id, snapshotBFileId: b.body.id }));
    expect(filed.status, JSON.stringify(filed.body)).toBe(200);
    path = `/api/issues/${filed.body.programme}/${filed.body.number}`;
    for (const person of ['mara', 'edda', 'ines', 'rao', 'osk'] as const) {
      const read = await world.as(person).get(path);
      expect(read.status, `${person}: ${JSON.stringify(read.body)}`).toBe(200);
    }
    for (const person of ['jory', 'petra', 'tobin'] as const) {
      const expected = person === 'tobin' ? 200 : 404;
      expect((await world.as(person).get(path)).status, person).toBe(expected);
    }
  });

  it('is the same for one filed twice with one key', async () => {
    const body = issueOn(world, { linkId: world.links.wifi, lastRung: { downlink: null, uplink: null }, buildAId: null, buildBId: null });
    const first = await world.as('mara').post('/api/issues').send(body);
    const second = await world.as('mara').post('/api/issues').send(body);
    expect(second.body).toEqual(first.body);
  });

  it('shows a compare-only snapshot whole to its owner and the lab, and as a veil to the other side', async () => {
    const forInes = (await world.as('ines').get(path)).body;
    expect(forInes.files.filter((file: { veiled?: boolean }) => file.veiled)).toEqual([expect.objectContaining({ side: 'b', reach: 'compare-only' })]);
    expect(JSON.stringify(forInes)).not.toContain('ue.conf');
    expect(JSON.stringify(forInes)).toContain('cell.yaml');
    const forMara = (await world.as('mara').get(path)).body;
    expect(JSON.stringify(forMara)).toContain('ue.conf');
  });

  it('asks the other end first, and the register of that party shows it', async () => {
    const mine = await world.as('rao').get('/api/issues?move=mine');
    expect(mine.status, JSON.stringify(mine.body)).toBe(200);
    const issue = (await world.as('mara').get(path)).body;
    expect(issue.nextMove.party.shortName).toBe('Tarnbeck');
    expect((await world.as('ines').get('/api/issues?move=mine')).body.items.map((row: { number: string }) => row.number)).toContain(issue.number);
  });

  it('is answered in the thread, for everyone or for one party', async () => {
    expect((await world.as('rao').post(`${path}/entries`).send({ body: 'Checking what runs.', reach: 'everyone' })).status).toBe(200);
    expect((await world.as('rao').post(`${path}/entries`).send({ body: 'It is our 60 kHz file.', reach: 'my-party' })).status).toBe(200);
    const forInes = await world.as('ines').get(`${path}/entries`);
    expect(forInes.body.items.map((entry: { body: string }) => entry.body)).toEqual(['Checking what runs.']);
    expect((await world.as('osk').post(`${path}/entries`).send({ body: 'x' })).status).toBe(403);
  });

  it('moves by the table only, and settles with a clean retest only', async () => {
    const version = async () => (await world.as('mara').get(path)).body.version as number;
    const move = async (person: 'mara' | 'rao', body: object) => world.as(person).post(`${path}/moves`).send({ version: await version(), ...body });
    expect((await move('rao', { to: 'settled' })).status).toBe(403);
    expect((await move('rao', { to: 'taken-up' })).status).toBe(200);
    expect((await move('rao', { to: 'cause-agreed' })).status).toBe(422);
    expect((await move('rao', { to: 'cause-agreed', reason: 'The terminal reads the wrong file.' })).status).toBe(200);
    expect((await move('rao', { to: 'change-offered' })).status).toBe(422);
    expect((await world.as('rao').get(path)).body.moves.find(({ to }: { to: string }) => to === 'change-offered').buildSides).toEqual(['b']);
    const others = await move('rao', { to: 'change-offered', buildId: world.builds.radio1 });
    expect([others.status, JSON.stringify(others.body)]).toEqual([422, expect.stringContaining('its own party or the test lab offers it')]);
    expect((await move('rao', { to: 'change-offered', buildId: world.builds.device2 })).status).toBe(200);
    expect((await move('rao', { to: 'under-retest' })).status).toBe(403);
    expect((await move('mara', { to: 'under-retest' })).status).toBe(200);
    const early = await move('mara', { to: 'settled' });
    expect(early.status).toBe(409);
    const bare = await world.as('mara').post(`${path}/retests`).send({ version: await version(), decodeId: null, buildAId: world.builds.radio1, buildBId: world.builds.device2, outcome: 'clean', lastRung: { downlink: 'traffic', uplink: 'traffic' } });
    expect(bare.status).toBe(422);
    const failed = await world.as('mara').post(`${path}/retests`).send({ version: await version(), decodeId: null, buildAId: world.builds.radio1, buildBId: world.builds.device2, outcome: 'failed', lastRung: { downlink: 'SIB1', uplink: null } });
    expect(failed.status, JSON.stringify(failed.body)).toBe(200);
    expect((await move('mara', { to: 'cause-agreed' })).status).toBe(200);
    expect((await world.as('mara').get(path)).body.lastRung.downlink).toBe('SIB1');
  });

  it('refuses a change made on an older reading', async () => {
    const { version } = (await world.as('mara').get(path)).body;
    expect((await world.as('mara').patch(path).send({ version, title: 'Terminal reads the MIB and no SIB1' })).status).toBe(200);
    expect((await world.as('ines').patch(path).send({ version, title: 'Another headline' })).status).toBe(409);
    const history = (await world.as('ines').get(`${path}/history`)).body.items as { text: string }[];
    expect(history.some(({ text }) => text.includes('Terminal never gets SIB1'))).toBe(true);
  });

  it('is waived by the signatures of both parties, not by one', async () => {
    const { version } = (await world.as('rao').get(path)).body;
    const asked = await world.as('rao').post(`${path}/moves`).send({ version, to: 'waived', reason: 'Not before the spring load.', endsOn: '2099-01-01' });
    expect(asked.status, JSON.stringify(asked.body)).toBe(200);
    expect(asked.body.stage).toBe('cause-agreed');
    expect(asked.body.waiver).toMatchObject({ pending: true, inForce: false });
    expect(asked.body.nextMove.party.id).toBe(world.parties.radio);
    expect(asked.body.nextMove.ask).toMatch(/sign the waiver/);
    const signed = await world.as('ines').post(`${path}/waivers/${asked.body.waiver.id}/signatures`);
    expect(signed.status, JSON.stringify(signed.body)).toBe(200);
    expect(signed.body.stage).toBe('waived');
    expect(signed.body.waiver).toMatchObject({ pending: false, inForce: true });
    expect(signed.body.nextMove).toBeNull();
  });

  it('shows on every page that lists', async () => {
    for (const page of ['/api/day-sheet', '/api/programmes/SKH/overview', '/api/programmes/SKH', '/api/programmes/SKH/audit', '/api/links', `/api/links/${world.links.air}`, '/api/units', '/api/me', '/api/me/sessions', '/api/views', '/api/search?q=SIB1', '/api/issues?standing=any&sort=waiting', '/api/issues?text=SIB1']) {
      for (const person of ['mara', 'edda', 'tobin', 'ines'] as const) {
        const read = await world.as(person).get(page);
        expect(read.status, `${page} as ${person}: ${JSON.stringify(read.body)}`).toBe(200);
      }
    }
    const csv = await world.as('mara').get('/api/issues/export?standing=any');
    expect(csv.status).toBe(200);
    expect(csv.text.split('\n')[0]).toContain('what is wrong');
  });
});

describe('the anonymous', () => {
  it('get 401 on every path, existing or not', async () => {
    for (const path of ['/api/issues', '/api/issues/SKH/0000', '/api/nothing', '/api/files/x/content', '/api/events']) {
      expect((await world.anonymous().get(path)).status, path).toBe(401);
    }
  });
});
