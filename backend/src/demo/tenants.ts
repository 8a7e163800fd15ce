import { DEMO_ACCOUNTS } from '#dev-idp/accounts';
import { LINKS, PARTIES, PEOPLE, PROGRAMME, UNITS, type UnitKey } from './parties.js';
import type { Rows } from './rows.js';
import type { LinkKey, PartyKey, PersonKey } from './story.js';

export interface Person { readonly id: string; readonly name: string; readonly party: PartyKey }
export interface PlantedLink { readonly id: string; readonly a: UnitKey; readonly b: UnitKey; readonly partyA: PartyKey; readonly partyB: PartyKey; readonly interface: 'air' | 'wifi' | 'fronthaul' }
export interface Tenants {
  readonly programmeId: string;
  readonly parties: Record<PartyKey, string>;
  readonly people: Record<PersonKey, Person>;
  readonly links: Record<LinkKey, PlantedLink>;
  /** Build ids by unit and label. */
  readonly builds: ReadonlyMap<string, string>;
}

async function each<K extends string, V, R>(record: Record<K, V>, make: (key: K, value: V) => Promise<R>): Promise<Record<K, R>> {
  const made: Partial<Record<K, R>> = {};
  for (const key of Object.keys(record) as K[]) made[key] = await make(key, record[key]);
  return made as Record<K, R>;
}

/** The programme with its parties, people, units, builds and links. */
export async function plantTenants(rows: Rows, issuer: string): Promise<Tenants> {
  const programmeId = await rows.insert('programmes', { ...PROGRAMME, created_at: rows.at(-92) });
  const base = { programme_id: programmeId };
  const parties = await each(PARTIES, (_key, { name, shortName, parts }) => rows.insert('parties', { ...base, name, short_name: shortName, parts, issuer, created_at: rows.at(-92) }));
  const people = await each(PEOPLE, async (subject, { party, role }) => {
    const account = DEMO_ACCOUNTS.find(({ sub }) => sub === subject);
    if (!account) throw new Error(`the local identity provider knows no account ${subject}`);
    const id = await rows.insert('people', { issuer, subject, name: account.name, email: account.email, time_zone: 'Europe/London', created_at: rows.at(-91) });
    await rows.insert('memberships', { ...base, party_id: parties[party], person_id: id, role, joined_at: rows.at(-91) });
    return { id, name: account.name, party };
  });
  const builds = new Map<string, string>();
  const units = await each(UNITS, async (key, { party, name, part, builds: loads }) => {
    const unitId = await rows.insert('units', { ...base, party_id: parties[party], name, part, created_at: rows.at(-90) });
    for (const [label, day, note] of loads) builds.set(`${key} ${label}`, await rows.insert('builds', { ...base, unit_id: unitId, label, note, added_at: rows.at(day) }));
    return unitId;
  });
  const links = await each(LINKS, async (_key, { name, interface: on, a, b, centreHz }) => {
    const [partyA, partyB] = [UNITS[a].party, UNITS[b].party];
    const id = await rows.insert('links', {
      ...base, name, interface: on, centre_frequency_hz: centreHz, unit_a_id: units[a], unit_b_id: units[b], party_a_id: parties[partyA], party_b_id: parties[partyB],
      party_ids: [...new Set([parties[partyA], parties[partyB], parties.harrowmere])], created_at: rows.at(-85),
    });
    return { id, a, b, partyA, partyB, interface: on };
  });
  return { programmeId, parties, people, links, builds };
}
