import { z } from 'zod';
import { id, instant, partyRef, side } from './common.js';
import { captureFacts, curve, settingValue } from '../decode.js';
import { FILE_KINDS, REACHES } from '../vocabulary.js';

/** One parameter read from a snapshot, with its place. */
export const readParameter = z.object({
  parameter: z.string(), value: settingValue, path: z.string(), raw: z.string(), line: z.number().int().nullable(),
});
export const notUnderstood = z.object({ path: z.string(), raw: z.string(), line: z.number().int().nullable() });
export const snapshotReading = z.object({
  syntax: z.string(), vocabularies: z.array(z.string()),
  parameters: z.array(readParameter), notUnderstood: z.array(notUnderstood), problems: z.array(z.string()),
  /** What responders ask for and this file does not say. */
  missing: z.array(z.string()),
});
export type SnapshotReading = z.infer<typeof snapshotReading>;

/** What was read from a capture before any decode. */
export const captureReading = z.object({ facts: captureFacts, spectrum: curve.nullable(), warnings: z.array(z.string()) });
export type CaptureReading = z.infer<typeof captureReading>;

export const storedFile = z.object({
  id, kind: z.enum(FILE_KINDS), name: z.string(), size: z.number().int(), sha256: z.string(),
  side: side.nullable(), reach: z.enum(REACHES), owner: partyRef, uploadedBy: z.string(), uploadedAt: instant,
  withdrawnAt: instant.nullable(),
  capture: captureReading.nullable(), snapshot: snapshotReading.nullable(),
  /** Why the file could not be read; it is kept all the same. */
  unreadable: z.object({ code: z.string(), message: z.string() }).nullable(),
  actions: z.object({ narrow: z.array(z.enum(REACHES)), withdraw: z.boolean(), download: z.boolean() }),
});
export type StoredFile = z.infer<typeof storedFile>;

/** What a reader outside a snapshot's reach learns of it: that it takes part in the comparison. */
export const veiledFile = z.object({ kind: z.literal('snapshot'), side, owner: partyRef, reach: z.literal('compare-only'), veiled: z.literal(true) });
export type VeiledFile = z.infer<typeof veiledFile>;

/** What an upload's address says of the file. */
export const uploadFields = z.object({
  programme: z.string(), side: side.optional(), reach: z.enum(REACHES).optional(),
  /** The party whose equipment the file describes; the uploader's own where absent. */
  ownerPartyId: id.optional(),
  /** For raw I/Q and WAV. */
  datatype: z.string().max(16).optional(), sampleRateHz: z.coerce.number().positive().optional(),
  centreFrequencyHz: z.coerce.number().positive().optional(),
  /** A SigMF pair is sent as two files: the data first, then the metadata naming it. */
  dataFileId: id.optional(),
  /** For a snapshot in a party's own words: its glossary, sent before it. */
  glossaryFileId: id.optional(),
});
export type UploadFields = z.infer<typeof uploadFields>;
export const changeFile = z.object({ reach: z.enum(REACHES) });
