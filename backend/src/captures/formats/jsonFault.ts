/** Where a JSON text breaks, and how. */
export interface JsonFault {
  readonly offset: number;
  readonly line: number;
  readonly column: number;
  readonly what: string;
}

class Broken extends Error {
  constructor(readonly at: number, readonly what: string) {
    super(what);
  }
}

const MAX_DEPTH = 100;
const NUMBER = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
const ESCAPE = /\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4})/y;

/** Finds the first place where `text` is not JSON (RFC 8259) or nests deeper than 100; null where it is fine. */
export function jsonFault(text: string): JsonFault | null {
  try {
    const end = skip(text, value(text, skip(text, 0), 0));
    if (end < text.length) throw new Broken(end, 'more text after the end of the value');
    return null;
  } catch (error) {
    if (!(error instanceof Broken)) throw error;
    const before = text.slice(0, error.at).split('\n');
    return { offset: error.at, line: before.length, column: before.at(-1)!.length + 1, what: error.what };
  }
}

function skip(text: string, from: number): number {
  let at = from;
  while (at < text.length && ' \t\r\n'.includes(text[at]!)) at += 1;
  return at;
}

function value(text: string, at: number, depth: number): number {
  if (depth > MAX_DEPTH) throw new Broken(at, `nested deeper than ${MAX_DEPTH}`);
  if (at >= text.length) throw new Broken(at, 'the text ends too early');
  if (text[at] === '{') return members(text, at, depth);
  if (text[at] === '[') return items(text, at, depth);
  for (const word of ['true', 'false', 'null']) if (text.startsWith(word, at)) return at + word.length;
  return text[at] === '"' ? quoted(text, at) : matched(text, at, NUMBER);
}

function matched(text: string, at: number, pattern: RegExp): number {
  pattern.lastIndex = at;
  if (!pattern.test(text)) throw new Broken(at, pattern === ESCAPE ? 'an unknown escape in a string' : 'a value is expected');
  return pattern.lastIndex;
}

/** By hand, since a pattern over a long string would need stack for each of its characters. */
function quoted(text: string, open: number): number {
  for (let at = open + 1; at < text.length;) {
    if (text[at] === '"') return at + 1;
    if (text.charCodeAt(at) < 32) throw new Broken(at, 'a string is not closed before the end of its line');
    at = text[at] === '\\' ? matched(text, at, ESCAPE) : at + 1;
  }
  throw new Broken(open, 'a string is not closed');
}

function members(text: string, open: number, depth: number): number {
  let at = skip(text, open + 1);
  if (text[at] === '}') return at + 1;
  for (;;) {
    if (text[at] !== '"') throw new Broken(at, 'a key in double quotes is expected');
    at = skip(text, quoted(text, at));
    if (text[at] !== ':') throw new Broken(at, 'a colon is expected after the key');
    at = skip(text, value(text, skip(text, at + 1), depth + 1));
    if (text[at] === '}') return at + 1;
    if (text[at] !== ',') throw new Broken(at, 'a comma or a closing brace is expected');
    at = skip(text, at + 1);
  }
}

function items(text: string, open: number, depth: number): number {
  let at = skip(text, open + 1);
  if (text[at] === ']') return at + 1;
  for (;;) {
    at = skip(text, value(text, at, depth + 1));
    if (text[at] === ']') return at + 1;
    if (text[at] !== ',') throw new Broken(at, 'a comma or a closing bracket is expected');
    at = skip(text, at + 1);
  }
}
