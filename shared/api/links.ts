import { z } from 'zod';
import { id, instant, linkInterface, partyRef, programmeCode, side } from './common.js';
import { PARTS } from '../vocabulary.js';

export const build = z.object({ id, label: z.string(), note: z.string(), addedAt: instant });
export type Build = z.infer<typeof build>;
export const unit = z.object({ id, name: z.string(), part: z.enum(PARTS), party: partyRef, builds: z.array(build) });
export type Unit = z.infer<typeof unit>;
export const units = z.object({ items: z.array(unit) });

export const linkEnd = z.object({ unit: z.object({ id, name: z.string(), part: z.enum(PARTS) }), party: partyRef, build: build.nullable() });
export const link = z.object({
  id, programme: programmeCode, name: z.string(), interface: linkInterface,
  centreFrequencyHz: z.number().nullable(),
  a: linkEnd, b: linkEnd,
  openIssues: z.number().int(), criticalIssues: z.number().int(),
  /** The last pair of builds that worked, by a clean retest. */
  baseline: z.object({ buildA: z.string(), buildB: z.string(), at: instant }).nullable(),
});
export type Link = z.infer<typeof link>;
export const links = z.object({ items: z.array(link), actions: z.object({ add: z.boolean(), addUnit: z.boolean() }) });

/** Interworking table: links by capability. */
export const INTERWORKING = ['works', 'works with waiver', 'fails', 'not tried'] as const;
export const capability = z.object({
  name: z.string(), standing: z.enum(INTERWORKING),
  buildA: z.string().nullable(), buildB: z.string().nullable(),
  issue: z.object({ programme: programmeCode, number: z.string(), title: z.string() }).nullable(),
});
export const linkDetail = link.extend({
  unitBuilds: z.object({ a: z.array(build), b: z.array(build) }),
  interworking: z.array(capability),
  issues: z.array(z.object({ programme: programmeCode, number: z.string(), title: z.string(), stage: z.string(), severity: z.string() })),
  actions: z.object({ addBuildA: z.boolean(), addBuildB: z.boolean() }),
});
export type LinkDetail = z.infer<typeof linkDetail>;

export const newUnit = z.object({ programme: programmeCode, partyId: id, name: z.string().trim().min(1).max(80), part: z.enum(PARTS) });
export const newBuild = z.object({ unitId: id, label: z.string().trim().min(1).max(60), note: z.string().max(500).default('') });
export const newLink = z.object({
  programme: programmeCode, name: z.string().trim().min(1).max(120), interface: linkInterface,
  unitAId: id, unitBId: id, centreFrequencyHz: z.number().positive().nullable().default(null),
});
export type NewLink = z.infer<typeof newLink>;
export const endSide = side;
