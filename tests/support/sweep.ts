import { ENDPOINTS, type EndpointName } from '#shared/api/endpoints';
import type { Planted } from './planting.js';
import type { PersonKey, World } from './world.js';

type IdKind = keyof Planted['ids'];
const PARAMS: Record<string, IdKind> = { fileId: 'file', decodeId: 'decode', hintId: 'hint', entryId: 'entry', waiverId: 'waiver', linkId: 'link', invitationId: 'invitation', membershipId: 'membership', sessionId: 'session', viewId: 'view' };

/** Every address of an endpoint: with each known identifier in each place, and with queries that list and search widely. */
export function addressesOf(name: EndpointName, known: readonly Planted[], words: readonly string[]): string[] {
  const { path } = ENDPOINTS[name];
  const issues = known.flatMap((each) => each.issues.map(({ number }) => number));
  let paths = path.includes(':number') ? issues.map((number) => path.replace(':programme', 'SKH').replace(':number', number)) : [path.replace(':programme', 'SKH')];
  for (const [param, kind] of Object.entries(PARAMS)) {
    if (!path.includes(`:${param}`)) continue;
    const ids = known.flatMap((each) => each.ids[kind]);
    paths = paths.flatMap((each) => ids.map((id) => each.replace(`:${param}`, id)));
  }
  if (name === 'listIssues') return words.flatMap((word) => [`${path}?standing=any&size=200`, `${path}?standing=any&text=${word}`, `${path}?standing=any&sort=waiting&move=mine`]);
  if (name === 'countIssues') return words.flatMap((word) => [`${path}?standing=any`, `${path}?standing=any&text=${word}`, `${path}?standing=any&move=mine`]);
  if (name === 'find') return words.map((word) => `${path}?q=${word}`);
  if (name === 'readAudit') return paths.map((each) => `${each}?size=200`);
  return paths;
}

export interface Answer { readonly address: string; readonly status: number; readonly text: string }

/** All that a person gets from every reading endpoint, the CSV export and the downloads. */
export async function readEverything(world: World, person: PersonKey, { known, words }: { known: readonly Planted[]; words: readonly string[] }): Promise<Answer[]> {
  const reading = (Object.keys(ENDPOINTS) as EndpointName[]).filter((name) => ENDPOINTS[name].method === 'GET');
  const addresses = [
    ...reading.flatMap((name) => addressesOf(name, known, words)),
    '/api/issues/export?standing=any', ...known.flatMap(({ ids }) => ids.file.map((id) => `/api/files/${id}/content`)), '/api/auth/session',
  ];
  const answers: Answer[] = [];
  for (const address of new Set(addresses)) {
    const { status, text } = await world.as(person).get(address);
    answers.push({ address, status, text: text ?? '' });
  }
  return answers;
}
