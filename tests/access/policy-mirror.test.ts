import { randomUUID } from 'node:crypto';
import { Client } from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ROLES, type Role } from '#shared/vocabulary';
import { ACTION_NAMES, may, type Action } from '#backend/access/policy';
import { issueOn, createWorld, ISSUER, type World } from '../support/world.js';

/** A statement that does the action as bluntly as SQL can: no page, no rule of the application before it. */
interface Attempt { readonly sql: string; readonly bind: (actor: Actor) => unknown[] }
interface Actor { readonly personId: string; readonly partyId: string; readonly role: Role; readonly isLab: boolean }

let world: World;
let app: Client;
let actors: Actor[];
let issueId = '';
let hintId = '';

beforeAll(async () => {
  world = await createWorld();
  const filed = await world.as('mara').post('/api/issues').send(issueOn(world));
  ({ rows: [{ id: issueId }] } = await world.admin.query('select id from issues where number = $1', [filed.body.number]));
  const { rows: [decode] } = await world.admin.query(`insert into decodes (programme_id, issue_id, number, reach, party_id, state, requested_by, requested_by_name) values ($1, $2, 1, 'everyone', $3, 'done', $4, 'x') returning id`, [world.programmeId, issueId, world.parties.lab, world.people.mara]);
  ({ rows: [{ id: hintId }] } = await world.admin.query(`insert into hints (decode_id, programme_id, issue_id, rank, code, side, confidence) values ($1, $2, $3, 0, 'technology', 'a', 0.5) returning id`, [decode.id, world.programmeId, issueId]));
  actors = [];
  for (const party of ['lab', 'radio'] as const) for (const role of ROLES) actors.push(await plantActor(role, world.parties[party], party === 'lab'));
  app = new Client({ connectionString: world.database.appUrl });
  await app.connect();
});
afterAll(async () => {
  await app.end();
  await world.close();
});

async function plantActor(role: Role, partyId: string, isLab: boolean): Promise<Actor> {
  const { rows: [{ id }] } = await world.admin.query(`insert into people (issuer, subject, name, email) values ($1, $2, 'x', 'x@x.example') returning id`, [ISSUER, randomUUID()]);
  await world.admin.query('insert into memberships (programme_id, party_id, person_id, role) values ($1, $2, $3, $4)', [world.programmeId, partyId, id, role]);
  return { personId: id, partyId, role, isLab };
}

const SHA = 'a'.repeat(64);
const ATTEMPTS: Record<Exclude<Action, 'read' | 'read-overview' | 'read-audit'>, Attempt> = {
  'follow': { sql: 'insert into followers (programme_id, issue_id, person_id, party_id) values ($1, $2, $3, $4)', bind: ({ personId, partyId }) => [world.programmeId, issueId, personId, partyId] },
  'file-issue': {
    sql: `insert into issues (programme_id, number, link_id, party_ids, title, severity, raised_by, raised_by_name, raised_by_party_id) values ($1, '0007', $2, $3, 'A title', 'minor', $4, 'x', $5)`,
    bind: ({ personId, partyId }) => [world.programmeId, world.links.air, [world.parties.radio, world.parties.device, world.parties.lab], personId, partyId],
  },
  // Without a condition: a statement that forgets it must not reach further.
  'edit-issue': { sql: `update issues set title = 'Another title'`, bind: () => [] },
  'change-severity': { sql: `update issues set severity = 'minor'`, bind: () => [] },
  'move-issue': { sql: `update issues set stage = 'taken-up'`, bind: () => [] },
  'set-next-move': { sql: `insert into next_moves (programme_id, issue_id, party_id, ask, cause, set_by, ended_at) values ($1, $2, $3, 'look', 'lab', $4, now())`, bind: ({ personId }) => [world.programmeId, issueId, world.parties.device, personId] },
  'write-entry': { sql: `insert into entries (programme_id, issue_id, author_id, author_name, author_party_id, author_party_name, body, reach) values ($1, $2, $3, 'x', $4, 'x', 'text', 'everyone')`, bind: ({ personId, partyId }) => [world.programmeId, issueId, personId, partyId] },
  'upload-file': { sql: `insert into files (programme_id, kind, name, size, sha256, storage_id, reach, party_id, uploader_party_id, uploaded_by, uploaded_by_name) values ($1, 'attachment', 'x', 1, $2, gen_random_uuid(), 'everyone', $3, $3, $4, 'x')`, bind: ({ personId, partyId }) => [world.programmeId, SHA, partyId, personId] },
  'decode': { sql: `insert into decodes (programme_id, issue_id, number, reach, party_id, requested_by, requested_by_name) values ($1, $2, 77, 'everyone', $3, $4, 'x')`, bind: ({ personId, partyId }) => [world.programmeId, issueId, partyId, personId] },
  'judge-hint': { sql: `insert into hint_verdicts (hint_id, programme_id, person_id, person_name, party_id, party_name, verdict) values ($1, $2, $3, 'x', $4, 'x', 'confirmed')`, bind: ({ personId, partyId }) => [hintId, world.programmeId, personId, partyId] },
  'record-retest': { sql: `insert into retests (programme_id, issue_id, build_a_id, build_b_id, outcome, recorded_by, recorded_by_name) values ($1, $2, $3, $4, 'failed', $5, 'x')`, bind: ({ personId }) => [world.programmeId, issueId, world.builds.radio1, world.builds.device1, personId] },
  'share-issue': { sql: 'insert into shares (programme_id, issue_id, party_id, shared_by) values ($1, $2, $3, $4)', bind: ({ personId }) => [world.programmeId, issueId, world.parties.network, personId] },
  'add-link': {
    sql: `insert into links (programme_id, name, interface, unit_a_id, unit_b_id, party_a_id, party_b_id, party_ids) values ($1, 'Second air', 'air', $2, $3, $4, $5, $6)`,
    bind: () => [world.programmeId, world.units.radio, world.units.device, world.parties.radio, world.parties.device, [world.parties.radio, world.parties.device, world.parties.lab]],
  },
  // Of the radio party: its own people's to add, and the lab's.
  'add-unit': { sql: `insert into units (programme_id, party_id, name, part) values ($1, $2, 'TR-9', 'radio unit')`, bind: () => [world.programmeId, world.parties.radio] },
  'add-build': { sql: `insert into builds (programme_id, unit_id, label) values ($1, $2, '9.9')`, bind: () => [world.programmeId, world.units.radio] },
  'invite': { sql: `insert into invitations (programme_id, party_id, email, role, token_hash, invited_by, expires_at) values ($1, $2, 'x@x.example', 'observer', '\\x00', 'x', now() + interval '1 day')`, bind: ({ partyId }) => [world.programmeId, partyId] },
  'change-roles': { sql: 'update memberships set role = role where person_id <> access.person()', bind: () => [] },
  'add-party': { sql: `insert into parties (programme_id, name, short_name, parts, issuer) values ($1, 'A new one', 'New', '{terminal}', 'x')`, bind: () => [world.programmeId] },
};
/** What the application asks for beside the role. */
const LAB_ALONE: readonly Action[] = ['record-retest', 'add-link'];

/** Whether the database lets the actor do it: at least one row, and no policy against it. Nothing stays. */
async function databaseAllows(action: keyof typeof ATTEMPTS, actor: Actor): Promise<boolean> {
  await app.query('begin');
  try {
    await app.query("select set_config('crosstie.person', $1, true)", [actor.personId]);
    const { rowCount } = await app.query(ATTEMPTS[action].sql, ATTEMPTS[action].bind(actor));
    return (rowCount ?? 0) > 0;
  } catch (error) {
    // 42501, insufficient_privilege: a policy or a guard. Anything else is a fault of this test.
    expect((error as { code?: string }).code, `${action} as ${actor.role}: ${String(error)}`).toBe('42501');
    return false;
  } finally {
    await app.query('rollback');
  }
}

describe('the table of actions and the database\'s policies', () => {
  it.each(Object.keys(ATTEMPTS) as (keyof typeof ATTEMPTS)[])('agree on who may %s', async (action) => {
    for (const actor of actors) {
      const expected = may(actor.role, action) && (actor.isLab || !LAB_ALONE.includes(action));
      expect(await databaseAllows(action, actor), `${action} as ${actor.role} of ${actor.isLab ? 'the lab' : 'a vendor'}`).toBe(expected);
    }
  });

  it('leave out no action that writes', () => {
    expect(ACTION_NAMES.filter((action) => !['read', 'read-overview', 'read-audit'].includes(action)).toSorted()).toEqual(Object.keys(ATTEMPTS).toSorted());
  });

  it('agree on who reads the audit record of the own party', async () => {
    for (const actor of actors) {
      await world.admin.query("insert into audit (programme_id, party_id, person_id, action) values ($1, $2, $3, 'probe')", [world.programmeId, actor.partyId, actor.personId]);
      await app.query('begin');
      await app.query("select set_config('crosstie.person', $1, true)", [actor.personId]);
      const { rows } = await app.query("select distinct party_id from audit where action = 'probe'");
      await app.query('rollback');
      expect(rows, `${actor.role}`).toEqual(may(actor.role, 'read-audit') ? [{ party_id: actor.partyId }] : []);
    }
  });

  it('keep an update without a condition within the issues that its person sees', async () => {
    const hidden = await world.admin.query(`insert into issues (programme_id, number, link_id, party_ids, title, severity, raised_by, raised_by_name, raised_by_party_id) values ($1, '0099', $2, $3, 'Hidden from the radio', 'critical', $4, 'x', $5) returning id`, [world.programmeId, world.links.wifi, [world.parties.wifi], world.people.petra, world.parties.wifi]);
    await app.query('begin');
    await app.query("select set_config('crosstie.person', $1, true)", [world.people.ines]);
    const { rowCount } = await app.query("update issues set severity = 'minor'");
    expect(rowCount).toBe(1);
    await app.query('rollback');
    await world.admin.query('delete from stage_intervals where issue_id = $1', [hidden.rows[0].id]);
    await world.admin.query('delete from issues where id = $1', [hidden.rows[0].id]);
  });

  it('write nobody else\'s name under what happened', async () => {
    const tries: [string, unknown[]][] = [
      ["insert into events (programme_id, issue_id, person_id, person_name, party_id, kind, text) values ($1, $2, $3, 'x', $4, 'entry', 'x')", [world.programmeId, issueId, world.people.ines, world.parties.device]],
      ["insert into live_events (programme_id, issue_id, topic, party_id) values ($1, $2, 'issue', $3)", [world.programmeId, issueId, world.parties.device]],
      ["insert into audit (programme_id, party_id, person_id, action) values ($1, $2, $3, 'x')", [world.programmeId, world.parties.radio, world.people.rao]],
      ["insert into audit (programme_id, person_id, action) values ($1, $2, 'x')", [randomUUID(), world.people.ines]],
      ["insert into audit (action) values ('x')", []],
    ];
    for (const [sql, bind] of tries) {
      await app.query('begin');
      await app.query("select set_config('crosstie.person', $1, true)", [world.people.ines]);
      await expect(app.query(sql, bind), sql).rejects.toMatchObject({ code: '42501' });
      await app.query('rollback');
    }
  });
});
