import type { RegisterCounts, RegisterFilter, RegisterPage, RegisterQuery, RegisterRow } from '#shared/api/issues';
import type { Services } from '../http/services.js';
import { registerConditions, registerOrder } from './register-query.js';

/** A register row as one flat SQL record. */
interface Flat {
  programme: string; number: string; title: string; severity: RegisterRow['severity']; stage: RegisterRow['stage'];
  linkId: string; linkName: string; interface: RegisterRow['link']['interface'];
  aId: string; aName: string; aShort: string; bId: string; bName: string; bShort: string;
  downlink: string | null; uplink: string | null;
  code: NonNullable<RegisterRow['hint']>['code'] | null; side: NonNullable<RegisterRow['hint']>['side']; confidence: number;
  decodeState: RegisterRow['decodeState'];
  moveId: string | null; moveName: string; moveShort: string; since: Date; due: string | null; late: boolean; waitingDays: number | null;
  raisedAt: Date; updatedAt: Date; unseen: boolean;
}

/** What a row shows of its issue; the long texts stay where they are. */
const OF_ISSUE = `i.id, i.programme_id, i.number, i.title, i.severity, i.stage, i.open, i.link_id, i.rung_downlink, i.rung_uplink,
  i.likely_code, i.likely_side, i.likely_confidence, i.decode_state, i.move_party_id, i.move_since, i.move_due, i.raised_at, i.updated_at`;

const COLUMNS = `
  g.code as programme, i.number, i.title, i.severity, i.stage,
  l.id as "linkId", l.name as "linkName", l.interface,
  a.id as "aId", a.name as "aName", a.short_name as "aShort", b.id as "bId", b.name as "bName", b.short_name as "bShort",
  i.rung_downlink as downlink, i.rung_uplink as uplink,
  i.likely_code as code, i.likely_side as side, i.likely_confidence as confidence, i.decode_state as "decodeState",
  w.id as "moveId", w.name as "moveName", w.short_name as "moveShort", i.move_since as since, i.move_due as due,
  coalesce(i.open and i.move_due < current_date, false) as late,
  case when i.open then extract(epoch from now() - i.move_since)::float8 / 86400 end as "waitingDays",
  i.raised_at as "raisedAt", i.updated_at as "updatedAt", i.updated_at > coalesce(k.at, '-infinity') as unseen`;

function shape(flat: Flat): RegisterRow {
  const party = (id: string, name: string, shortName: string) => ({ id, name, shortName });
  return {
    programme: flat.programme, number: flat.number, title: flat.title, severity: flat.severity, stage: flat.stage,
    link: { id: flat.linkId, name: flat.linkName, interface: flat.interface },
    a: party(flat.aId, flat.aName, flat.aShort), b: party(flat.bId, flat.bName, flat.bShort),
    lastRung: { downlink: flat.downlink, uplink: flat.uplink },
    hint: flat.code ? { code: flat.code, side: flat.side, confidence: flat.confidence } : null,
    decodeState: flat.decodeState,
    nextMove: flat.moveId ? { party: party(flat.moveId, flat.moveName, flat.moveShort), since: flat.since.toISOString(), due: flat.due, late: flat.late } : null,
    waitingDays: flat.waitingDays, raisedAt: flat.raisedAt.toISOString(), updatedAt: flat.updatedAt.toISOString(), unseen: flat.unseen,
  };
}

interface Cut { readonly limit: number; readonly offset: number }

/** The page is cut first, on an index, and only then joined; the parties that one may know of are read once. */
function rowsOf(query: RegisterQuery, { limit, offset }: Cut): readonly [sql: string, bind: readonly unknown[]] {
  const { all, bind } = registerConditions(query);
  const order = registerOrder(query);
  return [`
    with page as materialized (select ${OF_ISSUE} from issues i where ${all} order by ${order} limit ${limit} offset ${offset}),
    known as materialized (select id, name, short_name from parties)
    select ${COLUMNS}
    from page i
    join programmes g on g.id = i.programme_id join links l on l.id = i.link_id
    join known a on a.id = l.party_a_id join known b on b.id = l.party_b_id
    left join known w on w.id = i.move_party_id
    left join looks k on k.issue_id = i.id and k.person_id = (select access.person())
    order by ${order}`, bind];
}

/** The rows of one page, in the caller's transaction. */
export async function registerRows(services: Services, query: RegisterQuery): Promise<RegisterRow[]> {
  const rows = await services.database.rows<Flat>(...rowsOf(query, { limit: query.size, offset: (query.page - 1) * query.size }));
  return rows.map(shape);
}

/** One row more than the page holds tells whether there is another page. */
export async function registerPage({ database }: Services, personId: string, query: RegisterQuery): Promise<RegisterPage> {
  const { page, size } = query;
  const rows = await database.askAs<Flat>(personId, ...rowsOf(query, { limit: size + 1, offset: (page - 1) * size }));
  return { items: rows.slice(0, size).map(shape), page, size, more: rows.length > size };
}

/** Counted as the reader: what a policy hides is in neither. */
export async function registerCounts({ database }: Services, personId: string, filter: RegisterFilter): Promise<RegisterCounts> {
  const { all, bind } = registerConditions(filter);
  const [counts] = await database.askAs<RegisterCounts>(personId, `
    select (select count(*) from issues i where ${all})::integer as matching, (select count(*) from issues)::integer as "all"`, bind);
  return counts;
}
