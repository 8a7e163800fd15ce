import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

let world: World;
beforeAll(async () => {
  world = await createWorld();
});
afterAll(() => world.close());

const audit = async (person: PersonKey) => (await world.as(person).get('/api/programmes/SKH/audit?size=200')).body.items as { action: string; object: string; detail: string; outcome: string; person: string }[];

describe('links, units and builds', () => {
  it('are added by the lab, and units and builds by the party whose they are', async () => {
    const unit = await world.as('ines').post('/api/units').send({ programme: 'SKH', partyId: world.parties.radio, name: 'TR-16', part: 'radio unit' });
    expect(unit.status, JSON.stringify(unit.body)).toBe(200);
    const build = await world.as('ines').post('/api/builds').send({ unitId: unit.body.id, label: '5.0.0' });
    expect(build.status, JSON.stringify(build.body)).toBe(200);
    const link = await world.as('mara').post('/api/links').send({ programme: 'SKH', name: 'Second air', interface: 'air', unitAId: unit.body.id, unitBId: world.units.device, centreFrequencyHz: 3.5e9 });
    expect(link.status, JSON.stringify(link.body)).toBe(200);
    const read = await world.as('rao').get(`/api/links/${link.body.id}`);
    expect(read.body).toMatchObject({ name: 'Second air', a: { unit: { name: 'TR-16' }, build: { label: '5.0.0' } }, actions: { addBuildA: false, addBuildB: true } });
    expect((await world.as('petra').get(`/api/links/${link.body.id}`)).status).toBe(404);
  });

  it('are not added by others: what is not theirs is not there', async () => {
    const link = { programme: 'SKH', name: 'x', interface: 'air', unitAId: world.units.radio, unitBId: world.units.device };
    expect((await world.as('ines').post('/api/links').send(link)).status).toBe(403);
    expect((await world.as('petra').post('/api/builds').send({ unitId: world.units.radio, label: '1' })).status).toBe(404);
    expect((await world.as('rao').post('/api/builds').send({ unitId: world.units.radio, label: '1' })).status).toBe(403);
    expect((await world.as('rao').post('/api/units').send({ programme: 'SKH', partyId: world.parties.radio, name: 'x', part: 'terminal' })).status).toBe(404);
    expect((await world.as('mara').post('/api/links').send({ ...link, unitBId: world.units.radio })).status).toBe(422);
    expect((await world.as('mara').post('/api/links').send({ ...link, unitBId: crypto.randomUUID() })).status).toBe(404);
    expect((await world.as('mara').post('/api/links').send({ ...link, programme: 'QQQ' })).status).toBe(404);
  });

  it('refuse a build label that the unit has', async () => {
    expect((await world.as('ines').post('/api/builds').send({ unitId: world.units.radio, label: '4.2.1' })).status).toBe(422);
    expect((await world.as('ines').post('/api/units').send({ programme: 'SKH', partyId: world.parties.radio, name: 'TR-8', part: 'radio unit' })).status).toBe(409);
  });
});

describe('a programme', () => {
  it('is run by its administrators: parties, invitations, roles', async () => {
    const party = await world.as('tobin').post('/api/programmes/SKH/parties').send({ name: 'Quillby Antennas', shortName: 'Quillby', parts: ['radio unit'] });
    expect(party.status, JSON.stringify(party.body)).toBe(200);
    const made = await world.as('tobin').post('/api/programmes/SKH/invitations').send({ email: 'ana@quillby.example', partyId: party.body.id, role: 'vendor-engineer' });
    expect(made.status).toBe(200);
    expect(made.body.link).toMatch(/\/invitations\/[\w-]{43}$/);
    const { rows } = await world.admin.query('select token_hash from invitations where id = $1', [made.body.id]);
    expect(rows[0].token_hash.toString()).not.toContain(made.body.link.slice(-43));
    expect((await world.as('tobin').get('/api/programmes/SKH')).body.invitations).toEqual([expect.objectContaining({ id: made.body.id, email: 'ana@quillby.example' })]);
    expect((await world.as('tobin').delete(`/api/programmes/SKH/invitations/${made.body.id}`)).status).toBe(204);
    expect((await world.as('tobin').delete(`/api/programmes/SKH/invitations/${made.body.id}`)).status).toBe(404);
  });

  it('shows its people to administrators and managers, and to others their own party\'s', async () => {
    const people = async (person: PersonKey) => new Set(((await world.as(person).get('/api/programmes/SKH')).body.people as { person: { party: { shortName: string } } }[]).map((each) => each.person.party.shortName));
    expect((await people('tobin')).size).toBe(5);
    expect((await people('edda')).size).toBe(5);
    expect(await people('ines')).toEqual(new Set(['Tarnbeck']));
    expect(JSON.stringify((await world.as('petra').get('/api/programmes/SKH')).body)).not.toMatch(/Vimmery|Tarnbeck|Ostrel|Quillby/);
  });

  it('is not run by anyone else', async () => {
    for (const person of ['mara', 'edda', 'ines', 'osk'] as const) {
      expect((await world.as(person).post('/api/programmes/SKH/parties').send({ name: 'x', shortName: 'x', parts: ['terminal'] })).status).toBe(403);
      expect((await world.as(person).post('/api/programmes/SKH/invitations').send({ email: 'a@b.example', partyId: world.parties.lab, role: 'observer' })).status).toBe(403);
    }
    const { rows: [own] } = await world.admin.query('select id from memberships where person_id = $1', [world.people.tobin]);
    expect((await world.as('tobin').patch(`/api/programmes/SKH/memberships/${own.id}`).send({ role: 'observer' })).status).toBe(409);
    expect((await world.as('tobin').get('/api/programmes/QQQ')).status).toBe(404);
  });

  it('is left at the next request, by way of an administrator', async () => {
    const { rows: [membership] } = await world.admin.query('select id from memberships where person_id = $1', [world.people.jory]);
    expect((await world.as('jory').get('/api/issues')).status).toBe(200);
    expect((await world.as('tobin').patch(`/api/programmes/SKH/memberships/${membership.id}`).send({ leave: true })).status).toBe(204);
    expect((await world.as('jory').get('/api/issues')).status).toBe(401);
  });
});

describe('the audit record', () => {
  it('holds downloads in the record of the file\'s owner', async () => {
    const sent = await world.as('mara').post(`/api/attachments?programme=SKH&ownerPartyId=${world.parties.device}`).attach('file', Buffer.from('notes'), 'notes.txt');
    await world.as('mara').post('/api/issues').send(issueOn(world, { fileIds: [sent.body.id] }));
    expect((await world.as('ines').get(`/api/files/${sent.body.id}/content`).set('range', 'bytes=0-1')).status).toBe(206);
    expect((await audit('rao')).filter(({ action }) => action === 'download')).toEqual([expect.objectContaining({ object: 'attachment notes.txt', detail: 'bytes=0-1', person: 'Ines Torvald', outcome: 'done' })]);
    expect((await audit('ines')).filter(({ action }) => action === 'download')).toEqual([]);
  });

  it('holds each comparison against a compare-only snapshot in its owner\'s record', async () => {
    const send = (side: string, party: 'radio' | 'device') => world.as('mara').post(`/api/snapshots?programme=SKH&side=${side}&reach=compare-only&ownerPartyId=${world.parties[party]}`).attach('file', Buffer.from('cyclic_prefix = normal\n'), `${side}.conf`);
    const [a, b] = [await send('a', 'radio'), await send('b', 'device')];
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { snapshotAFileId: a.body.id, snapshotBFileId: b.body.id }));
    const before = (await audit('rao')).filter(({ action }) => action === 'compare');
    expect(before).toHaveLength(1);
    const probe = await world.as('ines').post('/api/snapshots?programme=SKH&side=a&reach=everyone').attach('file', Buffer.from('cyclic_prefix = extended\n'), 'invented.conf');
    await world.as('ines').post(`/api/issues/SKH/${filed.body.number}/files`).send({ fileIds: [probe.body.id] });
    const asked = await world.as('ines').post(`/api/issues/SKH/${filed.body.number}/decodes`).send({ captureFileId: null, snapshotAFileId: probe.body.id, snapshotBFileId: b.body.id });
    expect(asked.status, JSON.stringify(asked.body)).toBe(200);
    const after = (await audit('rao')).filter(({ action }) => action === 'compare');
    expect(after).toHaveLength(2);
    expect(after[0]).toMatchObject({ person: 'Ines Torvald', object: `SKH/${filed.body.number}` });
  });

  it('holds what was refused: a read, a write, a download, an upload', async () => {
    const nowhere = crypto.randomUUID();
    await world.as('petra').get('/api/issues/SKH/0000');
    await world.as('petra').get(`/api/files/${nowhere}/content`);
    await world.as('osk').post('/api/attachments?programme=SKH').attach('file', Buffer.from('x'), 'a.txt');
    await world.as('osk').post('/api/issues').send(issueOn(world));
    const refused = (await audit('tobin')).filter(({ outcome }) => outcome === 'refused').map(({ action, object, person }) => `${person}: ${action} ${object}`);
    expect(refused).toEqual(expect.arrayContaining(['Petra Wynnlow: readIssue /api/issues/SKH/0000', `Petra Wynnlow: download /api/files/${nowhere}/content`, 'Osk Brandreth: uploadAttachment /api/attachments', 'Osk Brandreth: fileIssue /api/issues']));
  });

  it('holds exports of the register', async () => {
    await world.as('petra').get('/api/issues/export?standing=any');
    expect((await audit('petra')).filter(({ action }) => action === 'export-register')).toEqual([expect.objectContaining({ detail: 'standing=any' })]);
  });

  it('is nobody\'s to change', async () => {
    for (const sql of ["update audit set detail = 'x'", 'delete from audit', 'truncate audit']) await expect(world.admin.query(sql), sql).rejects.toThrow(/append-only/);
  });
});

describe('an account', () => {
  it('keeps its time zone, notifications and saved views', async () => {
    expect((await world.as('mara').patch('/api/me').send({ timeZone: 'Europe/Lisbon', notify: { nextMove: true, entries: false, stages: true } })).body).toMatchObject({ timeZone: 'Europe/Lisbon', notify: { entries: false } });
    expect((await world.as('mara').patch('/api/me').send({ timeZone: 'Mars/Olympus' })).status).toBe(422);
    const view = await world.as('mara').post('/api/views').send({ name: 'Late', query: 'late=true' });
    expect((await world.as('mara').get('/api/views')).body.items).toEqual([view.body]);
    expect((await world.as('ines').delete(`/api/views/${view.body.id}`)).status).toBe(404);
    expect((await world.as('mara').delete(`/api/views/${view.body.id}`)).status).toBe(204);
  });

  it('ends a session of its own and nobody else\'s', async () => {
    const [mine] = (await world.as('rao').get('/api/me/sessions')).body.items;
    expect(mine.current).toBe(true);
    expect((await world.as('ines').delete(`/api/me/sessions/${mine.id}`)).status).toBe(404);
    expect((await world.as('rao').delete(`/api/me/sessions/${mine.id}`)).status).toBe(204);
    expect((await world.as('rao').get('/api/me')).status).toBe(401);
  });
});

describe('a manager', () => {
  it('weighs an issue and moves it, and leaves its words to the engineers', async () => {
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world));
    const path = `/api/issues/SKH/${filed.body.number}`;
    const { version } = (await world.as('edda').get(path)).body;
    expect((await world.as('edda').patch(path).send({ version, title: 'Another headline' })).status).toBe(403);
    expect((await world.as('edda').patch(path).send({ version, severity: 'minor' })).body.severity).toBe('minor');
    expect((await world.as('osk').patch(path).send({ version: version + 1, severity: 'major' })).status).toBe(403);
  });
});

describe('what a person is offered', () => {
  it('is what the server would not refuse: filing, the severity, a unit', async () => {
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world));
    const path = `/api/issues/SKH/${filed.body.number}`;
    for (const person of ['mara', 'ines', 'edda', 'tobin', 'osk'] as const) {
      const me = (await world.as(person).get('/api/me')).body;
      const files = await world.as(person).post('/api/issues').send(issueOn(world));
      expect(me.memberships[0].actions.fileIssue, person).toBe(files.status === 200);
      const read = await world.as(person).get(path);
      if (read.status !== 200) continue;
      const weighed = await world.as(person).patch(path).send({ version: read.body.version, severity: read.body.severity === 'minor' ? 'major' : 'minor' });
      expect(read.body.actions.changeSeverity, person).toBe(weighed.status === 200);
      const { actions } = (await world.as(person).get('/api/links?programme=SKH')).body;
      const added = await world.as(person).post('/api/units').send({ programme: 'SKH', partyId: me.memberships[0].party.id, name: `Unit of ${person}`, part: 'terminal' });
      expect(actions.addUnit, person).toBe(added.status === 200);
    }
  });
});

describe('words with a null character', () => {
  it('are taken without it or refused as a value, never a failure', async () => {
    const titled = await world.as('mara').post('/api/issues').send(issueOn(world, { title: 'Down\u0000 here' }));
    expect([200, 422]).toContain(titled.status);
    const clocked = await world.as('mara').post('/api/issues').send(issueOn(world, { signalPath: { path: null, attenuationDb: null, levelDbm: null, clockSource: 'GPS\u0000', lateCounters: null } }));
    expect(clocked.status).toBe(422);
    expect((await world.as('mara').get('/api/issues?text=%00')).status).toBeLessThan(500);
  });
});
