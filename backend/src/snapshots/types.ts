import type { AirValue, ComparisonRow, SettingValue } from '#shared/decode';
import type { ParameterName } from '#shared/parameters';
import type { HintCode, Side } from '#shared/vocabulary';

export type Syntax = 'json' | 'yaml' | 'xml' | 'key-value' | 'braces';
/** `rrc`: the field names of TS 38.331 and 36.331; `m-plane`: the open fronthaul's leaf names. */
export type Vocabulary = 'plain' | 'rrc' | 'm-plane' | 'glossary';

/** One value that a snapshot states, in the parameter's unit. */
export interface FoundValue {
  readonly parameter: ParameterName;
  readonly value: SettingValue;
  /** Key path in the file, list places in brackets: `cells[0].physCellId`. */
  readonly path: string;
  /** The text that stood there; null where the standard gives the absent field a meaning. */
  readonly raw: string | null;
  readonly line: number;
  readonly vocabulary: Vocabulary;
  /** The file does not say it in so many words: an absent field's meaning, or the structure's. */
  readonly implied: boolean;
  /** Only the low four bits of the value are stated (ssb-SubcarrierOffset). */
  readonly lowBitsOnly?: boolean;
  /** How the text was read, where that took an assumption. */
  readonly note?: string;
}

export interface NotUnderstood {
  readonly path: string;
  readonly line: number;
  readonly raw: string;
}

export interface ReadingProblem {
  readonly code: 'duplicate-key' | 'several-values' | 'value' | 'unit-assumed' | 'glossary-unused' | 'nothing-understood' | 'cut-short';
  readonly message: string;
  readonly line: number | null;
  readonly path: string | null;
}

/** What was read from one snapshot. Plain data: it can be stored and returned as JSON. */
export interface SnapshotReading {
  readonly syntax: Syntax;
  readonly encoding: 'utf-8' | 'utf-16le' | 'utf-16be';
  /** At most one value a parameter, in the file's order. */
  readonly values: readonly FoundValue[];
  readonly notUnderstood: readonly NotUnderstood[];
  readonly problems: readonly ReadingProblem[];
}

export interface GlossaryEntry {
  readonly parameter: ParameterName;
  readonly unit: string | null;
  /** From the file's own word or number to the common word; null: values are read as they stand. */
  readonly values: ReadonlyMap<string, string> | null;
  readonly line: number;
}
/** From a party's own key path to what it means. */
export type Glossary = ReadonlyMap<string, GlossaryEntry>;

export interface CompareOptions {
  readonly link: 'air' | 'fronthaul';
  /** The decode's `air` object, for the column of measured values. */
  readonly air?: Readonly<Record<string, AirValue>>;
  /** Settings that a unit broadcasts, by common parameter name. */
  readonly announced?: Readonly<Record<string, SettingValue>>;
  /** Whose transmission the capture holds; the downlink unless stated. */
  readonly direction?: 'downlink' | 'uplink';
  /** The capture's stated centre, Hz: with it the measured offset becomes a carrier frequency. */
  readonly centreFrequencyHz?: number | null;
}

/** A setting, or combination, that the standard does not allow, found in one snapshot. */
export interface NotPermitted {
  readonly parameter: ParameterName;
  readonly clause: string;
  readonly note: string;
  /** Where the two sides differ here as well, the difference is the finding. */
  readonly yieldsToDifference?: boolean;
  /** The other settings of a combination: where the sides differ in one of them, that difference is the finding. */
  readonly together?: readonly ParameterName[];
}

/** Two statements of one snapshot that cannot both hold. */
export interface Contradiction {
  readonly side: Side;
  readonly parameters: readonly ParameterName[];
  readonly code: HintCode;
  readonly note: string;
}

/** A difference and those that follow from it: one hint, its consequences listed. */
export interface Cause {
  readonly root: ParameterName;
  readonly code: HintCode;
  readonly consequences: readonly ParameterName[];
}

export interface Comparison {
  readonly rows: readonly ComparisonRow[];
  readonly causes: readonly Cause[];
  readonly contradictions: readonly Contradiction[];
  /** By side, what the standards do not allow. */
  readonly notPermitted: Readonly<Record<Side, readonly NotPermitted[]>>;
}
