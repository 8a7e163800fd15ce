import { SnapshotError } from '../error.js';

/** What every syntax is read into: nested keys and lists with texts as they stood, each with its line. */
export interface Leaf { readonly kind: 'leaf'; readonly text: string; readonly line: number }
export interface Entry { readonly key: string; readonly node: TreeNode; readonly line: number }
export interface Branch { readonly kind: 'branch'; readonly entries: Entry[]; readonly line: number }
export interface List { readonly kind: 'list'; readonly items: TreeNode[]; readonly line: number }
export type TreeNode = Leaf | Branch | List;

/** Lines that hold no key and value at all (key = value text only). */
export interface StrayLine { readonly line: number; readonly text: string }
export interface ParsedText { readonly root: TreeNode; readonly stray: readonly StrayLine[] }

export const LIMITS = { bytes: 5 * 1024 * 1024, lineChars: 256 * 1024, depth: 100, values: 100_000 } as const;

export const leaf = (text: string, line: number): Leaf => ({ kind: 'leaf', text, line });
export const branch = (line: number): Branch => ({ kind: 'branch', entries: [], line });
export const list = (line: number): List => ({ kind: 'list', items: [], line });

/** Counts what a file unfolds to, so that none unfolds without end. */
export class Budget {
  private values = 0;

  /** Called for every value at its depth; throws past the limits. */
  spend(depth: number, line: number): void {
    if (depth > LIMITS.depth) throw tooDeep(line);
    this.values += 1;
    if (this.values > LIMITS.values) {
      throw new SnapshotError('too-many-values',
        `Line ${line}: the file unfolds to more than ${LIMITS.values} values (repeated references count each time). Leave out what is not radio configuration.`,
        { line });
    }
  }
}

export const tooDeep = (line: number): SnapshotError =>
  new SnapshotError('too-deep', `Line ${line}: nested more than ${LIMITS.depth} levels deep. Flatten the file or send the part with the radio settings.`, { line });
