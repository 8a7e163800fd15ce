import { z } from 'zod';
import { INTERFACES, ROLES, SEVERITIES, SIDES, STAGES } from '../vocabulary.js';

export const id = z.uuid();
/** ISO 8601 with zone, always UTC on the wire; pages show it in the reader's zone. */
export const instant = z.iso.datetime();
export const day = z.iso.date();
export const programmeCode = z.string().regex(/^[A-Z]{2,5}$/, 'a programme code is two to five capital letters');
export const issueNumber = z.string().regex(/^\d{4}$/, 'an issue number is four digits');

export const partyRef = z.object({ id, name: z.string(), shortName: z.string() });
export type PartyRef = z.infer<typeof partyRef>;
export const personRef = z.object({ id, name: z.string(), party: partyRef.nullable() });
export type PersonRef = z.infer<typeof personRef>;
export const programmeRef = z.object({ id, code: programmeCode, name: z.string() });
export type ProgrammeRef = z.infer<typeof programmeRef>;

export const stage = z.enum(STAGES);
export const severity = z.enum(SEVERITIES);
export const role = z.enum(ROLES);
export const side = z.enum(SIDES);
export const linkInterface = z.enum(INTERFACES);

export const pageQuery = z.object({
  page: z.coerce.number().int().min(1).default(1),
  size: z.coerce.number().int().min(1).max(200).default(50),
});

/** RFC 9457 problem details; `errors` names each refused field. */
export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string().optional(),
  code: z.string(),
  errors: z.array(z.object({ field: z.string(), message: z.string() })).optional(),
});
export type Problem = z.infer<typeof problem>;
