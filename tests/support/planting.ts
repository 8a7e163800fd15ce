import { randomUUID } from 'node:crypto';
import type { World, PartyKey, PersonKey } from './world.js';

/** A distinct string for one party's one private field: found outside its reach, it names the leak. */
export const mark = (party: string, field: string) => `zq${party}zq${field}zq`;
export const MARK = /zq([a-z]+)zq([a-zA-Z]+)zq/g;

export interface Planted {
  readonly issues: { number: string; id: string; parties: readonly PartyKey[] }[];
  readonly ids: Record<'file' | 'decode' | 'hint' | 'entry' | 'waiver' | 'link' | 'invitation' | 'membership' | 'session' | 'view', string[]>;
}

async function insert(world: World, table: string, row: Record<string, unknown>): Promise<string> {
  const all = { id: randomUUID(), ...row };
  const names = Object.keys(all);
  await world.admin.query(`insert into ${table} (${names.join(', ')}) values (${names.map((_, i) => `$${i + 1}`).join(', ')})`, Object.values(all));
  return all.id;
}

const ENGINEER: Record<PartyKey, PersonKey> = { lab: 'mara', radio: 'ines', network: 'jory', device: 'rao', wifi: 'petra' };

/**
 * One issue between two parties, with a marker in every private field of each: their own entries,
 * files, decodes and history, and the snapshots that they share as compare only.
 */
export async function plantIssue(world: World, { link, between, number }: { link: keyof World['links']; between: readonly [PartyKey, PartyKey]; number: string }): Promise<Planted> {
  const planted: Planted = { issues: [], ids: { file: [], decode: [], hint: [], entry: [], waiver: [], link: [world.links[link]], invitation: [], membership: [], session: [], view: [] } };
  const base = { programme_id: world.programmeId };
  const both = between.join('');
  const raiser = ENGINEER[between[0]];
  const issueId = await insert(world, 'issues', {
    ...base, number, link_id: world.links[link], party_ids: [...new Set(between)].map((key) => world.parties[key]), title: `${mark(both, 'title')} headline`, description: mark(both, 'description'),
    severity: 'critical', raised_by: world.people[raiser], raised_by_name: mark(both, 'raisedBy'), raised_by_party_id: world.parties[between[0]], baseline: mark(both, 'baseline'),
    signal_path: JSON.stringify({ clockSource: mark(both, 'clockSource') }), likely_code: 'cyclic-prefix', likely_side: 'b', likely_confidence: 0.9, decode_state: 'hint',
  });
  planted.issues.push({ number, id: issueId, parties: between });
  await insert(world, 'next_moves', { ...base, issue_id: issueId, party_id: world.parties[between[1]], ask: mark(both, 'ask'), cause: 'side-b', due: '2020-01-01' });
  planted.ids.waiver.push(await insert(world, 'waivers', { ...base, issue_id: issueId, reason: mark(both, 'waiver'), ends_on: '2099-01-01', asked_by: world.people[raiser] }));
  for (const [index, party] of [...new Set(between)].entries()) await plantPrivate(world, planted, { issueId, party, side: index === 0 ? 'a' : 'b' });
  return planted;
}

async function plantPrivate(world: World, planted: Planted, { issueId, party, side }: { issueId: string; party: PartyKey; side: 'a' | 'b' }): Promise<void> {
  const base = { programme_id: world.programmeId, issue_id: issueId };
  const partyId = world.parties[party];
  const personId = world.people[ENGINEER[party]];
  const m = (field: string) => mark(party, field);
  const entryId = await insert(world, 'entries', { ...base, author_id: personId, author_name: m('author'), author_party_id: partyId, author_party_name: 'x', body: m('entryBody'), reach: 'my-party' });
  planted.ids.entry.push(entryId);
  await insert(world, 'entry_versions', { entry_id: entryId, programme_id: world.programmeId, body: m('entryVersion') });
  await insert(world, 'events', { ...base, person_id: personId, person_name: m('eventPerson'), party_id: partyId, party_name: 'x', kind: 'entry', text: m('eventText'), reach: 'my-party' });
  const file = (kind: string, reach: string, name: string) => insert(world, 'files', {
    ...base, kind, side: kind === 'snapshot' ? side : null, name: m(name), size: 10, sha256: 'a'.repeat(64), storage_id: randomUUID(), reach, party_id: partyId, uploader_party_id: partyId, uploaded_by: personId, uploaded_by_name: m('uploader'),
  });
  const own = await file('capture', 'my-party', 'captureName');
  const veiled = await file('snapshot', 'compare-only', 'snapshotName');
  planted.ids.file.push(own, veiled);
  await world.admin.query('insert into captures (file_id, programme_id, facts, warnings) values ($1, $2, $3, $4)', [own, world.programmeId, JSON.stringify({ format: m('captureFacts') }), JSON.stringify([m('captureWarning')])]);
  await world.admin.query('insert into snapshots (file_id, programme_id, syntax, not_understood) values ($1, $2, $3, $4)', [veiled, world.programmeId, m('syntax'), JSON.stringify([{ path: m('notUnderstoodPath'), raw: m('notUnderstoodRaw'), line: 1 }])]);
  await insert(world, 'snapshot_parameters', { file_id: veiled, programme_id: world.programmeId, parameter: 'cyclicPrefix', value: JSON.stringify(m('parameterValue')), path: m('parameterPath'), raw: m('parameterRaw'), line: 4 });
  const decodeId = await insert(world, 'decodes', { ...base, number: 1, reach: 'my-party', party_id: partyId, state: 'failed', error_code: m('errorCode'), error_message: m('errorMessage'), requested_by: personId, requested_by_name: m('requestedBy') });
  planted.ids.decode.push(decodeId);
  await insert(world, 'decode_results', { decode_id: decodeId, programme_id: world.programmeId, attempt: 1, audience_party_id: partyId, result: resultSaying(m('ownResult')) });
  planted.ids.hint.push(await insert(world, 'hints', { decode_id: decodeId, programme_id: world.programmeId, issue_id: issueId, rank: 0, code: 'technology', side, confidence: 0.5 }));
  await insert(world, 'audit', { programme_id: world.programmeId, party_id: partyId, person_id: personId, person_name: m('auditPerson'), action: 'download', object: m('auditObject'), detail: m('auditDetail') });
  planted.ids.view.push(await insert(world, 'saved_views', { person_id: personId, name: m('viewName'), query: m('viewQuery') }));
}

/** A whole result with one hint that says the text. */
function resultSaying(text: string): string {
  return JSON.stringify({
    contract: 1, engine: { name: 'crosstie', version: '1' }, inputs: [], capture: null, air: {}, comparison: [], tried: [], lookNext: [], timingMs: { read: 0, decode: 0, total: 0 },
    hints: [{ code: 'cyclic-prefix', side: 'b', confidence: 0.9, summary: text, evidence: [], wouldDisprove: '' }],
  });
}

/** One decode for everyone on the issue whose result exists in three versions: for all, and one for each side's party. */
export async function plantSharedDecode(world: World, issueId: string, between: readonly [PartyKey, PartyKey]): Promise<string> {
  const base = { programme_id: world.programmeId, issue_id: issueId };
  const decodeId = await insert(world, 'decodes', { ...base, number: 1, reach: 'everyone', party_id: world.parties[between[0]], state: 'done', step: 'done', progress: 1, engine_version: '1', requested_by: world.people[ENGINEER[between[0]]], requested_by_name: 'x', finished_at: new Date() });
  for (const party of [null, ...new Set(between)]) {
    await insert(world, 'decode_results', { decode_id: decodeId, programme_id: world.programmeId, attempt: 1, audience_party_id: party ? world.parties[party] : null, result: resultSaying(party ? mark(party, 'sharedResult') : 'for everyone') });
  }
  await insert(world, 'hints', { decode_id: decodeId, programme_id: world.programmeId, issue_id: issueId, rank: 0, code: 'cyclic-prefix', side: 'b', confidence: 0.9 });
  return decodeId;
}
