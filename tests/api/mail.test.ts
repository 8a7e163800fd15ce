import pg from 'pg';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { oneLine } from '#backend/mail/compose';
import { sendInvitations } from '#backend/mail/invitations';
import { sendDue, smtpTransport, type OutboxParts } from '#backend/mail/outbox';
import { openMailSink, type MailSink } from '../support/mail-sink.js';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

let world: World;
let sink: MailSink;
let pool: pg.Pool;
let parts: OutboxParts;
let path = '';

beforeAll(async () => {
  world = await createWorld();
  sink = await openMailSink();
  pool = new pg.Pool({ connectionString: world.database.workerUrl, max: 2 });
  parts = { pool, database: world.services.database, transport: smtpTransport(sink.url), from: 'Crosstie <crosstie@lab.example>', publicUrl: 'https://crosstie.lab.example', log: { warn: () => undefined } };
  const filed = await world.as('mara').post('/api/issues').send(issueOn(world));
  path = `/api/issues/SKH/${filed.body.number}`;
});
afterAll(async () => {
  await sink.close();
  await pool.end();
  await world.close();
});
afterEach(async () => {
  await world.admin.query('delete from outbox');
  await world.admin.query('delete from invitation_letters');
  sink.received.length = 0;
});

/** Who was written to, by the short names of the world's people. */
const written = () => sink.received.flatMap(({ envelopeTo }) => envelopeTo).map((address) => address.split('@')[0]).toSorted();
const waiting = async () => (await world.admin.query('select * from outbox order by created_at')).rows;
const version = async () => (await world.as('mara').get(path)).body.version as number;
const write = (person: PersonKey, body: object) => world.as(person).post(`${path}/entries`).send(body);

describe('a letter goes', () => {
  it('of a new issue to the engineers on it, once each, and not to the one who filed', async () => {
    // The rows of the filing in beforeAll: mara filed, the lab, the radio and the device party are on it.
    await sendDue(parts);
    expect(written()).toEqual(['ines', 'rao']);
    const [first] = sink.received;
    expect(first.parsed.subject).toMatch(/^SKH\/\d{4} Terminal never gets SIB1$/);
    expect(first.parsed.text).toContain('Mara Oyelaran (Harrowmere) filed the issue on Crane air.');
    expect(first.parsed.text).toContain('Next move: Tarnbeck Radio is asked to');
    expect(first.parsed.text).toContain(`https://crosstie.lab.example${path.replace('/api', '')}`);
  });

  it('of a next move to the people of the party asked and to followers', async () => {
    const asked = await world.as('mara').post(`${path}/next-moves`).send({ version: await version(), partyId: world.parties.device, ask: 'send the running file', due: '2099-03-01' });
    expect(asked.status, JSON.stringify(asked.body)).toBe(200);
    await sendDue(parts);
    expect(written()).toEqual(['rao']);
    expect(sink.received[0].parsed.text).toContain('Next move: Vimmery Devices is asked to send the running file, due 2099-03-01');
  });

  it('of an entry to followers: who filed and who wrote follow by themselves, a manager by choice', async () => {
    expect((await world.as('edda').put(`${path}/following`)).status).toBe(204);
    expect((await write('rao', { body: 'Checking what runs.\nSecond line.' })).status).toBe(200);
    await sendDue(parts);
    expect(written()).toEqual(['edda', 'mara']);
    expect(sink.received[0].parsed.text).toContain('> Checking what runs.\n> Second line.');
  });

  it('of a move of the stage to followers, and to nobody who asked not to be written to', async () => {
    await world.as('edda').patch('/api/me').send({ notify: { nextMove: true, entries: true, stages: false } });
    expect((await world.as('rao').post(`${path}/moves`).send({ version: await version(), to: 'taken-up' })).status).toBe(200);
    await sendDue(parts);
    expect(written()).toEqual(['mara']);
    expect(sink.received[0].parsed.text).toContain('Stage: Taken up');
  });

  it('not at all where its reader has asked for no more of them meanwhile', async () => {
    await write('rao', { body: 'One more.' });
    await world.as('edda').patch('/api/me').send({ notify: { nextMove: true, entries: false, stages: true } });
    await sendDue(parts);
    expect(written()).toEqual(['mara']);
    expect((await waiting()).map(({ outcome }) => outcome).toSorted()).toEqual(['sent', 'unwanted']);
    await world.as('edda').patch('/api/me').send({ notify: { nextMove: true, entries: true, stages: true } });
  });
});

describe('a letter carries nothing beyond its reader\'s reach', () => {
  it('an entry for one party goes to that party\'s followers alone', async () => {
    await write('rao', { body: 'zqprivatezq our own file is at fault', reach: 'my-party' });
    await sendDue(parts);
    expect(written()).toEqual([]);
    await write('mara', { body: 'zqlabzq keep the rig', reach: 'my-party' });
    await sendDue(parts);
    // edda, of the same party, follows.
    expect(written()).toEqual(['edda']);
  });

  it('and were it queued all the same, it would not be written', async () => {
    const entry = (await write('rao', { body: 'zqprivatezq', reach: 'my-party' })).body;
    await world.admin.query(`insert into outbox (person_id, programme_id, issue_id, entry_id, kind, message_id) select $1, programme_id, issue_id, id, 'entry', 'planted' from entries where id = $2`, [world.people.ines, entry.id]);
    await sendDue(parts);
    expect(sink.received).toEqual([]);
    expect((await waiting()).map(({ outcome, settled_at }) => [outcome, settled_at !== null])).toEqual([['beyond-reach', true]]);
  });

  it('nor is what was withdrawn before it went out', async () => {
    const entry = (await write('rao', { body: 'zqtoo-earlyzq' })).body;
    expect((await world.as('rao').delete(`${path}/entries/${entry.id}`)).status).toBe(204);
    await sendDue(parts);
    expect(sink.received).toEqual([]);
  });

  it('nor anything to somebody who has left the programme meanwhile', async () => {
    await world.as('ines').put(`${path}/following`);
    await write('rao', { body: 'Still the same.' });
    await world.admin.query('update memberships set left_at = now() where person_id = $1', [world.people.ines]);
    await sendDue(parts);
    expect(written()).toEqual(['edda', 'mara']);
    expect((await waiting()).filter(({ person_id }) => person_id === world.people.ines).map(({ outcome }) => outcome)).toEqual(['beyond-reach']);
    await world.admin.query('update memberships set left_at = null where person_id = $1', [world.people.ines]);
    await world.as('ines').delete(`${path}/following`);
  });
});

describe('a letter is sent at least once', () => {
  it('again with the same Message-ID where the answer was lost', async () => {
    await write('rao', { body: 'Twice at most.' });
    sink.failNext(2);
    await sendDue(parts);
    expect((await waiting()).every(({ settled_at, last_error }) => settled_at === null && /broken down/.test(last_error))).toBe(true);
    await world.admin.query('update outbox set next_attempt_at = now()');
    await sendDue(parts);
    const ids = sink.received.map(({ parsed }) => parsed.messageId);
    expect(ids).toHaveLength(4);
    expect(new Set(ids).size).toBe(2);
    expect(ids[0]).toMatch(/^<[0-9a-f-]{36}@crosstie\.lab\.example>$/);
    await sendDue(parts);
    expect(sink.received).toHaveLength(4);
  });

  it('with longer and longer pauses while the mail server is away, and the administrator sees it', async () => {
    await write('rao', { body: 'Into the void.' });
    await sink.close();
    const pauses: number[] = [];
    for (let attempt = 0; attempt < 3; attempt++) {
      await world.admin.query('update outbox set next_attempt_at = now()');
      await sendDue(parts);
      const { rows: [{ pause }] } = await world.admin.query('select extract(epoch from max(next_attempt_at) - now())::float8 as pause from outbox');
      pauses.push(pause);
    }
    expect(pauses[1]).toBeGreaterThan(pauses[0]);
    expect(pauses[2]).toBeGreaterThan(pauses[1]);
    expect((await world.as('tobin').get('/api/programmes/SKH')).body.stuckMail).toBe(2);
    expect((await world.as('mara').get('/api/programmes/SKH')).body.stuckMail).toBeNull();
    await sink.open();
    await world.admin.query('update outbox set next_attempt_at = now()');
    await sendDue(parts);
    expect(written()).toEqual(['edda', 'mara']);
    expect((await world.as('tobin').get('/api/programmes/SKH')).body.stuckMail).toBe(0);
  });

  it('by one of two senders at a time', async () => {
    await write('rao', { body: 'Once is enough.' });
    await Promise.all([sendDue(parts), sendDue(parts)]);
    expect(written()).toEqual(['edda', 'mara']);
  });
});

describe('an invitation', () => {
  const invite = (email: string) => world.as('tobin').post('/api/programmes/SKH/invitations').send({ email, partyId: world.parties.radio, role: 'vendor-engineer' });

  it('goes to whom it invites with the very link, once, and its secret is forgotten', async () => {
    const made = await invite('ana@quillby.example');
    expect(made.status, JSON.stringify(made.body)).toBe(200);
    await Promise.all([sendInvitations(parts), sendInvitations(parts)]);
    await sendInvitations(parts);
    expect(written()).toEqual(['ana']);
    const token = new URL(made.body.link).pathname.split('/').at(-1);
    expect(sink.received[0].parsed.text).toContain(`https://crosstie.lab.example/invitations/${token}`);
    expect(sink.received[0].parsed.text).toContain('Tobin Aschero invites you');
    const { rows } = await world.admin.query("select token, settled_at from invitation_letters where email = 'ana@quillby.example'");
    expect(rows).toEqual([{ token: null, settled_at: expect.any(Date) }]);
  });

  it('is tried again after a mail server that broke down, and not sent once it was taken back', async () => {
    sink.failNext(1);
    const late = await invite('late@quillby.example');
    const gone = await invite('gone@quillby.example');
    expect((await world.as('tobin').delete(`/api/programmes/SKH/invitations/${gone.body.id}`)).status).toBe(204);
    await sendInvitations(parts);
    const { rows } = await world.admin.query('select email, token is null as forgotten, last_error from invitation_letters where settled_at is null');
    expect(rows).toEqual([{ email: 'late@quillby.example', forgotten: false, last_error: expect.stringMatching(/broken down/) }]);
    await world.admin.query('update invitation_letters set next_attempt_at = now()');
    await sendInvitations(parts);
    expect(written()).toEqual(['late', 'late']);
    expect(new Set(sink.received.map(({ parsed }) => parsed.messageId)).size).toBe(1);
    expect(sink.received[1].parsed.text).toContain(new URL(late.body.link).pathname);
  });

  it('is read by nobody through the application', async () => {
    await invite('unread@quillby.example');
    const app = new pg.Client({ connectionString: world.database.appUrl });
    await app.connect();
    await expect(app.query('select token from invitation_letters')).rejects.toThrow(/permission denied/);
    await app.end();
  });
});

describe('a letter\'s headers', () => {
  it('take no line from a title, a name or an address', async () => {
    await world.admin.query("update issues set title = E'Down\\r\\nBcc: thief@elsewhere.example\\r\\n\\r\\nfalse body' where programme_id = $1", [world.programmeId]);
    await world.admin.query("update people set name = E'Mara\\r\\nBcc: thief@elsewhere.example', email = E'mara@lab.example' where id = $1", [world.people.mara]);
    await world.admin.query("update people set email = E'edda@lab.example\\r\\nBcc: thief@elsewhere.example' where id = $1", [world.people.edda]);
    await write('rao', { body: 'Line one\r\n.\r\nMAIL FROM:<thief@elsewhere.example>' });
    await sendDue(parts);
    for (const { envelopeTo, raw, parsed } of sink.received) {
      expect(envelopeTo.every((address) => !/thief/.test(address))).toBe(true);
      expect([...parsed.headers.keys()]).not.toContain('bcc');
      expect(raw.split('\r\n\r\n')[0]).not.toMatch(/^\s*bcc:/im);
      expect(parsed.text).toContain('> MAIL FROM:<thief@elsewhere.example>');
    }
    const mara = sink.received.find(({ envelopeTo }) => envelopeTo.includes('mara@lab.example'));
    expect(mara?.parsed.subject).toMatch(/^SKH\/\d{4} Down Bcc: thief@elsewhere\.example false body$/);
  });

  it('are one line whatever breaks lines', () => {
    expect(oneLine('a\r\nb\u0085c\u2028d\u2029e\u0000f\u202Eg')).toBe('a b c d e fg');
  });
});
