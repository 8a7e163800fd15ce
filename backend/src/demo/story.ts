import type { CaptureSpec } from '../generator/scenarios/capture.js';
import type { Declared } from '../generator/snapshots/declared.js';
import type { SnapshotStyle } from '../generator/snapshots/snapshot.js';
import type { Reach, Severity, Side, Stage, WaitingCause } from '#shared/vocabulary';

/** The words in which the demo's invented history is told. Days are counted from the day of seeding, past ones negative. */
export type PartyKey = 'harrowmere' | 'tarnbeck' | 'ostrel' | 'vimmery' | 'pellfold';
export type PersonKey = 'mara-oyelaran' | 'edda-quillfeather' | 'tobin-aschero' | 'osk-brandreth' | 'ines-torvald' | 'jory-haldane' | 'rao-lindqvist' | 'petra-wynnlow';
export type LinkKey = 'crane' | 'mast' | 'yard' | 'quay';

export interface SnapshotTale { readonly declared: Declared; readonly style: SnapshotStyle; readonly name: string; readonly reach?: Reach; readonly text?: string }
export interface DecodeTale { readonly capture: CaptureSpec | null; readonly captureName?: string; readonly a: SnapshotTale | null; readonly b: SnapshotTale | null; readonly transmitter?: Side }
export interface Ask { readonly party: PartyKey; readonly what: string; readonly dueInDays?: number; readonly cause?: WaitingCause }

interface Happening { readonly day: number; readonly by: PersonKey }
export type Step = Happening & (
  | { readonly say: string; readonly onlyMyParty?: true }
  | { readonly stage: Stage; readonly why?: string; readonly build?: string; readonly ask?: Ask }
  | { readonly ask: Ask }
  | { readonly decode: DecodeTale }
  | { readonly retest: 'clean' | 'failed'; readonly note: string; readonly builds: readonly [string, string]; readonly downlink?: string; readonly uplink?: string }
  | { readonly waive: string; readonly endsInDays: number; readonly signedBy: readonly PersonKey[] }
);

export interface Story {
  readonly link: LinkKey;
  readonly title: string;
  readonly description: string;
  readonly severity: Severity;
  readonly raised: Happening;
  readonly builds: readonly [string | null, string | null];
  readonly downlink: string | null;
  readonly uplink: string | null;
  readonly path?: 'cabled' | 'radiated' | 'shielded chamber';
  readonly attenuationDb?: number;
  readonly levelDbm?: number;
  readonly clock?: string;
  readonly baseline?: string;
  readonly transmitter?: Side;
  readonly decode?: DecodeTale;
  readonly ask: Ask;
  readonly steps: readonly Step[];
}

export const plainYaml: SnapshotStyle = { words: 'plain', syntax: 'yaml', plain: { spelling: 'snake', units: 'in-name', numerology: false, grouped: true } };
export const plainConf: SnapshotStyle = { words: 'plain', syntax: 'conf', plain: { spelling: 'snake', units: 'in-name', numerology: false, grouped: true } };
export const plainJson: SnapshotStyle = { words: 'plain', syntax: 'json', plain: { spelling: 'camel', units: 'si', numerology: false, grouped: true } };
export const standardJson: SnapshotStyle = { words: 'standard', syntax: 'json', xer: false, uplinkShiftHz: null };
export const standardYaml: SnapshotStyle = { words: 'standard', syntax: 'yaml', xer: false, uplinkShiftHz: null };
