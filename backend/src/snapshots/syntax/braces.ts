import { SnapshotError } from '../error.js';
import { Budget, branch, leaf, list, type Branch, type List, type ParsedText, type StrayLine, type TreeNode } from './tree.js';

const CLOSES: Readonly<Record<string, string>> = { '{': '}', '(': ')', '[': ']' };

/**
 * Configuration in braces: groups `name { … }` or `name = { … };`, lists `( … )` and `[ … ]`,
 * settings `name = value;`, `name: value` or `name value;`, values with units. `#`, `//` and
 * block comments. Throws SnapshotError where a bracket is not closed.
 */
export function parseBraces(text: string): ParsedText {
  const reader = new BraceReader(text);
  return { root: reader.document(), stray: reader.stray };
}

class BraceReader {
  readonly stray: StrayLine[] = [];
  private at = 0;
  private line = 1;
  private readonly budget = new Budget();

  constructor(private readonly text: string) {}

  document(): Branch {
    this.separators();
    if (this.text[this.at] === '{') {
      const root = this.bracketed(0) as Branch;
      this.separators();
      if (this.at >= this.text.length) return root;
    }
    const root = branch(1);
    this.settings(root, null, 0);
    return root;
  }

  /** Settings up to `close`, or the end of the text. */
  private settings(into: Branch, close: string | null, depth: number): void {
    for (;;) {
      this.separators();
      const c = this.text[this.at];
      if (c === undefined) {
        if (close !== null) this.fail(`the group that opens in line ${into.line} is not closed with ${close}`);
        return;
      }
      if (c === close) { this.at += 1; return; }
      if (c === '}' || c === ')' || c === ']') this.fail(`${c} closes nothing`);
      this.setting(into, depth);
    }
  }

  private setting(into: Branch, depth: number): void {
    const line = this.line;
    this.budget.spend(depth, line);
    const key = this.key();
    if (key === '') {
      this.stray.push({ line, text: this.rest() });
      return;
    }
    this.blanks();
    const assigned = this.text[this.at] === '=' || this.text[this.at] === ':';
    if (assigned) { this.at += 1; this.blanks(); this.newlinesBefore('{(['); }
    else this.newlinesBefore('{');
    const node = this.text[this.at] in CLOSES ? this.bracketed(depth + 1) : leaf(this.rest(), line);
    if (node.kind === 'leaf' && node.text === '' && !assigned) this.stray.push({ line, text: key });
    else into.entries.push({ key, node, line });
  }

  private bracketed(depth: number): TreeNode {
    this.budget.spend(depth, this.line);
    const open = this.text[this.at];
    this.at += 1;
    if (open === '{') {
      const group = branch(this.line);
      this.settings(group, '}', depth);
      return group;
    }
    return this.items(list(this.line), CLOSES[open], depth);
  }

  private items(into: List, close: string, depth: number): List {
    for (;;) {
      this.separators();
      const c = this.text[this.at];
      if (c === undefined) this.fail(`the list that opens in line ${into.line} is not closed with ${close}`);
      if (c === close) { this.at += 1; return into; }
      if (c in CLOSES) into.items.push(this.bracketed(depth + 1));
      else {
        const line = this.line;
        this.budget.spend(depth, line);
        const before = this.at;
        into.items.push(leaf(this.rest(), line));
        if (this.at === before) this.fail(`${c} is out of place in a list`);
      }
    }
  }

  private key(): string {
    const quoted = /"([^"\n]*)"/y;
    quoted.lastIndex = this.at;
    const inQuotes = quoted.exec(this.text);
    const plain = /[^\s=:;,{}()[\]"]+/y;
    plain.lastIndex = this.at;
    const found = inQuotes ?? plain.exec(this.text);
    if (found === null) return '';
    this.at += found[0].length;
    return found[1] ?? found[0];
  }

  /** The text of a value: in quotes, or up to the next end mark on its line. */
  private rest(): string {
    if (this.text[this.at] === '"') return this.key();
    const from = this.at;
    while (this.at < this.text.length && !/[\n;,{}()[\]#]/.test(this.text[this.at]) && !this.text.startsWith('//', this.at)) this.at += 1;
    if (this.at === from && this.at < this.text.length && !/[\n;,})\]#]/.test(this.text[this.at])) this.at += 1;
    return this.text.slice(from, this.at).trim();
  }

  private blanks(): void {
    while (this.text[this.at] === ' ' || this.text[this.at] === '\t') this.at += 1;
  }

  /** Steps over line ends and comments when the next thing after them opens a bracket of the value. */
  private newlinesBefore(brackets: string): void {
    const [at, line] = [this.at, this.line];
    this.separators('');
    if (this.at < this.text.length && brackets.includes(this.text[this.at])) return;
    [this.at, this.line] = [at, line];
  }

  private separators(marks = ';,'): void {
    for (;;) {
      const c = this.text[this.at];
      if (c === undefined) return;
      if (c === '\n') { this.line += 1; this.at += 1; }
      else if (/\s/.test(c) || marks.includes(c)) this.at += 1;
      else if (!this.comment(c)) return;
    }
  }

  private comment(c: string): boolean {
    if (c === '#' || this.text.startsWith('//', this.at)) {
      const end = this.text.indexOf('\n', this.at);
      this.at = end < 0 ? this.text.length : end;
      return true;
    }
    if (!this.text.startsWith('/*', this.at)) return false;
    const end = this.text.indexOf('*/', this.at);
    if (end < 0) this.fail('a comment does not end');
    for (let i = this.at; i < end; i += 1) if (this.text[i] === '\n') this.line += 1;
    this.at = end + 2;
    return true;
  }

  private fail(what: string): never {
    throw new SnapshotError('syntax', `Line ${this.line}: ${what}. Correct the file there.`, { line: this.line, offset: this.at });
  }
}
