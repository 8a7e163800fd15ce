import { afterAll, beforeAll, expect, it } from 'vitest';
import type { DaySheet } from '#shared/api/overview';
import { createWorld, issueOn, type PersonKey, type World } from '../support/world.js';

let world: World;
beforeAll(async () => {
  world = await createWorld();
});
afterAll(() => world.close());

const sheet = async (person: PersonKey): Promise<DaySheet> => (await world.as(person).get('/api/day-sheet')).body;
const asked = async (person: PersonKey) => (await sheet(person)).waitingForParty.map(({ title, ask, nextMove }) => [title, ask, nextMove?.due]);

it('lists what waits for the reader’s party with what is asked, the soonest due first', async () => {
  const file = (title: string, nextMove: object) => world.as('mara').post('/api/issues').send(issueOn(world, { title, nextMove }));
  await file('Late', { partyId: world.parties.radio, ask: 'say which numerology is sent', due: '2030-02-01' });
  await file('Soon', { partyId: world.parties.radio, ask: 'send the log of the start', due: '2030-01-01' });
  await file('Theirs', { partyId: world.parties.device, ask: 'read the cell’s MIB', due: '2030-01-15' });
  expect(await asked('ines')).toEqual([['Soon', 'send the log of the start', '2030-01-01'], ['Late', 'say which numerology is sent', '2030-02-01']]);
  expect(await asked('rao')).toEqual([['Theirs', 'read the cell’s MIB', '2030-01-15']]);
  expect(await asked('petra')).toEqual([]);
});

it('asks only what is asked now', async () => {
  const { waitingForParty: [row] } = await sheet('rao');
  const path = `/api/issues/SKH/${row.number}`;
  const { version } = (await world.as('mara').get(path)).body;
  expect((await world.as('mara').post(`${path}/next-moves`).send({ version, partyId: world.parties.device, ask: 'offer a build', due: null })).status).toBe(200);
  expect(await asked('rao')).toEqual([['Theirs', 'offer a build', null]]);
});
