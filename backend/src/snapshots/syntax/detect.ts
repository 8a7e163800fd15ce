import { SnapshotError } from '../error.js';
import type { Syntax } from '../types.js';
import { parseBraces } from './braces.js';
import { parseJson } from './json.js';
import { parseKeyValue } from './keyValue.js';
import type { ParsedText, TreeNode } from './tree.js';
import { parseXml } from './xml.js';
import { parseYaml } from './yaml.js';

const PARSERS: Readonly<Record<Syntax, (text: string) => ParsedText>> = {
  json: parseJson, yaml: parseYaml, xml: parseXml, 'key-value': parseKeyValue, braces: parseBraces,
};

export interface DetectedText extends ParsedText { readonly syntax: Syntax }

/** Decides by content, never by name, which syntax a text has, and reads it. Throws SnapshotError. */
export function parseDetected(text: string): DetectedText {
  const syntax = detectSyntax(text);
  const parsed = PARSERS[syntax](text);
  if (!hasKeys(parsed.root)) {
    throw new SnapshotError('unknown-syntax', 'No setting was found: the text is neither JSON, YAML, XML nor lines of key = value. Export the configuration in one of these.', { line: 1 });
  }
  return { syntax, ...parsed };
}

const hasKeys = (node: TreeNode): boolean =>
  node.kind === 'branch' ? node.entries.length > 0 : node.kind === 'list' && node.items.some(hasKeys);

/** The syntax that the text's first mark and its lines speak for. */
export function detectSyntax(text: string): Syntax {
  const start = text.trimStart();
  if (start[0] === '<') return 'xml';
  const body = withoutComments(start);
  if (/^(?:---|%YAML)(?:\s|$)/.test(body)) return 'yaml';
  if (body[0] === '{') return bracedSyntax(body.slice(0, 4000));
  if (body[0] === '[' && !/^\[[^\]\n"{[]*\][ \t]*(?:[#;].*)?(?:\n|$)/.test(body.slice(0, 4000))) return 'json';
  return lineSyntax(body);
}

/** JSON quotes its keys; a group of settings has `=` or `;`; what is left is YAML's flow style. */
function bracedSyntax(body: string): Syntax {
  if (/^\{\s*(?:"(?:[^"\\\n]|\\.)*"\s*:|\}|$)/.test(body)) return 'json';
  if (/^\{\s*[^\s=:{}"]+\s*(?:=|\{|[^\s:,{}][^\n:]*;)/.test(body)) return 'braces';
  return /^\{\s*['\w]/.test(body) ? 'yaml' : 'json';
}

const withoutComments = (text: string): string => text.replace(/^(?:\s*(?:#|\/\/|;)[^\n]*\n|\s*\/\*[\s\S]*?\*\/)+/, '').trimStart();

/** Counts what the first lines are: `key = value`, `key: value`, groups that open or close. */
function lineSyntax(body: string): Syntax {
  const lines = body.slice(0, 200_000).split('\n').slice(0, 2000).map((l) => l.trim().slice(0, 300)).filter((l) => l !== '' && !/^(#|;|\/\/)/.test(l));
  const count = (pattern: RegExp): number => lines.filter((l) => pattern.test(l)).length;
  const equals = count(/^[^:={}]+=/);
  const colons = count(/^(?:- +)*[^={}]+?:(?:\s|$)|^- /);
  const blocks = count(/^[^:"']*[{(]\s*$|^[})\]]+[;,]*$|=\s*[{([]/) + count(/^[\w.-]+(?:\s+[\w.-]+)?\s*\{.*\}\s*;?$/);
  const sections = count(/^\[[^\]"{]+\]\s*(?:[#;].*)?$/);
  const ends = count(/;\s*$/);
  if (blocks > 0 && sections === 0 && (equals > 0 || ends > 0 || colons === 0)) return 'braces';
  if (equals > colons || sections > 0) return 'key-value';
  if (colons > 0) return 'yaml';
  if (ends > 0) return 'braces';
  throw new SnapshotError('unknown-syntax', 'No setting was found: the text is neither JSON, YAML, XML nor lines of key = value. Export the configuration in one of these.', { line: 1 });
}
