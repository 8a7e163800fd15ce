import { type Document, isAlias, isMap, isPair, isScalar, isSeq, LineCounter, type Node, parseAllDocuments } from 'yaml';
import { SnapshotError } from '../error.js';
import { Budget, branch, leaf, LIMITS, list, tooDeep, type Branch, type ParsedText, type TreeNode } from './tree.js';

/**
 * YAML 1.2 (core words, values kept as the text that stood there). Aliases and merge keys are
 * followed within the value budget. Throws SnapshotError at the first fault, with its line.
 */
export function parseYaml(text: string): ParsedText {
  refuseCostly(text);
  const counter = new LineCounter();
  const documents = parse(text, counter).filter((d) => d.contents !== null);
  const roots = documents.map((d) => new YamlWalk(counter).node(d.contents as Node, 0));
  if (roots.length === 1) return { root: roots[0], stray: [] };
  const all = list(1);
  all.items.push(...roots);
  return { root: all, stray: [] };
}

function parse(text: string, lineCounter: LineCounter): Document[] {
  const documents = readDocuments(text, lineCounter);
  for (const document of documents) {
    const fault = document.errors[0];
    if (fault === undefined) continue;
    const line = lineCounter.linePos(fault.pos[0]).line;
    throw new SnapshotError('syntax', `Line ${line}: ${firstSentence(fault.message)}. Correct the YAML there.`, { line, offset: fault.pos[0] });
  }
  return documents;
}

function readDocuments(text: string, lineCounter: LineCounter): Document[] {
  try {
    const read = parseAllDocuments(text, { lineCounter, uniqueKeys: false, prettyErrors: false, strict: true, logLevel: 'silent' });
    return Array.isArray(read) ? (read as Document[]) : [];
  } catch (error) {
    if (error instanceof RangeError) throw tooDeep(1);
    throw new SnapshotError('syntax', `The YAML cannot be read: ${firstSentence(String((error as Error).message))}. Correct it and send it again.`, { line: 1 });
  }
}

const firstSentence = (message: string): string => message.split('\n')[0].replace(/ at line.*$/, '').replace(/[.:]+$/, '').slice(0, 160);

/** What the library is not asked to read: it takes tens of microseconds a line, and recurses over nested nodes. */
const YAML_LIMITS = { lines: 60_000, lineChars: 64 * 1024, references: 2000, stacked: 20 } as const;

/** A cheap look before the library builds anything. */
function refuseCostly(text: string): void {
  refuseOpenBrackets(text);
  const lines = text.split('\n');
  if (lines.length > YAML_LIMITS.lines) {
    throw new SnapshotError('too-many-values', `The YAML has ${lines.length} lines; ${YAML_LIMITS.lines} are read. Send the part with the radio settings.`, { line: YAML_LIMITS.lines });
  }
  const long = lines.findIndex((l) => l.length > YAML_LIMITS.lineChars);
  if (long >= 0) throw new SnapshotError('line-too-long', `Line ${long + 1} has ${lines[long].length} characters; YAML is read with up to ${YAML_LIMITS.lineChars}. Break the line.`, { line: long + 1 });
  refuseDeepBlocks(lines);
  const references = text.match(/(?:^|[\s[{,])\*[\w-]/g)?.length ?? 0;
  if (references > YAML_LIMITS.references) throw new SnapshotError('too-many-values', `The YAML has ${references} references (*name); ${YAML_LIMITS.references} are followed. Write the values out.`, { line: 1 });
}

function refuseOpenBrackets(text: string): void {
  let open = 0;
  let line = 1;
  for (let i = 0; i < text.length; i += 1) {
    const c = text.charCodeAt(i);
    if (c === 0x0a) line += 1;
    else if (c === 0x5b || c === 0x7b) open += 1;
    else if (c === 0x5d || c === 0x7d) open = Math.max(0, open - 1);
    if (open > LIMITS.depth) throw tooDeep(line);
  }
}

/** Block marks stacked on one line, and indentation that steps in without end. */
function refuseDeepBlocks(lines: readonly string[]): void {
  const indents: number[] = [];
  lines.forEach((l, i) => {
    const indent = l.search(/\S/);
    if (indent < 0) return;
    while (indents.length > 0 && indents[indents.length - 1] >= indent) indents.pop();
    indents.push(indent);
    let stacked = 0;
    for (let at = indent; /[-?:]/.test(l[at] ?? '') && l[at + 1] === ' '; stacked += 1) {
      at += 1;
      while (l[at] === ' ') at += 1;
    }
    if (indents.length > LIMITS.depth || stacked > YAML_LIMITS.stacked) throw tooDeep(i + 1);
  });
}

class YamlWalk {
  private readonly anchors = new Map<string, Node>();
  private readonly open = new Set<Node>();
  private readonly budget = new Budget();

  constructor(private readonly counter: LineCounter) {}

  node(node: Node | null, depth: number): TreeNode {
    const line = this.lineOf(node);
    this.budget.spend(depth, line);
    if (isAlias(node)) return this.alias(node.source, depth, line);
    if (node !== null && 'anchor' in node && typeof node.anchor === 'string') this.anchors.set(node.anchor, node);
    if (isMap(node)) return this.map(node.items, depth, line);
    if (isSeq(node)) {
      const out = list(line);
      for (const item of node.items) out.items.push(isPair(item) ? this.map([item], depth + 1, line) : this.node(item as Node | null, depth + 1));
      return out;
    }
    return leaf(isScalar(node) ? scalarText(node.source, node.value) : 'null', line);
  }

  private map(items: readonly unknown[], depth: number, line: number): Branch {
    const out = branch(line);
    for (const pair of items) {
      if (!isPair(pair)) continue;
      const key = isScalar(pair.key) ? scalarText(pair.key.source, pair.key.value) : '?';
      const keyLine = this.lineOf(pair.key as Node | null) || line;
      const value = this.node(pair.value as Node | null, depth + 1);
      if (key === '<<') merge(out, value);
      else out.entries.push({ key, node: value, line: keyLine });
    }
    return out;
  }

  private alias(name: string, depth: number, line: number): TreeNode {
    const target = this.anchors.get(name);
    if (target === undefined) throw new SnapshotError('syntax', `Line ${line}: the reference *${name} names no earlier anchor. Correct the YAML there.`, { line });
    if (this.open.has(target)) throw new SnapshotError('too-deep', `Line ${line}: the reference *${name} contains itself. Write the values out.`, { line });
    this.open.add(target);
    const value = this.node(target, depth);
    this.open.delete(target);
    return value;
  }

  private lineOf(node: Node | null): number {
    const at = node?.range?.[0];
    return at === undefined ? 1 : this.counter.linePos(at).line;
  }
}

/** Keys of the map itself win over merged ones, YAML's merge-key rule. */
function merge(into: Branch, value: TreeNode): void {
  const parts = value.kind === 'list' ? value.items : [value];
  for (const part of parts) {
    if (part.kind !== 'branch') continue;
    for (const entry of part.entries) if (!into.entries.some((e) => e.key === entry.key)) into.entries.unshift(entry);
  }
}

const scalarText = (source: string | undefined, value: unknown): string =>
  source ?? (value === null || value === undefined ? 'null' : String(value));
