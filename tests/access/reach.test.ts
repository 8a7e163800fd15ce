import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import { MARK, mark, plantIssue, plantSharedDecode, type Planted } from '../support/planting.js';
import { addressesOf, readEverything } from '../support/sweep.js';
import { createWorld, EVERYONE, issueOn, type PartyKey, type PersonKey, type World } from '../support/world.js';

const PARTY_OF: Record<PersonKey, PartyKey> = { mara: 'lab', edda: 'lab', tobin: 'lab', osk: 'lab', ines: 'radio', jory: 'network', rao: 'device', petra: 'wifi' };
let world: World;
let known: Planted[];

beforeAll(async () => {
  world = await createWorld();
  const air = await plantIssue(world, { link: 'air', between: ['radio', 'device'], number: '1111' });
  const fronthaul = await plantIssue(world, { link: 'fronthaul', between: ['network', 'radio'], number: '2222' });
  const wifi = await plantIssue(world, { link: 'wifi', between: ['wifi', 'wifi'], number: '3333' });
  known = [air, fronthaul, wifi];
  air.ids.decode.push(await plantSharedDecode(world, air.issues[0].id, ['radio', 'device']));
});
afterAll(() => world.close());

/** Whose marker a person may meet: the own party's, and what stands on an issue that the person sees. */
function allowed(person: PersonKey, owners: string, field: string): boolean {
  const party = PARTY_OF[person];
  if (owners === party) return true;
  const shared = ['title', 'description', 'raisedBy', 'baseline', 'clockSource', 'ask', 'waiver'].includes(field);
  if (!shared) return false;
  // The manager sees every issue of the programme; these three are not shared with the lab itself.
  return person === 'edda' || (owners.startsWith(party) && owners !== party) || (owners.endsWith(party) && owners !== party);
}

describe('a marker in every private field', () => {
  it.each(EVERYONE)('is met by %s only within its reach, whatever is asked', async (person) => {
    const words = [...new Set(known.flatMap(({ issues }) => issues.flatMap(({ parties }) => [mark(parties.join(''), 'title'), ...parties.flatMap((party) => [mark(party, 'entryBody'), mark(party, 'parameterRaw')])])))];
    const answers = await readEverything(world, person, { known, words });
    let met = 0;
    for (const { address, status, text } of answers) {
      expect(status, `${address} as ${person}: ${text.slice(0, 300)}`).toBeLessThan(500);
      for (const [, owners, field] of text.matchAll(MARK)) {
        // A refused address repeats the caller's own words only in the caller's own query.
        expect(allowed(person, owners, field), `${person} met ${owners}'s ${field} at ${address}`).toBe(true);
        met++;
      }
    }
    // The sweep can fail: whoever stands on an issue does meet markers.
    if (!['mara', 'osk', 'tobin'].includes(person)) expect(met).toBeGreaterThan(0);
  });

  it('lets each party read its own version of a shared result and nobody another\'s', async () => {
    const decodeId = known[0].ids.decode.at(-1) as string;
    const read = async (person: PersonKey) => (await world.as(person).get(`/api/decodes/${decodeId}`)).text;
    expect(await read('ines')).toContain(mark('radio', 'sharedResult'));
    expect(await read('rao')).toContain(mark('device', 'sharedResult'));
    expect(await read('edda')).toContain('for everyone');
    expect((await world.as('petra').get(`/api/decodes/${decodeId}`)).status).toBe(404);
  });
});

const steady = (headers: Record<string, string>) => Object.fromEntries(Object.entries(headers).filter(([name]) => !['date', 'ratelimit', 'ratelimit-policy'].includes(name)));

describe('what a person may not see', () => {
  it.each(['petra', 'jory'] as const)('answers %s exactly like what does not exist, read or written', async (person) => {
    const nowhere: Planted[] = [{
      issues: [{ number: '9876', id: randomUUID(), parties: [] }],
      ids: Object.fromEntries(Object.keys(known[0].ids).map((kind) => [kind, [randomUUID()]])) as unknown as Planted['ids'],
    }];
    // Only the hidden issue's own things: a party's own views and links stay its own.
    const hidden: Planted[] = [{ ...known[0], ids: { ...known[0].ids, link: [world.links.air], membership: [], session: [], invitation: [], view: known[0].ids.view } }];
    const bodies: Partial<Record<EndpointName, object>> = {
      changeIssue: { version: 1, title: 'changed title' }, moveIssue: { to: 'taken-up', version: 1 }, setNextMove: { version: 1, partyId: world.parties.device, ask: 'look', due: null },
      recordRetest: { version: 1, decodeId: null, buildAId: world.builds.radio1, buildBId: world.builds.device1, outcome: 'failed', lastRung: { downlink: null, uplink: null } },
      shareIssue: { partyId: world.parties.wifi }, attachFiles: { fileIds: [randomUUID()] }, writeEntry: { body: 'text' }, changeEntry: { body: 'text' },
      requestDecode: { captureFileId: null, snapshotAFileId: null, snapshotBFileId: null }, judgeHint: { verdict: 'confirmed' }, changeFile: { reach: 'my-party' },
    };
    let compared = 0;
    for (const name of Object.keys(ENDPOINTS) as EndpointName[]) {
      const { method, path } = ENDPOINTS[name];
      if (!/:(number|\w+Id)/.test(path) || path.includes(':membershipId') || path.includes(':sessionId') || path.includes(':invitationId')) continue;
      const ask = (address: string) => world.as(person)[method.toLowerCase() as 'get'](address).send(bodies[name] ?? {});
      const [absent] = addressesOf(name, nowhere, []);
      const reference = await ask(absent);
      expect(reference.status, `${name} of nothing: ${reference.text}`).toBe(404);
      for (const address of addressesOf(name, hidden, [])) {
        const answer = await ask(address);
        expect({ status: answer.status, headers: steady(answer.headers), text: answer.text }, `${method} ${address}`).toEqual({ status: reference.status, headers: steady(reference.headers), text: reference.text });
        compared++;
      }
    }
    expect(compared).toBeGreaterThan(25);
  });

  it('is 403 for a visible thing with a forbidden action', async () => {
    expect((await world.as('osk').post('/api/issues').send(issueOn(world))).status).toBe(403);
    expect((await world.as('rao').post('/api/issues/SKH/1111/retests').send({ version: 1, decodeId: null, buildAId: world.builds.radio1, buildBId: world.builds.device1, outcome: 'failed', lastRung: { downlink: null, uplink: null } })).status).toBe(403);
  });

  it('stands in the audit record although the request was rolled back', async () => {
    await world.as('petra').get('/api/issues/SKH/1111');
    const { rows } = await world.admin.query("select outcome from audit where object = '/api/issues/SKH/1111' and person_id = $1", [world.people.petra]);
    expect(rows.length).toBeGreaterThan(0);
    await expect(world.admin.query("update audit set detail = 'x'")).rejects.toThrow(/append-only/);
  });
});

/** Durations and the reader's own session move between two readings; everything else must stay. */
const settled = (text: string) => text.replace(/"expiresAt":"[^"]+"/g, '').replace(/"(waitingDays|days|oldestDays|waitedDays)":[\d.e-]+/g, '"$1":0').replace(/"lastSeenAt":"[^"]+"/g, '');

describe('two states that differ only in hidden rows', () => {
  it.each(['petra', 'osk', 'mara'] as const)('are the same to %s, an outsider to them', async (person) => {
    const sweep = () => readEverything(world, person, { known, words: ['headline', 'zqradiozqentryBodyzq'] });
    const withoutRefusals = (answers: Awaited<ReturnType<typeof sweep>>) => answers.filter(({ address }) => !address.includes('/audit'));
    const before = withoutRefusals(await sweep());
    await plantIssue(world, { link: 'air', between: ['radio', 'device'], number: `4${EVERYONE.indexOf(person)}44` });
    const after = withoutRefusals(await sweep());
    expect(after.map(({ address, status, text }) => ({ address, status, text: settled(text) }))).toEqual(before.map(({ address, status, text }) => ({ address, status, text: settled(text) })));
  });
});
