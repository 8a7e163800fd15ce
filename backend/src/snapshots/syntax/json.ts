import { SnapshotError } from '../error.js';
import { Budget, branch, leaf, list, type ParsedText, type TreeNode } from './tree.js';

const SPACE = /\s/;
const NUMBER = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][-+]?\d+)?/y;
const WORD = /true|false|null/y;
const ESCAPES: Readonly<Record<string, string>> = { '"': '"', '\\': '\\', '/': '/', b: '\b', f: '\f', n: '\n', r: '\r', t: '\t' };

/** RFC 8259 JSON with lines kept; `//`, `/* *\/` and `#` comments are passed over. Throws SnapshotError at the first fault. */
export function parseJson(text: string): ParsedText {
  const reader = new JsonReader(text);
  return { root: reader.document(), stray: [] };
}

class JsonReader {
  private at = 0;
  private line = 1;
  private readonly budget = new Budget();

  constructor(private readonly text: string) {}

  document(): TreeNode {
    this.space();
    const root = this.value(0);
    this.space();
    if (this.at < this.text.length) this.fail('something follows the end of the JSON value');
    return root;
  }

  private value(depth: number): TreeNode {
    this.budget.spend(depth, this.line);
    const c = this.text[this.at];
    if (c === '{') return this.object(depth);
    if (c === '[') return this.array(depth);
    const line = this.line;
    if (c === '"') return leaf(this.string(), line);
    return leaf(this.match(NUMBER) ?? this.match(WORD) ?? this.fail('a value is missing or misspelt here'), line);
  }

  private object(depth: number): TreeNode {
    const node = branch(this.line);
    this.open();
    if (this.take('}')) return node;
    do {
      this.space();
      const line = this.line;
      if (this.text[this.at] !== '"') this.fail('a key in double quotes is due here');
      const key = this.string();
      this.space();
      if (!this.take(':')) this.fail(`a colon is due after the key "${short(key)}"`);
      this.space();
      node.entries.push({ key, node: this.value(depth + 1), line });
      this.space();
    } while (this.take(','));
    if (!this.take('}')) this.fail('a comma or the closing } is due here');
    return node;
  }

  private array(depth: number): TreeNode {
    const node = list(this.line);
    this.open();
    if (this.take(']')) return node;
    do {
      this.space();
      node.items.push(this.value(depth + 1));
      this.space();
    } while (this.take(','));
    if (!this.take(']')) this.fail('a comma or the closing ] is due here');
    return node;
  }

  private open(): void {
    this.at += 1;
    this.space();
  }

  private string(): string {
    let out = '';
    let from = ++this.at;
    for (;;) {
      const c = this.text[this.at];
      if (c === undefined || c === '\n') this.fail('a text in quotes does not end on its line');
      if (c === '"') break;
      if (c === '\\') {
        out += this.text.slice(from, this.at) + this.escape();
        from = this.at;
      } else this.at += 1;
    }
    out += this.text.slice(from, this.at);
    this.at += 1;
    return out;
  }

  private escape(): string {
    const c = this.text[this.at + 1];
    if (c === 'u') {
      const hex = this.text.slice(this.at + 2, this.at + 6);
      if (!/^[0-9a-fA-F]{4}$/.test(hex)) this.fail('\\u must be followed by four hexadecimal digits');
      this.at += 6;
      return String.fromCharCode(Number.parseInt(hex, 16));
    }
    const plain = ESCAPES[c] ?? this.fail(`the escape \\${c ?? ''} does not exist in JSON`);
    this.at += 2;
    return plain;
  }

  private space(): void {
    for (;;) {
      const c = this.text[this.at];
      if (c === '\n') { this.line += 1; this.at += 1; }
      else if (c !== undefined && SPACE.test(c)) this.at += 1;
      else if (!this.comment(c)) return;
    }
  }

  private comment(c: string | undefined): boolean {
    const next = this.text[this.at + 1];
    if (c === '#' || (c === '/' && next === '/')) {
      const end = this.text.indexOf('\n', this.at);
      this.at = end < 0 ? this.text.length : end;
      return true;
    }
    if (c !== '/' || next !== '*') return false;
    const end = this.text.indexOf('*/', this.at + 2);
    if (end < 0) this.fail('a comment does not end');
    for (let i = this.at; i < end; i += 1) if (this.text[i] === '\n') this.line += 1;
    this.at = end + 2;
    return true;
  }

  private take(c: string): boolean {
    if (this.text[this.at] !== c) return false;
    this.at += 1;
    return true;
  }

  private match(pattern: RegExp): string | null {
    pattern.lastIndex = this.at;
    const found = pattern.exec(this.text);
    if (found === null) return null;
    this.at += found[0].length;
    return found[0];
  }

  private fail(what: string): never {
    const column = this.at - this.text.lastIndexOf('\n', this.at - 1);
    throw new SnapshotError('syntax', `Line ${this.line}, column ${column}: ${what}. Correct the JSON there.`, { line: this.line, offset: this.at });
  }
}

const short = (key: string): string => (key.length > 60 ? `${key.slice(0, 60)}…` : key);
