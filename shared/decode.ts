import { z } from 'zod';
import { HINT_CODES, HINT_SIDES } from './vocabulary.js';

/**
 * The decode's result: printed by the command, stored by the worker, returned by the API
 * within the reader's reach. Units are SI and stand in the field names.
 */

export const scalar = z.union([z.string(), z.number(), z.boolean(), z.null()]);
export const settingValue = z.union([scalar, z.array(scalar), z.record(z.string(), z.unknown())]);
export type SettingValue = z.infer<typeof settingValue>;

/** One value that the signal itself shows. `reason` stands where `value` is null. */
export const airValue = z.looseObject({
  value: settingValue,
  confidence: z.number().min(0).max(1).optional(),
  method: z.string().optional(),
  reason: z.string().optional(),
});
export type AirValue = z.infer<typeof airValue>;

/** A declared value: in the common unit, where in the file it stood, and the text that stood there. */
export const declared = z.object({
  value: settingValue,
  path: z.string().nullable(),
  raw: z.string().nullable(),
  line: z.number().int().positive().nullable().optional(),
});
export type Declared = z.infer<typeof declared>;

export const VERDICTS = ['agree', 'differ', 'one-sided', 'not-permitted'] as const;
export const comparisonRow = z.object({
  parameter: z.string(),
  a: declared.nullable(),
  b: declared.nullable(),
  announced: settingValue.nullable(),
  air: settingValue.nullable(),
  verdict: z.enum(VERDICTS),
  clause: z.string().nullable(),
  note: z.string().nullable().optional(),
});
export type ComparisonRow = z.infer<typeof comparisonRow>;

export const evidenceItem = z.looseObject({ text: z.string(), clause: z.string().optional() });
export type EvidenceItem = z.infer<typeof evidenceItem>;

export const hint = z.looseObject({
  code: z.enum(HINT_CODES),
  side: z.enum(HINT_SIDES),
  confidence: z.number().min(0).max(1),
  summary: z.string(),
  evidence: z.array(evidenceItem),
  wouldDisprove: z.string(),
  /** Parameter names on whose declared values the hint rests; the page links them to the tie sheet. */
  parameters: z.array(z.string()).optional(),
  consequences: z.array(z.string()).optional(),
});
export type Hint = z.infer<typeof hint>;

export const captureFacts = z.object({
  format: z.string(),
  datatype: z.string().nullable(),
  sampleRateHz: z.number().nullable(),
  centreFrequencyHz: z.number().nullable(),
  samples: z.number().nullable(),
  durationS: z.number().nullable(),
  rmsDbfs: z.number().nullable(),
  clippedFraction: z.number().nullable(),
});
export type CaptureFacts = z.infer<typeof captureFacts>;

/** A plotted curve: x in `xUnit`, y in `yUnit`, equal lengths. */
export const curve = z.object({
  title: z.string(),
  xLabel: z.string(), xUnit: z.string(),
  yLabel: z.string(), yUnit: z.string(),
  x: z.array(z.number()), y: z.array(z.number()),
  markers: z.array(z.object({ x: z.number(), label: z.string(), side: z.enum(['a', 'b', 'air']).optional() })).optional(),
});
export type Curve = z.infer<typeof curve>;

/** The capture demodulated under one side's settings (or under the best found, `air`). */
export const demodulation = z.object({
  under: z.enum(['a', 'b', 'air']),
  settings: z.object({
    subcarrierSpacingHz: z.number(), cyclicPrefix: z.string().nullable(),
    cyclicPrefixS: z.number().nullable(), fftSize: z.number().nullable(),
  }),
  /** Equalised points, interleaved I, Q, unit mean power; at most 1,500 points. */
  points: z.array(z.number()),
  evmPercent: z.number().nullable(),
  evmRandomPercent: z.number().nullable(),
  order: z.string().nullable(),
  evmBySubcarrier: curve.nullable(),
  closes: z.boolean(),
  reason: z.string().nullable().optional(),
});
export type Demodulation = z.infer<typeof demodulation>;

export const plots = z.object({
  spectrum: curve.nullable(),
  prefixCorrelation: curve.nullable(),
  demodulations: z.array(demodulation),
});
export type Plots = z.infer<typeof plots>;

export const decodeResult = z.object({
  contract: z.literal(1),
  engine: z.object({ name: z.string(), version: z.string() }),
  /** `of`: whose file it is; a side's own files are named to those alone who may see its snapshot. */
  inputs: z.array(z.object({ file: z.string(), sha256: z.string(), of: z.enum(['capture', 'a', 'b']).optional() })),
  capture: captureFacts.nullable(),
  air: z.record(z.string(), airValue),
  comparison: z.array(comparisonRow),
  hints: z.array(hint),
  tried: z.array(z.object({ what: z.string(), result: z.string() })),
  lookNext: z.array(z.object({ place: z.string(), why: z.string() })),
  timingMs: z.object({ read: z.number(), decode: z.number(), total: z.number() }),
  plots: plots.nullable().optional(),
});
export type DecodeResult = z.infer<typeof decodeResult>;

export const decodeError = z.object({
  error: z.object({ code: z.string(), message: z.string(), file: z.string().nullable() }),
});
export type DecodeError = z.infer<typeof decodeError>;
