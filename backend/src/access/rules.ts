import { z } from 'zod';
import type { Role } from '#shared/vocabulary';
import { forbidden, notFound } from '../http/problems.js';
import type { Caller, Services } from '../http/services.js';
import { may, type Action } from './policy.js';

/** Decides from the path alone, inside the caller's transaction; throws a refusal or answers what it found. */
export type Rule<C> = (asked: { services: Services; caller: Caller; params: Readonly<Record<string, string>> }) => Promise<C>;

/** The caller's standing in one programme. */
export interface Standing {
  readonly membershipId: string;
  readonly programmeId: string;
  readonly programmeCode: string;
  readonly programmeName: string;
  readonly partyId: string;
  readonly partyName: string;
  readonly partyShortName: string;
  readonly isLab: boolean;
  readonly role: Role;
}

export interface GrantedIssue {
  readonly issueId: string;
  readonly number: string;
  readonly title: string;
  readonly stage: string;
  readonly version: number;
  readonly linkId: string;
  readonly partyAId: string;
  readonly partyBId: string;
  readonly partyIds: readonly string[];
  readonly standing: Standing;
}

const STANDING = `
  select m.id as "membershipId", g.id as "programmeId", g.code as "programmeCode", g.name as "programmeName",
    p.id as "partyId", p.name as "partyName", p.short_name as "partyShortName", 'test lab' = any(p.parts) as "isLab", m.role
  from memberships m join programmes g on g.id = m.programme_id join parties p on p.id = m.party_id
  where m.person_id = access.person() and m.left_at is null`;

export function standings(services: Services): Promise<Standing[]> {
  return services.database.rows<Standing>(`${STANDING} order by g.code`);
}

/** Any signed-in person; the policies do the rest. */
export const signedIn: Rule<null> = async () => null;

export function refuseUnless(standing: Standing, action: Action): void {
  if (!may(standing.role, action)) throw forbidden(`Your role in ${standing.programmeName} does not include this.`);
}

/** A member of the programme that the path names, with the right to the action. */
export function inProgramme(action: Action): Rule<Standing> {
  return async ({ services, params }) => {
    const standing = await services.database.row<Standing>(`${STANDING} and g.code = $1`, [params.programme ?? '']);
    if (!standing) throw notFound();
    refuseUnless(standing, action);
    return standing;
  };
}

/** For what a body names instead of the path. */
export async function standingIn(services: Services, programmeId: string, action: Action): Promise<Standing> {
  const standing = await services.database.row<Standing>(`${STANDING} and g.id = $1`, [programmeId]);
  if (!standing) throw notFound();
  refuseUnless(standing, action);
  return standing;
}

/** An issue that exists for the caller, with the right to the action. */
export function onIssue(action: Action): Rule<GrantedIssue> {
  return async ({ services, params }) => {
    const found = await services.database.row<Omit<GrantedIssue, 'standing'> & { programmeId: string }>(`
      select i.id as "issueId", i.number, i.title, i.stage, i.version, i.link_id as "linkId", i.party_ids as "partyIds", i.programme_id as "programmeId",
        l.party_a_id as "partyAId", l.party_b_id as "partyBId"
      from issues i join programmes g on g.id = i.programme_id join links l on l.id = i.link_id
      where g.code = $1 and i.number = $2`, [params.programme ?? '', params.number ?? '']);
    if (!found) throw notFound();
    const { programmeId, ...issue } = found;
    const standing = await standingIn(services, programmeId, action);
    return { ...issue, standing };
  };
}

/** A path parameter that must be an identifier; anything else is nothing that exists. */
export function idParam(params: Readonly<Record<string, string>>, name: string): string {
  const parsed = z.uuid().safeParse(params[name]);
  if (!parsed.success) throw notFound();
  return parsed.data;
}
