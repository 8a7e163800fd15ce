import { afterAll, beforeAll, expect, it } from 'vitest';
import type { Overview } from '#shared/api/overview';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

let world: World;
const numbers: string[] = [];
beforeAll(async () => {
  world = await createWorld();
  for (const severity of ['critical', 'major', 'minor', 'minor'] as const) {
    const filed = await world.as('mara').post('/api/issues').send(issueOn(world, { severity }));
    numbers.push(filed.body.number);
  }
  // Counted by hand below: filed 14 and 10 weeks ago, 2 weeks ago, this week; the first two ended 13 and 2 weeks ago.
  const date = (weeks: number) => `date_trunc('week', now()) - interval '${weeks} weeks' + interval '1 minute'`;
  for (const [n, weeks] of [14, 10, 2, 0].entries()) await world.admin.query(`update issues set raised_at = ${date(weeks)} where number = $1`, [numbers[n]]);
  for (const [n, weeks] of [13, 2].entries()) {
    await world.admin.query("update issues set stage = 'settled' where number = $1", [numbers[n]]);
    await world.admin.query(`update stage_intervals set since = ${date(weeks)} where ended_at is null and issue_id = (select id from issues where number = $1)`, [numbers[n]]);
  }
  await world.admin.query("update issues set move_since = now() - interval '3 days' where number = $1", [numbers[3]]);
});
afterAll(() => world.close());

async function read(person: PersonKey): Promise<Overview> {
  const { status, body } = await world.as(person).get('/api/programmes/SKH/overview');
  expect(status, JSON.stringify(body)).toBe(200);
  return body;
}

it('tells for each of twelve weeks what was filed, what ended and what stood open at its end', async () => {
  const { flow } = await read('mara');
  expect(flow.map(({ filed }) => filed)).toEqual([0, 1, 0, 0, 0, 0, 0, 0, 0, 1, 0, 1]);
  expect(flow.map(({ ended }) => ended)).toEqual([0, 0, 0, 0, 0, 0, 0, 0, 0, 1, 0, 0]);
  expect(flow.map(({ open }) => open)).toEqual([0, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 2]);
  expect(flow.map(({ week }) => new Date(week).getUTCDay())).toEqual(Array.from({ length: 12 }, () => 1));
});

it('counts a pair once, with who has its next moves', async () => {
  const { byPair } = await read('mara');
  expect(byPair).toMatchObject([{ a: { shortName: 'Tarnbeck' }, b: { shortName: 'Vimmery' }, open: 2, critical: 0, nextMoves: [{ party: 'Tarnbeck', count: 2 }] }]);
  expect(byPair[0].oldestDays).toBeGreaterThan(13);
});

it('names what has waited longest on a party', async () => {
  const { waitingByParty } = await read('mara');
  const [tarnbeck] = waitingByParty.filter(({ party }) => party.shortName === 'Tarnbeck');
  expect(tarnbeck).toMatchObject({ holding: 2, late: 0, longest: { number: numbers[3] } });
  expect(tarnbeck.longest?.days).toBeCloseTo(3, 2);
});

it('counts nothing for a party that sees none of them', async () => {
  const { flow, byPair, waitingByParty, bySeverityAndStage } = await read('petra');
  expect([byPair, waitingByParty, bySeverityAndStage]).toEqual([[], [], []]);
  expect(flow.flatMap(({ filed, ended, open }) => [filed, ended, open]).filter((count) => count !== 0)).toEqual([]);
});
