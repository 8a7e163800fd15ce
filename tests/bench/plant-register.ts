import { createHash, randomBytes } from 'node:crypto';
import type { Client } from 'pg';

const PROGRAMMES = ['AAA', 'BBB', 'CCC', 'DDD'];
const ISSUES_EACH = 5000;
const VENDORS = 8;
const LINKS = 12;

export interface Reader { readonly cookie: string; readonly personId: string; readonly partyIds: string[] }
export interface Planted { readonly issues: number; readonly lab: Reader; readonly vendor: Reader }

/**
 * Four programmes with 5,000 issues each, spread evenly over links, stages, severities and dates by
 * arithmetic, so that each run measures the same. The lab stands on all of them, the vendor on some.
 */
export async function plantRegister(admin: Client): Promise<Planted> {
  const lab = await person(admin, 'lab');
  const vendor = await person(admin, 'vendor');
  for (const code of PROGRAMMES) await programme(admin, code, { lab, vendor });
  await admin.query('vacuum analyze');
  return { issues: PROGRAMMES.length * ISSUES_EACH, lab, vendor };
}

async function person(admin: Client, subject: string): Promise<Reader> {
  const { rows: [{ id }] } = await admin.query(`insert into people (issuer, subject, name, email) values ('bench', $1, $1, $1 || '@bench.example') returning id`, [subject]);
  const cookie = randomBytes(32).toString('base64url');
  await admin.query("insert into sessions (token_hash, person_id, idle, expires_at, absolute_expires_at) values ($1, $2, interval '8 hours', now() + interval '8 hours', now() + interval '7 days')", [createHash('sha256').update(cookie).digest(), id]);
  return { cookie, personId: id, partyIds: [] };
}

async function programme(admin: Client, code: string, { lab, vendor }: { lab: Reader; vendor: Reader }): Promise<void> {
  const { rows: [{ id }] } = await admin.query('insert into programmes (code, name) values ($1, $1) returning id', [code]);
  const parties: string[] = [];
  for (let n = 0; n <= VENDORS; n++) {
    const { rows: [party] } = await admin.query(`insert into parties (programme_id, name, short_name, parts, issuer) values ($1, $2, $2, $3, 'bench') returning id`, [id, `Party ${n}`, n === 0 ? ['test lab'] : ['radio unit', 'terminal']]);
    parties.push(party.id);
  }
  for (const [reader, partyId, role] of [[lab, parties[0], 'integration-engineer'], [vendor, parties[1], 'vendor-engineer']] as const) {
    await admin.query('insert into memberships (programme_id, party_id, person_id, role) values ($1, $2, $3, $4)', [id, partyId, reader.personId, role]);
    reader.partyIds.push(partyId);
  }
  const units: string[] = [];
  for (const [n, partyId] of parties.entries()) {
    const { rows: [unit] } = await admin.query(`insert into units (programme_id, party_id, name, part) values ($1, $2, $3, 'radio unit') returning id`, [id, partyId, `Unit ${n}`]);
    units.push(unit.id);
  }
  for (let n = 0; n < LINKS; n++) {
    const [a, b] = [1 + (n % VENDORS), 1 + ((n * 3 + 1) % VENDORS)];
    await admin.query(`insert into links (programme_id, name, interface, unit_a_id, unit_b_id, party_a_id, party_b_id, party_ids) values ($1, $2, 'air', $3, $4, $5, $6, $7)`,
      [id, `Link ${n}`, units[a], units[b === a ? 0 : b], parties[a], parties[b === a ? 0 : b], [...new Set([parties[0], parties[a], parties[b]])]]);
  }
  await issues(admin, id, { raisedBy: lab.personId, labParty: parties[0] });
}

async function issues(admin: Client, programmeId: string, { raisedBy, labParty }: { raisedBy: string; labParty: string }): Promise<void> {
  await admin.query(`
    with l as (select id, party_ids, row_number() over (order by name) - 1 as place from links where programme_id = $1)
    insert into issues (programme_id, number, link_id, party_ids, title, description, severity, stage, raised_by, raised_by_name, raised_by_party_id, raised_at, updated_at, likely_code, likely_side, likely_confidence, decode_state)
    select $1, lpad(n::text, 4, '0'), l.id, l.party_ids, 'Terminal ' || n || ' never gets past the broadcast', repeat('What was seen on the rig that day. ', 12),
      (array['critical', 'major', 'minor'])[1 + n % 3], (array['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled', 'waived', 'withdrawn'])[1 + (n * 5) % 8],
      $2, 'lab', $3, now() - (n % 400) * interval '1 day', now() - (n % 97) * interval '1 hour', 'cyclic-prefix', 'b', 0.9, 'hint'
    from generate_series(0, $4::int - 1) n join l on l.place = n % ${LINKS}`, [programmeId, raisedBy, labParty, ISSUES_EACH]);
  await admin.query(`
    insert into next_moves (programme_id, issue_id, party_id, ask, cause, due, since)
    select i.programme_id, i.id, i.party_ids[1 + i.number::int % 2], 'look', 'side-a', current_date - 30 + i.number::int % 60, now() - (i.number::int % 30) * interval '1 day'
    from issues i where i.programme_id = $1 and i.open`, [programmeId]);
  await admin.query(`insert into events (programme_id, issue_id, kind, text, at) select i.programme_id, i.id, 'edited', 'changed the headline', now() - (i.number::int % 300) * interval '1 hour' from issues i, generate_series(1, 3) where i.programme_id = $1`, [programmeId]);
}
