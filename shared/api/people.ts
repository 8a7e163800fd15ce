import { z } from 'zod';
import { day, id, instant, pageQuery, partyRef, personRef, programmeRef, role } from './common.js';
import { PARTS } from '../vocabulary.js';

/** `actions` is what the person may begin in the programme, so that no page offers what would be refused. */
export const membership = z.object({ id, programme: programmeRef, party: partyRef, role, actions: z.object({ fileIssue: z.boolean() }) });
export type Membership = z.infer<typeof membership>;

export const me = z.object({
  id,
  name: z.string(),
  email: z.string(),
  timeZone: z.string(),
  notify: z.object({ nextMove: z.boolean(), entries: z.boolean(), stages: z.boolean() }),
  memberships: z.array(membership),
});
export type Me = z.infer<typeof me>;

export const changeMe = z.object({
  timeZone: z.string().min(1).max(64).optional(),
  notify: me.shape.notify.optional(),
});
export type ChangeMe = z.infer<typeof changeMe>;

export const mySession = z.object({ id: z.string(), createdAt: instant, lastSeenAt: instant, current: z.boolean(), agent: z.string() });
export const mySessions = z.object({ items: z.array(mySession) });

export const party = partyRef.extend({ parts: z.array(z.enum(PARTS)), people: z.number().int() });
export const programmePerson = z.object({
  membershipId: id, person: personRef, email: z.string(), role, joinedAt: instant,
});
export const invitation = z.object({ id, email: z.string(), party: partyRef, role, expiresAt: instant, invitedBy: z.string() });
/** The Programme page. People are listed to administrators and managers in full, to others their own party only. */
export const programme = programmeRef.extend({
  parties: z.array(party),
  people: z.array(programmePerson),
  invitations: z.array(invitation),
  stuckMail: z.number().int().nullable(),
  actions: z.object({ invite: z.boolean(), changeRoles: z.boolean(), readAudit: z.boolean(), addParty: z.boolean() }),
});
export type Programme = z.infer<typeof programme>;

export const newInvitation = z.object({ email: z.email().max(254), partyId: id, role });
export type NewInvitation = z.infer<typeof newInvitation>;
export const madeInvitation = z.object({ id, link: z.string(), expiresAt: instant });
export const newParty = z.object({
  name: z.string().trim().min(1).max(80), shortName: z.string().trim().min(1).max(24), parts: z.array(z.enum(PARTS)).min(1),
});
export type NewParty = z.infer<typeof newParty>;
export const changeMembership = z.object({ role: role.optional(), leave: z.literal(true).optional() });

export const auditQuery = pageQuery.extend({ action: z.string().max(60).optional(), from: day.optional(), to: day.optional() });
export const auditEntry = z.object({
  id, at: instant, person: z.string().nullable(), party: z.string().nullable(), action: z.string(),
  object: z.string(), detail: z.string(), outcome: z.enum(['done', 'refused']),
});
export const auditPage = z.object({ items: z.array(auditEntry), total: z.number().int(), page: z.number().int() });
export type AuditPage = z.infer<typeof auditPage>;
