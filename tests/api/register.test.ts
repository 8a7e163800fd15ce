import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { registerPage, SORTS, type RegisterPage } from '#shared/api/issues';
import { plantIssue } from '../support/planting.js';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

let world: World;
beforeAll(async () => {
  world = await createWorld();
  for (const [n, severity] of (['critical', 'major', 'minor', 'major'] as const).entries()) {
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { severity, title: `Issue ${n} of the four` }));
    expect(filed.status).toBe(200);
  }
  await plantIssue(world, { link: 'wifi', between: ['wifi', 'wifi'], number: '7777' });
});
afterAll(() => world.close());

const read = async (person: PersonKey, path: string) => {
  const { status, body } = await world.as(person).get(path);
  expect(status, JSON.stringify(body)).toBe(200);
  return body;
};
const list = (person: PersonKey, query = ''): Promise<RegisterPage> => read(person, `/api/issues?${query}`);
const counts = async (person: PersonKey, query = '') => {
  const { matching, all } = await read(person, `/api/issues/counts?${query}`);
  return [matching, all];
};
const numbers = ({ items }: RegisterPage) => items.map(({ number }) => number);

describe('the register', () => {
  it('answers in the shape that the table of endpoints promises, and nothing beside it', async () => {
    for (const query of ['standing=any', 'standing=ended', 'text=nothing-like-it', 'size=2&page=2']) {
      const page = await list('mara', query);
      expect(registerPage.parse(page)).toEqual(page);
    }
  });

  it('tells whether there is another page, without counting', async () => {
    expect(await list('mara', 'size=3')).toMatchObject({ page: 1, size: 3, more: true });
    expect(await list('mara', 'size=3&page=2')).toMatchObject({ page: 2, more: false });
    expect(await list('mara', 'size=4')).toMatchObject({ more: false });
    expect(await list('mara', 'size=4&page=9')).toEqual({ items: [], page: 9, size: 4, more: false });
    expect((await list('mara', 'size=2')).items).toHaveLength(2);
  });

  it('carries a planted issue whole: hint, next move, late', async () => {
    const [row] = (await list('petra')).items;
    expect(row).toMatchObject({ number: '7777', hint: { code: 'cyclic-prefix', side: 'b', confidence: 0.9 }, nextMove: { party: { shortName: 'Pellfold' }, due: '2020-01-01', late: true }, unseen: true });
    expect(row.waitingDays).toBeGreaterThanOrEqual(0);
    await world.as('petra').post('/api/issues/SKH/7777/looks');
    expect((await list('petra')).items[0].unseen).toBe(false);
  });

  it.each(SORTS)('sorts by %s both ways, each issue once', async (sort) => {
    for (const order of ['asc', 'desc']) {
      const pages = [await list('mara', `sort=${sort}&order=${order}&size=3&page=1`), await list('mara', `sort=${sort}&order=${order}&size=3&page=2`)];
      expect(new Set(pages.flatMap(numbers)).size).toBe(4);
    }
  });

  it('puts the order that is asked for, and what has no due day last either way', async () => {
    expect((await list('mara', 'sort=severity')).items.map(({ severity }) => severity)).toEqual(['critical', 'major', 'major', 'minor']);
    expect((await list('mara', 'sort=severity&order=desc')).items.map(({ severity }) => severity)).toEqual(['minor', 'major', 'major', 'critical']);
    const [early, late] = numbers(await list('mara', 'sort=number'));
    await world.admin.query("update issues set move_due = case number when $1 then date '2031-01-01' when $2 then date '2032-01-01' end where number in (select unnest($3::text[]))", [early, late, numbers(await list('mara'))]);
    expect(numbers(await list('mara', 'sort=due')).slice(0, 2)).toEqual([early, late]);
    expect(numbers(await list('mara', 'sort=due&order=desc')).slice(0, 2)).toEqual([late, early]);
  });

  it('filters and counts: what matches, and what there is', async () => {
    expect((await list('mara', 'severities=major&size=1')).items).toHaveLength(1);
    expect(await counts('mara', 'severities=major')).toEqual([2, 4]);
    expect(await counts('mara', 'severities=critical,minor')).toEqual([2, 4]);
    expect(await counts('mara', 'text=four')).toEqual([4, 4]);
    expect(await counts('ines', 'move=mine')).toEqual([4, 4]);
    expect(await counts('rao', 'move=mine')).toEqual([0, 4]);
    expect(await counts('edda', 'late=true')).toEqual([1, 5]);
    expect(await counts('petra', 'programme=SKH')).toEqual([1, 1]);
    expect(await counts('mara', 'standing=ended')).toEqual([0, 4]);
  });

  it('answers as many as it counts, whatever the filter', async () => {
    for (const person of ['mara', 'edda', 'petra', 'jory'] as const) {
      for (const query of ['standing=any', 'severities=major', 'late=true', 'move=mine', 'move=none', 'text=7777', `party=${world.parties.wifi}`, `link=${world.links.air}`]) {
        expect([(await list(person, query)).items.length, query]).toEqual([(await counts(person, query))[0], query]);
      }
    }
  });

  it('counts for each what that one may see, from one change to the next', async () => {
    const major = (person: PersonKey) => counts(person, 'severities=major');
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { severity: 'major' }));
    expect(await major('mara')).toEqual([3, 5]);
    expect(await major('jory')).toEqual([0, 0]);
    expect((await world.as('mara').post(`/api/issues/SKH/${filed.body.number}/shares`).send({ partyId: world.parties.network })).status).toBe(200);
    expect(await major('jory')).toEqual([1, 1]);
    // Another hat, another sight: the manager's role is taken away.
    expect(await major('edda')).toEqual([3, 6]);
    await world.admin.query("update memberships set role = 'integration-engineer' where person_id = $1", [world.people.edda]);
    expect(await major('edda')).toEqual([3, 5]);
    await world.admin.query("update memberships set role = 'programme-manager' where person_id = $1", [world.people.edda]);
    expect(await major('edda')).toEqual([3, 6]);
  });

  it('is refused to the anonymous, the counts too', async () => {
    expect((await world.anonymous().get('/api/issues/counts')).status).toBe(401);
    expect((await world.as('mara').get('/api/issues/counts?standing=sideways')).status).toBe(422);
  });
});
