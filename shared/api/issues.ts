import { z } from 'zod';
import { day, id, instant, issueNumber, linkInterface, pageQuery, partyRef, personRef, programmeCode, programmeRef, severity, side, stage } from './common.js';
import { decodeSummary, issueHint } from './decodes.js';
import { storedFile, veiledFile } from './files.js';
import { linkEnd } from './links.js';
import { HINT_CODES, HINT_SIDES, SEVERITIES, SIDES, STAGES, WAITING_CAUSES } from '../vocabulary.js';

export const SIGNAL_PATHS = ['cabled', 'radiated', 'shielded chamber'] as const;
export const signalPath = z.object({
  path: z.enum(SIGNAL_PATHS).nullable(), attenuationDb: z.number().nullable(), levelDbm: z.number().nullable(),
  clockSource: z.string().max(120).nullable(), lateCounters: z.string().max(300).nullable(),
});
export type SignalPath = z.infer<typeof signalPath>;
export const rungs = z.object({ downlink: z.string().nullable(), uplink: z.string().nullable() });

export const nextMove = z.object({
  party: partyRef, ask: z.string(), since: instant, due: day.nullable(), late: z.boolean(), cause: z.enum(WAITING_CAUSES),
});
export type NextMove = z.infer<typeof nextMove>;

/** One register row. */
export const registerRow = z.object({
  programme: programmeCode, number: issueNumber, title: z.string(), severity, stage,
  link: z.object({ id, name: z.string(), interface: linkInterface }),
  a: partyRef, b: partyRef, lastRung: rungs,
  hint: z.object({ code: z.enum(HINT_CODES), side: z.enum(HINT_SIDES), confidence: z.number() }).nullable(),
  decodeState: z.enum(['none', 'running', 'clean', 'hint', 'failed']),
  nextMove: z.object({ party: partyRef, since: instant, due: day.nullable(), late: z.boolean() }).nullable(),
  waitingDays: z.number().nullable(), raisedAt: instant, updatedAt: instant, unseen: z.boolean(),
});
export type RegisterRow = z.infer<typeof registerRow>;

export const SORTS = ['due', 'raised', 'updated', 'severity', 'stage', 'number', 'waiting'] as const;
const list = <T extends readonly [string, ...string[]]>(values: T) =>
  z.preprocess((v) => (typeof v === 'string' ? v.split(',').filter(Boolean) : v), z.array(z.enum(values)).optional());
/** Which issues the register shows. */
export const registerFilter = z.object({
  programme: programmeCode.optional(),
  stages: list(STAGES), severities: list(SEVERITIES), codes: list(HINT_CODES),
  standing: z.enum(['unsettled', 'any', 'ended']).default('unsettled'),
  link: id.optional(), party: id.optional(),
  move: z.union([z.enum(['mine', 'anyone', 'none']), id]).default('anyone'),
  text: z.string().trim().max(200).optional(),
  late: z.stringbool().optional(),
});
export type RegisterFilter = z.infer<typeof registerFilter>;
/** The register's whole state; the page's address carries the same names. */
export const registerQuery = registerFilter.extend({
  ...pageQuery.shape,
  sort: z.enum(SORTS).default('due'), order: z.enum(['asc', 'desc']).default('asc'),
});
export type RegisterQuery = z.infer<typeof registerQuery>;
/** One page, and whether there is one after it. How many there are is asked for by itself: counting reads them all. */
export const registerPage = z.object({ items: z.array(registerRow), page: z.number().int(), size: z.number().int(), more: z.boolean() });
export type RegisterPage = z.infer<typeof registerPage>;
/** How many issues match the filter, and how many there are for the reader. */
export const registerCounts = z.object({ matching: z.number().int(), all: z.number().int() });
export type RegisterCounts = z.infer<typeof registerCounts>;

export const newIssue = z.object({
  linkId: id, title: z.string().trim().min(4, 'say in a sentence what is wrong').max(200), description: z.string().max(50_000).default(''),
  severity, buildAId: id.nullable().default(null), buildBId: id.nullable().default(null),
  transmitter: side.nullable().default(null), lastRung: rungs, signalPath,
  baseline: z.string().max(2000).default(''),
  captureFileId: id.nullable().default(null), snapshotAFileId: id.nullable().default(null), snapshotBFileId: id.nullable().default(null),
  fileIds: z.array(id).max(50).default([]),
  shareWithPartyIds: z.array(id).max(20).default([]),
  nextMove: z.object({ partyId: id, ask: z.string().trim().min(1).max(500), due: day.nullable() }).optional(),
  /** The same key filed twice answers with the first issue. */
  fileKey: z.uuid(),
});
export type NewIssue = z.infer<typeof newIssue>;

export const changeIssue = z.object({
  version: z.number().int(),
  title: newIssue.shape.title.optional(), description: z.string().max(50_000).optional(), severity: severity.optional(),
  lastRung: rungs.optional(), signalPath: signalPath.optional(), baseline: z.string().max(2000).optional(),
  buildAId: id.nullable().optional(), buildBId: id.nullable().optional(), transmitter: side.nullable().optional(),
});
export type ChangeIssue = z.infer<typeof changeIssue>;

/** A move of the stage that the caller may make now, and what it asks for. */
export const REQUIREMENTS = ['build', 'clean-retest', 'failed-retest', 'reason', 'end-date'] as const;
export const possibleMove = z.object({
  to: stage, label: z.string(), requires: z.array(z.enum(REQUIREMENTS)), blockedBy: z.string().nullable(),
  /** Sides of whose unit a build may be named. */
  buildSides: z.array(z.enum(SIDES)),
});
export type PossibleMove = z.infer<typeof possibleMove>;
export const newMove = z.object({
  to: stage, version: z.number().int(), reason: z.string().trim().max(2000).optional(), buildId: id.optional(),
  endsOn: day.optional(), nextMove: z.object({ partyId: id, ask: z.string().trim().min(1).max(500), due: day.nullable() }).optional(),
});
export type NewMove = z.infer<typeof newMove>;
export const newNextMove = z.object({
  version: z.number().int(), partyId: id, ask: z.string().trim().min(1).max(500), due: day.nullable(), cause: z.enum(WAITING_CAUSES).optional(),
});
export type NewNextMove = z.infer<typeof newNextMove>;

export const retest = z.object({
  id, outcome: z.enum(['clean', 'failed']), buildA: z.string(), buildB: z.string(), by: z.string(), at: instant, note: z.string(), decodeNumber: z.number().int().nullable(),
  lastRung: rungs,
});
export const newRetest = z.object({
  version: z.number().int(), decodeId: id.nullable(), buildAId: id, buildBId: id, outcome: z.enum(['clean', 'failed']), note: z.string().trim().max(2000).default(''), lastRung: rungs,
});
export type NewRetest = z.infer<typeof newRetest>;
export const waiver = z.object({
  id, reason: z.string(), endsOn: day, signatures: z.array(z.object({ party: partyRef, by: z.string(), at: instant })), inForce: z.boolean(),
  /** Still waits for a signature; a waiver that is neither this nor in force has ended. */
  pending: z.boolean(),
  actions: z.object({ sign: z.boolean() }),
});

export const issue = z.object({
  id, programme: programmeRef, number: issueNumber, version: z.number().int(),
  title: z.string(), description: z.string(), severity, stage, raisedAt: instant, raisedBy: personRef, settledAt: instant.nullable(),
  link: z.object({ id, name: z.string(), interface: linkInterface, centreFrequencyHz: z.number().nullable() }),
  a: linkEnd, b: linkEnd, transmitter: side.nullable(),
  lastRung: rungs, signalPath, baseline: z.string(),
  parties: z.array(partyRef), nextMove: nextMove.nullable(),
  hints: z.array(issueHint), decodes: z.array(decodeSummary), latestDecodeId: id.nullable(),
  files: z.array(z.union([storedFile, veiledFile])),
  retests: z.array(retest), waiver: waiver.nullable(),
  waiting: z.array(z.object({ cause: z.enum(WAITING_CAUSES), days: z.number() })),
  following: z.boolean(), followers: z.number().int(),
  moves: z.array(possibleMove),
  actions: z.object({ edit: z.boolean(), changeSeverity: z.boolean(), setNextMove: z.boolean(), addFiles: z.boolean(), decode: z.boolean(), write: z.boolean(), retest: z.boolean(), share: z.boolean() }),
});
export type Issue = z.infer<typeof issue>;
export const shareIssue = z.object({ partyId: id });
export const filedIssue = z.object({ programme: programmeCode, number: issueNumber });
