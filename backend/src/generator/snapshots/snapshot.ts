import { Random } from '../random.js';
import type { Declared, DeclaredName } from './declared.js';
import { ownWords } from './own-words.js';
import { plainTree, type PlainStyle } from './plain.js';
import { LTE_STANDARD_NAMES, lteStandardTree, NR_STANDARD_NAMES, nrStandardTree } from './standard.js';
import { fileEnding, write, type Syntax } from './syntax.js';

/** The words and the syntax of a snapshot. */
export type SnapshotStyle =
  | { readonly words: 'plain'; readonly syntax: Syntax; readonly plain: PlainStyle }
  | { readonly words: 'standard'; readonly syntax: Exclude<Syntax, 'conf'>; readonly xer: boolean; readonly uplinkShiftHz: number | null }
  | { readonly words: 'own'; readonly syntax: Exclude<Syntax, 'xml'>; readonly glossarySyntax: 'yaml' | 'json'; readonly seed: number };

export interface SnapshotFile {
  readonly text: string;
  readonly ending: string;
  readonly glossary: { readonly text: string; readonly ending: string } | null;
}

/** A side's declared values as a file. */
export function writeSnapshot(declared: Declared, style: SnapshotStyle): SnapshotFile {
  if (style.words === 'own') {
    const { tree, glossary } = ownWords(declared, new Random(style.seed, 'words'));
    return {
      text: write(tree, style.syntax),
      ending: fileEnding(style.syntax),
      glossary: { text: glossaryText(glossary, style.glossarySyntax), ending: style.glossarySyntax },
    };
  }
  const isLte = declared.technology === 'lte' || declared.earfcn !== undefined;
  const tree = style.words === 'plain' ? plainTree(declared, style.plain) : isLte ? lteStandardTree(declared) : nrStandardTree(declared, { xer: style.xer && style.syntax === 'xml', uplinkShiftHz: style.uplinkShiftHz });
  const root = style.words === 'plain' ? 'configuration' : isLte ? 'SystemInformation' : 'ServingCellConfigCommon';
  const wrapped = style.words === 'standard' && style.syntax !== 'xml' ? { [root]: tree } : tree;
  return { text: write(wrapped, style.syntax, root), ending: fileEnding(style.syntax), glossary: null };
}

/** Which of the declared values a style can say at all. */
export function sayable(declared: Declared, style: SnapshotStyle): Declared {
  if (style.words !== 'standard') return declared;
  const isLte = declared.technology === 'lte' || declared.earfcn !== undefined;
  const names = new Set<DeclaredName>(isLte ? LTE_STANDARD_NAMES : NR_STANDARD_NAMES);
  return Object.fromEntries(Object.entries(declared).filter(([name]) => names.has(name as DeclaredName)));
}

function glossaryText(glossary: { readonly [path: string]: unknown }, syntax: 'yaml' | 'json'): string {
  if (syntax === 'json') return `${JSON.stringify(glossary, null, 2)}\n`;
  return Object.entries(glossary).map(([path, entry]) => `${path}: ${flow(entry)}\n`).join('');
}

function flow(value: unknown): string {
  if (typeof value !== 'object' || value === null) return String(value);
  return `{ ${Object.entries(value).map(([key, inner]) => `${key}: ${flow(inner)}`).join(', ')} }`;
}
