import type { AirValue, CaptureFacts, SettingValue } from '#shared/decode';
import type { HintCode, HintSide, Side } from '#shared/vocabulary';
import type { Comparison } from '../snapshots/types.js';

/** A label that had to be changed before the capture decoded. */
export interface LabelFinding {
  readonly property: 'format' | 'sense' | 'rate';
  readonly stated: string;
  readonly found: string;
  /** For the rate: true over stated. */
  readonly ratio?: number;
  /** What showed it, in one plain sentence without any declared value. */
  readonly proof: string;
  readonly confidence: number;
}

/** Samples that are missing: where, how many, and how sure. */
export interface GapFinding {
  readonly atSample: number;
  readonly lostSamples: number;
  readonly count: number;
  readonly confidence: number;
  readonly proof: string;
}

/** What the level of a capture says of one declared uplink-downlink pattern. */
export interface PatternLikelihood {
  readonly side: Side;
  /** Natural logarithm of the probability of the levels under it, against the best pattern found. */
  readonly logLikelihood: number;
  readonly reason: string;
}

/** How the constellation stood under one side's settings. */
export interface UnderSettings {
  readonly side: Side;
  readonly closes: boolean;
  readonly evmPercent: number;
  readonly evmRandomPercent: number;
}

/** Everything that the rules may rest on. Rules read it and never each other. */
export interface Evidence {
  readonly comparison: Comparison;
  readonly given: Readonly<Record<Side, boolean>>;
  readonly transmitter: Side | null;
  readonly capture: CaptureFacts | null;
  readonly air: Readonly<Record<string, AirValue>>;
  readonly announced: Readonly<Record<string, SettingValue>>;
  readonly labels: readonly LabelFinding[];
  readonly gaps: GapFinding | null;
  readonly patterns: readonly PatternLikelihood[];
  readonly under: readonly UnderSettings[];
}

/** How the evidence of one finding hangs together; the words are built from it, per reader. */
export interface Basis {
  readonly pattern:
    | 'differ-decided' | 'differ-open' | 'neither' | 'agree-contradicted' | 'one-contradicted'
    | 'pattern-decided' | 'pattern-contradicted' | 'not-permitted' | 'contradiction' | 'capture';
  /** The parameter that the finding is about; empty for findings about the recording alone. */
  readonly parameter: string;
  readonly declared: Readonly<Partial<Record<Side, SettingValue>>>;
  /** Who declares the parameter at all (also known to readers who may not see the value). */
  readonly declaredBy: readonly Side[];
  readonly air: SettingValue;
  /** `air` may also lie any whole number of these from what it says; null where it is one value. */
  readonly airPeriodHz: number | null;
  /** What `air` is a value of, where that is not `parameter` itself (the spacing, for a transform size). */
  readonly airParameter: string;
  readonly method: string | null;
  readonly announced: SettingValue;
  readonly clause: string | null;
  readonly transmitter: Side | null;
  /** What was measured, in sentences free of anything that only a snapshot says. */
  readonly facts: readonly string[];
  /** Sentences that rest on one side's own text; shown only to readers who may see that side. */
  readonly sideFacts: Readonly<Partial<Record<Side, readonly string[]>>>;
}

/** One cause found at odds, before it is put in words. */
export interface Finding {
  readonly code: HintCode;
  readonly side: HintSide;
  /** Probability that code and side are right. */
  readonly probability: number;
  readonly basis: Basis;
  /** Parameters that differ only because of this one. */
  readonly consequences: readonly string[];
  /** Other parameters of a combination: a finding about one of them explains this one. */
  readonly restsOn?: readonly string[];
}

/** One rule: what it looks at stands above it; an empty list where it finds nothing. */
export type Rule = (evidence: Evidence) => readonly Finding[];

/** How much of a side's snapshot the reader may see. */
export type SideView = 'full' | 'compare-only' | 'none';
export type View = Readonly<Record<Side, SideView>>;
export const FULL_VIEW: View = { a: 'full', b: 'full' };
