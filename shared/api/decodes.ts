import { z } from 'zod';
import { id, instant, side } from './common.js';
import { decodeResult, hint } from '../decode.js';
import { DECODE_STATES, DECODE_STEPS } from '../vocabulary.js';

export const VERDICTS_ON_HINTS = ['confirmed', 'refuted'] as const;
export const hintVerdict = z.object({
  verdict: z.enum(VERDICTS_ON_HINTS), by: z.string(), party: z.string(), at: instant, reason: z.string(),
});
export const newHintVerdict = z.object({ verdict: z.enum(VERDICTS_ON_HINTS), reason: z.string().trim().max(2000).default('') });
export type NewHintVerdict = z.infer<typeof newHintVerdict>;

export const issueHint = hint.extend({ id, decodeId: id, decodeNumber: z.number().int(), verdicts: z.array(hintVerdict), actions: z.object({ judge: z.boolean() }) });
export type IssueHint = z.infer<typeof issueHint>;

export const decodeSummary = z.object({
  id, number: z.number().int(), state: z.enum(DECODE_STATES), step: z.enum(DECODE_STEPS), progress: z.number().min(0).max(1),
  requestedBy: z.string(), queuedAt: instant, finishedAt: instant.nullable(),
  captureName: z.string().nullable(), engineVersion: z.string().nullable(),
  error: z.object({ code: z.string(), message: z.string() }).nullable(),
  /** A file that this decode used has been withdrawn since. */
  inputWithdrawn: z.boolean(),
});
export type DecodeSummary = z.infer<typeof decodeSummary>;
/** One decode within the reader's reach. */
export const decode = decodeSummary.extend({ result: decodeResult.nullable(), hints: z.array(issueHint) });
export type Decode = z.infer<typeof decode>;

export const newDecode = z.object({
  captureFileId: id.nullable(), snapshotAFileId: id.nullable(), snapshotBFileId: id.nullable(), transmitter: side.nullable().default(null),
});
export type NewDecode = z.infer<typeof newDecode>;
