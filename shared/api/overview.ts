import { z } from 'zod';
import { id, instant, partyRef, programmeCode, severity, stage } from './common.js';
import { registerRow } from './issues.js';
import { WAITING_CAUSES } from '../vocabulary.js';

export const daySheet = z.object({
  waitingForParty: z.array(registerRow.extend({ ask: z.string().nullable() })),
  changed: z.array(z.object({ at: instant, programme: programmeCode, number: z.string(), title: z.string(), text: z.string(), person: z.string().nullable() })),
  running: z.array(z.object({ programme: programmeCode, number: z.string(), title: z.string(), decodeId: id, decodeNumber: z.number().int(), step: z.string(), progress: z.number() })),
  lastLookedAt: instant.nullable(),
  counts: z.object({ open: z.number().int(), critical: z.number().int(), late: z.number().int(), mine: z.number().int() }),
});
export type DaySheet = z.infer<typeof daySheet>;

export const overview = z.object({
  programme: programmeCode,
  bySeverityAndStage: z.array(z.object({ severity, stage, count: z.number().int() })),
  /** Open issues by age, days. */
  byAge: z.array(z.object({ fromDays: z.number().int(), toDays: z.number().int().nullable(), critical: z.number().int(), major: z.number().int(), minor: z.number().int() })),
  byPair: z.array(z.object({ a: partyRef, b: partyRef, open: z.number().int(), critical: z.number().int(), oldestDays: z.number(), nextMoves: z.array(z.object({ party: z.string(), count: z.number().int() })) })),
  waitingByParty: z.array(z.object({ party: partyRef, holding: z.number().int(), late: z.number().int(), waitedDays: z.number(), longest: z.object({ number: z.string(), title: z.string(), days: z.number() }).nullable() })),
  waitingByCause: z.array(z.object({ cause: z.enum(WAITING_CAUSES), days: z.number() })),
  /** Filed and ended by week, the Monday that starts it. */
  flow: z.array(z.object({ week: z.string(), filed: z.number().int(), ended: z.number().int(), open: z.number().int() })),
});
export type Overview = z.infer<typeof overview>;

export const found = z.object({ items: z.array(z.object({ programme: programmeCode, number: z.string(), title: z.string(), where: z.string(), stage })) });
export type Found = z.infer<typeof found>;
export const savedView = z.object({ id, name: z.string(), query: z.string() });
export const savedViews = z.object({ items: z.array(savedView) });
export const newSavedView = z.object({ name: z.string().trim().min(1).max(60), query: z.string().max(2000) });

/** A live event names what changed and nothing more; the page reads it again under its own reader. */
export const liveEvent = z.object({ topic: z.enum(['issue', 'decode', 'register']), programme: programmeCode.optional(), number: z.string().optional(), decodeId: id.optional(), step: z.string().optional(), progress: z.number().optional() });
export type LiveEvent = z.infer<typeof liveEvent>;
