import { z } from 'zod';
import { id, instant, personRef, side } from './common.js';

/** Where a person's party stands on the link, for the mark beside the entry. */
export const STANDINGS = ['a', 'b', 'lab'] as const;
export const entry = z.object({
  id, author: personRef, standing: z.enum(STANDINGS), at: instant, editedAt: instant.nullable(), withdrawnAt: instant.nullable(),
  body: z.string(), reach: z.enum(['everyone', 'my-party']),
  files: z.array(z.object({ id, name: z.string(), size: z.number().int() })),
  versions: z.number().int(),
  actions: z.object({ edit: z.boolean(), withdraw: z.boolean() }),
});
export type Entry = z.infer<typeof entry>;
export const entries = z.object({ items: z.array(entry), actions: z.object({ write: z.boolean() }) });
export const entryVersions = z.object({ items: z.array(z.object({ body: z.string(), at: instant })) });
export const newEntry = z.object({
  body: z.string().trim().min(1, 'write something first').max(50_000), reach: z.enum(['everyone', 'my-party']).default('everyone'),
  fileIds: z.array(id).max(20).default([]),
});
export type NewEntry = z.infer<typeof newEntry>;
export const changeEntry = z.object({ body: z.string().trim().min(1).max(50_000) });

export const historyItem = z.object({ id, at: instant, person: z.string().nullable(), party: z.string().nullable(), kind: z.string(), text: z.string(), side: side.nullable() });
export const history = z.object({ items: z.array(historyItem) });
export type History = z.infer<typeof history>;
