import type { RegisterFilter, RegisterQuery } from '#shared/api/issues';
import { IS_FOUND } from '../access/is-found.js';

/** A WHERE clause under construction: conditions and the values that they bind, counted from $1. */
class Conditions {
  readonly clauses: string[] = [];
  readonly bind: unknown[] = [];

  add(clause: string, value: unknown): void {
    this.bind.push(value);
    this.clauses.push(clause.replaceAll('$?', `$${this.bind.length}`));
  }

  /** One condition; true where nothing is asked. */
  get all(): string {
    return this.clauses.length > 0 ? this.clauses.join(' and ') : 'true';
  }
}

/** What an index is kept on for each order, and whether it may be missing. */
const ORDERS: Record<RegisterQuery['sort'], { readonly by: string; readonly mayMiss?: true }> = {
  due: { by: 'i.move_due', mayMiss: true },
  raised: { by: 'i.raised_at' },
  updated: { by: 'i.updated_at' },
  severity: { by: "array_position(array['critical', 'major', 'minor'], i.severity)" },
  stage: { by: "array_position(array['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled', 'waived', 'withdrawn'], i.stage)" },
  number: { by: 'i.number' },
  waiting: { by: 'i.move_since', mayMiss: true },
};

/** The register's filter as SQL; who may see a row is the policies' business and not repeated here. */
export function registerConditions(query: RegisterFilter): Conditions {
  const conditions = new Conditions();
  // Written out rather than bound: the planner then sees which end of an index is meant.
  if (query.standing === 'unsettled') conditions.clauses.push('i.open');
  if (query.standing === 'ended') conditions.clauses.push('not i.open');
  if (query.programme) conditions.add('i.programme_id = (select id from programmes where code = $?)', query.programme);
  if (query.stages?.length) conditions.add('i.stage = any($?)', query.stages);
  if (query.severities?.length) conditions.add('i.severity = any($?)', query.severities);
  if (query.codes?.length) conditions.add('i.likely_code = any($?)', query.codes);
  if (query.link) conditions.add('i.link_id = $?', query.link);
  if (query.party) conditions.add('i.party_ids @> array[$?]::uuid[]', query.party);
  if (query.move === 'mine') conditions.clauses.push('i.move_party_id = any((select access.my_parties())::uuid[])');
  else if (query.move === 'none') conditions.clauses.push('i.move_party_id is null');
  else if (query.move !== 'anyone') conditions.add('i.move_party_id = $?', query.move);
  if (query.late) conditions.clauses.push('i.move_due < current_date');
  if (query.text) conditions.add(IS_FOUND, query.text);
  return conditions;
}

export function registerOrder(query: RegisterQuery): string {
  // A waiting time grows as its start moves back, so the order turns.
  const turned = query.sort === 'waiting';
  const direction = (query.order === 'desc') !== turned ? 'desc' : 'asc';
  const { by, mayMiss } = ORDERS[query.sort];
  return `${by} ${direction}${mayMiss ? ' nulls last' : ''}, i.id ${direction}`;
}
