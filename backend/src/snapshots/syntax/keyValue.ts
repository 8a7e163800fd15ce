import { Budget, branch, leaf, type Branch, type ParsedText, type StrayLine } from './tree.js';

/** `key = value` text with sections in brackets; `#`, `;` and `//` start comments. Lines that are neither are kept as stray. */
export function parseKeyValue(text: string): ParsedText {
  const root = branch(1);
  const stray: StrayLine[] = [];
  const budget = new Budget();
  let section: Branch = root;
  text.split('\n').forEach((whole, index) => {
    const line = index + 1;
    const content = whole.trim();
    if (content === '' || /^([#;]|\/\/)/.test(content)) return;
    budget.spend(2, line);
    const heading = sectionName(content);
    if (heading !== null) {
      section = openSection(root, heading, line);
      return;
    }
    const pair = splitPair(content);
    if (pair === null) stray.push({ line, text: content });
    else section.entries.push({ key: unquote(pair[0].replace(/^export\s/, '')), node: leaf(unquote(withoutComment(pair[1])), line), line });
  });
  return { root, stray };
}

// Lines may be long, so the scans below are by index: a backtracking pattern would take quadratic time.

function sectionName(content: string): string | null {
  const end = content.indexOf(']');
  if (content[0] !== '[' || end < 0) return null;
  const after = content.slice(end + 1).trimStart();
  if (after !== '' && after[0] !== '#' && after[0] !== ';') return null;
  return content.slice(1, end).trim() || null;
}

/** At the first `=`; without one, at the first colon that a blank follows. */
function splitPair(content: string): [key: string, value: string] | null {
  const equals = content.indexOf('=');
  const colon = equals < 0 ? content.search(/:(?:\s|$)/) : -1;
  const at = equals >= 0 ? equals : colon;
  return at <= 0 ? null : [content.slice(0, at).trim(), content.slice(at + 1).trim()];
}

/** A section that opens twice goes on where it was. */
function openSection(root: Branch, name: string, line: number): Branch {
  const known = root.entries.find((e) => e.key === name && e.node.kind === 'branch');
  if (known?.node.kind === 'branch') return known.node;
  const section = branch(line);
  root.entries.push({ key: name, node: section, line });
  return section;
}

/** A comment after a value starts with a blank and a mark, so that `#7` and `a;b` stay values. */
function withoutComment(value: string): string {
  const quote = value[0];
  if (quote === '"' || quote === "'") {
    const end = value.indexOf(quote, 1);
    if (end > 0) return value.slice(0, end + 1);
  }
  const at = value.search(/\s(?:[#;]|\/\/)/);
  const bare = (at < 0 ? value : value.slice(0, at)).trimEnd();
  return bare.endsWith(';') ? bare.slice(0, -1).trimEnd() : bare;
}

function unquote(text: string): string {
  const first = text[0];
  return text.length > 1 && (first === '"' || first === "'") && text.endsWith(first) ? text.slice(1, -1) : text;
}
