import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Database } from '#backend/db/database';
import { createWorld, type World } from '../support/world.js';

let world: World;
/** One connection: whatever a transaction leaves behind, the next one would meet. */
let database: Database;
beforeAll(async () => {
  world = await createWorld();
  database = new Database(world.database.appUrl, { pool: 1 });
});
afterAll(async () => {
  await database.close();
  await world.close();
});

const PERSON = 'select access.person() as id';
const visible = "select count(*)::integer as n from memberships";
const openTransactions = async () => (await world.admin.query("select 1 from pg_stat_activity where datname = current_database() and usename = 'crosstie_app' and state like 'idle in transaction%'")).rowCount;

describe.each([
  ['a transaction', (person: string, sql: string) => database.asPerson(person, () => database.rows<{ id: string; n: number }>(sql))],
  ['a question in one journey', (person: string, sql: string) => database.askAs<{ id: string; n: number }>(person, sql)],
] as const)('%s as a person', (_what, ask) => {
  it('names that person to the policies, and nobody afterwards', async () => {
    expect(await ask(world.people.ines, PERSON)).toEqual([{ id: world.people.ines }]);
    expect(await database.rows(PERSON)).toEqual([{ id: null }]);
    expect(await database.rows(visible)).toEqual([{ n: 0 }]);
    expect(await ask(world.people.tobin, visible)).toEqual([{ n: 8 }]);
    expect(await ask(world.people.petra, visible)).toEqual([{ n: 1 }]);
  });

  it('that fails leaves no transaction and no person behind', async () => {
    await expect(ask(world.people.ines, 'select 1 / 0')).rejects.toThrow(/division by zero/);
    expect(await openTransactions()).toBe(0);
    expect(await database.rows(PERSON)).toEqual([{ id: null }]);
    expect(await ask(world.people.rao, PERSON)).toEqual([{ id: world.people.rao }]);
  });

  it('takes nothing for a person that is not an identifier', async () => {
    for (const person of ['', "'; select 1; --", `${world.people.ines}'`, 'null']) await expect((async () => ask(person, PERSON))()).rejects.toThrow(/not a person's identifier/);
  });
});

describe('a change', () => {
  const failing = "with changed as (update people set time_zone = 'Mars' where id = access.person() returning 1) select 1 / (count(*) - 1) from changed";
  const zone = async () => (await world.admin.query('select time_zone from people where id = $1', [world.people.ines])).rows[0].time_zone;

  it('is rolled back with the transaction that fails after it', async () => {
    await expect(database.asPerson(world.people.ines, () => database.rows(failing))).rejects.toThrow(/division by zero/);
    expect(await zone()).toBe('UTC');
  });

  it('is refused to a question', async () => {
    await expect(database.askAs(world.people.ines, failing)).rejects.toThrow(/read-only transaction/);
    expect(await zone()).toBe('UTC');
  });
});

describe('many at once', () => {
  it('are kept apart where one connection serves them all and some fail', async () => {
    const people = [world.people.ines, world.people.rao, world.people.petra];
    const answers = await Promise.allSettled(Array.from({ length: 30 }, (_, n) => database.askAs<{ id: string }>(people[n % 3], n % 5 === 0 ? 'select 1 / 0' : PERSON)));
    for (const [n, answer] of answers.entries()) {
      if (n % 5 === 0) expect(answer.status).toBe('rejected');
      else expect(answer).toMatchObject({ value: [{ id: people[n % 3] }] });
    }
    expect(await database.rows(PERSON)).toEqual([{ id: null }]);
  });

  it('each see what is theirs', async () => {
    const several = new Database(world.database.appUrl, { pool: 4 });
    const people = [world.people.ines, world.people.rao, world.people.petra, world.people.tobin];
    const answers = await Promise.all(Array.from({ length: 60 }, async (_, n) => {
      const person = people[n % people.length];
      const rows = n % 2 === 0 ? await several.askAs<{ id: string }>(person, PERSON) : await several.asPerson(person, () => several.rows<{ id: string }>(PERSON));
      return rows[0].id === person;
    }));
    expect(answers.filter((own) => !own)).toEqual([]);
    await several.close();
  });

  it('do not nest: a transaction for a person is not opened within another', async () => {
    await expect(database.asPerson(world.people.ines, () => database.asPerson(world.people.rao, async () => 1))).rejects.toThrow(/open already/);
    await expect(database.asPerson(world.people.ines, () => database.askAs(world.people.rao, PERSON))).rejects.toThrow(/open already/);
  });
});

describe('a connection that the database drops', () => {
  const drop = () => world.admin.query("select pg_terminate_backend(pid) from pg_stat_activity where datname = current_database() and usename = 'crosstie_app'");

  it('fails the question that was under way, and the next one has another', async () => {
    const asked = database.askAs(world.people.ines, 'select pg_sleep(20)');
    const failed = expect(asked).rejects.toThrow(/terminat/);
    await expect.poll(async () => (await world.admin.query("select 1 from pg_stat_activity where usename = 'crosstie_app' and query like '%pg_sleep%' and state = 'active'")).rowCount).toBe(1);
    await drop();
    await failed;
    expect(await database.askAs(world.people.rao, PERSON)).toEqual([{ id: world.people.rao }]);
  });

  it('is not asked on again when it was idle', async () => {
    await drop();
    await expect.poll(() => database.askAs(world.people.rao, PERSON).catch(() => null)).toEqual([{ id: world.people.rao }]);
  });
});
