import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Client } from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seedDemo } from '#backend/demo/seed-demo';
import { STAGES } from '#shared/vocabulary';
import { createTestDatabase, type TestDatabase } from '../support/database.js';

let database: TestDatabase;
let admin: Client;
const folder = mkdtempSync(join(tmpdir(), 'crosstie-demo-'));
const parts = () => ({ ownerUrl: database.ownerUrl, storageDir: folder, issuer: 'http://127.0.0.1:4999' });

beforeAll(async () => {
  database = await createTestDatabase();
  admin = new Client({ connectionString: database.adminUrl });
  await admin.connect();
  expect(await seedDemo(parts())).toBe(true);
}, 300_000);
afterAll(async () => {
  await admin.end();
  await database.drop();
  rmSync(folder, { recursive: true, force: true });
});
const all = async (sql: string) => (await admin.query(sql)).rows;

describe('the demo', () => {
  it('has four links and at least fourteen issues in all stages, ten of them with captures', async () => {
    expect((await all('select 1 from links')).length).toBe(4);
    const issues = await all('select stage from issues');
    expect(issues.length).toBeGreaterThanOrEqual(14);
    expect(new Set(issues.map(({ stage }) => stage))).toEqual(new Set(STAGES));
    const captured = await all("select distinct d.issue_id from decodes d join decode_inputs n on n.decode_id = d.id where n.role = 'capture'");
    expect(captured.length).toBeGreaterThanOrEqual(10);
  });

  it('is seeded once', async () => {
    expect(await seedDemo(parts())).toBe(false);
  });

  it('queues every decode that it shows', async () => {
    const [{ waiting }] = await all("select count(*)::integer as waiting from pgboss.job where name = 'decode'");
    const [{ decodes }] = await all('select count(*)::integer as decodes from decodes');
    expect(waiting).toBe(decodes);
  });

  it('tells histories that fit together: one running stage, no gaps, one move at most', async () => {
    const rows = await all('select s.issue_id, count(*)::integer as n, bool_and(i.stage = s.stage) as same from stage_intervals s join issues i on i.id = s.issue_id where s.ended_at is null group by s.issue_id');
    expect(rows.length).toBe((await all('select 1 from issues')).length);
    expect(rows.every(({ n, same }) => n === 1 && same)).toBe(true);
    expect(await all('select 1 from stage_intervals s where s.ended_at is not null and not exists (select 1 from stage_intervals t where t.issue_id = s.issue_id and t.since = s.ended_at)')).toEqual([]);
    expect(await all("select i.number from issues i join next_moves n on n.issue_id = i.id and n.ended_at is null where not i.open")).toEqual([]);
    expect(await all("select i.number from issues i where i.open and not exists (select 1 from next_moves n where n.issue_id = i.id and n.ended_at is null)")).toEqual([]);
  });
});
