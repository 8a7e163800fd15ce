import { SnapshotError } from './error.js';
import { parseDetected } from './syntax/detect.js';
import { decodeText } from './syntax/decodeText.js';
import type { Branch, Entry, TreeNode } from './syntax/tree.js';
import type { Glossary, GlossaryEntry } from './types.js';
import { pathText, type Step } from './vocabulary/names.js';
import { nearestName, parameterNamed } from './vocabulary/plain.js';
import { unitOf } from './vocabulary/units.js';

/** Reads a party's own words: YAML or JSON, `path: { parameter, unit, values }`. Throws SnapshotError with the line. */
export function readGlossary(bytes: Uint8Array): Glossary {
  const { root, syntax } = parseDetected(decodeText(bytes).text);
  if (syntax !== 'yaml' && syntax !== 'json') fail(1, 'a glossary is a YAML or JSON map from key path to { parameter, unit, values }');
  if (root.kind !== 'branch') fail(root.line, 'a glossary is a map, not a list');
  const entries = new Map<string, GlossaryEntry>();
  addAll(entries, root, '');
  return entries;
}

function addAll(into: Map<string, GlossaryEntry>, node: Branch, prefix: string): void {
  for (const item of node.entries) {
    const path = prefix === '' ? item.key : `${prefix}.${item.key}`;
    if (isNested(item.node)) {
      addAll(into, item.node, path);
      continue;
    }
    const known = into.get(normalPath(path));
    if (known !== undefined) fail(item.line, `${path} stands here again (first in line ${known.line}); keep one`);
    into.set(normalPath(path), entryOf(item, path));
  }
}

/** Paths may be written as nested keys too. */
const isNested = (node: TreeNode): node is Branch =>
  node.kind === 'branch' && node.entries.length > 0 && !node.entries.some((e) => e.key === 'parameter') && node.entries.every((e) => e.node.kind === 'branch' || e.key.toLowerCase() !== 'unit');

function entryOf({ node, line }: Entry, path: string): GlossaryEntry {
  if (node.kind === 'leaf') return { parameter: parameterOf(node.text, path, line), unit: null, values: null, line };
  if (node.kind === 'list') fail(line, `${path} holds a list; { parameter, unit, values } is due`);
  const strange = node.entries.find((e) => !['parameter', 'unit', 'values'].includes(e.key));
  if (strange !== undefined) fail(strange.line, `${path}: "${strange.key}" is not read; a glossary entry has parameter, unit and values`);
  const text = (key: string): string | null => leafText(node, key, path);
  const name = text('parameter');
  if (name === null) fail(line, `${path}: the key "parameter" is missing; name the common parameter there`);
  return { parameter: parameterOf(name, path, line), unit: unitNamed(text('unit'), path, line), values: valuesOf(node, path), line };
}

function leafText(node: Branch, key: string, path: string): string | null {
  const found = node.entries.find((e) => e.key === key);
  if (found === undefined) return null;
  if (found.node.kind !== 'leaf') fail(found.line, `${path}: "${key}" must be one word`);
  return found.node.text;
}

function parameterOf(name: string, path: string, line: number): GlossaryEntry['parameter'] {
  const found = parameterNamed(name);
  if (found !== null) return found;
  const near = nearestName(name);
  return fail(line, `${path}: "${name}" is no common parameter${near === null ? '' : `; did you mean "${near}"?`}`);
}

function unitNamed(unit: string | null, path: string, line: number): string | null {
  if (unit === null || unit === '' || unit === 'null') return null;
  return unitOf(unit) === null ? fail(line, `${path}: the unit "${unit}" is not known; use Hz, kHz, MHz, GHz, Msps, s, ms, us, ns`) : unit;
}

function valuesOf(node: Branch, path: string): ReadonlyMap<string, string> | null {
  const found = node.entries.find((e) => e.key === 'values');
  if (found === undefined) return null;
  if (found.node.kind !== 'branch') fail(found.line, `${path}: "values" must be a map from the file's word to the common word`);
  return new Map(found.node.entries.map((e): [string, string] => [
    e.key, e.node.kind === 'leaf' ? e.node.text : fail(e.line, `${path}: the value for "${e.key}" must be one word`),
  ]));
}

function fail(line: number, what: string): never {
  throw new SnapshotError('glossary', `Glossary, line ${line}: ${what}.`, { line });
}

const normalPath = (path: string): string => path.replace(/\//g, '.').replace(/^\./, '');

/** The entry for a key path: as written, without list places, or without the outermost element. */
export function glossaryEntryFor(glossary: Glossary, steps: readonly Step[]): { entry: GlossaryEntry; path: string } | null {
  const bare = steps.map((s) => ({ ...s, place: null })).filter((s) => s.key !== '');
  for (const path of [pathText(steps), pathText(bare), pathText(bare.slice(1))]) {
    const entry = glossary.get(path);
    if (entry !== undefined && path !== '') return { entry, path };
  }
  return null;
}
