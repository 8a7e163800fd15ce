/** A configuration as a tree, before it is written in a syntax. */
export type ConfigTree = string | number | boolean | readonly ConfigTree[] | { readonly [key: string]: ConfigTree };
export type Syntax = 'json' | 'yaml' | 'xml' | 'conf' | 'braces';

const ENDING: Record<Syntax, string> = { json: 'json', yaml: 'yaml', xml: 'xml', conf: 'conf', braces: 'conf' };

export function fileEnding(syntax: Syntax): string {
  return ENDING[syntax];
}

/** Writes a tree. `conf` takes groups of one level; `root` names an XML document. */
export function write(tree: { readonly [key: string]: ConfigTree }, syntax: Syntax, root = 'configuration'): string {
  if (syntax === 'json') return `${JSON.stringify(tree, null, 2)}\n`;
  if (syntax === 'yaml') return yaml(tree, 0);
  if (syntax === 'xml') return `<?xml version="1.0" encoding="UTF-8"?>\n${xml(root, tree, 0)}`;
  if (syntax === 'conf') return conf(tree);
  return braces(tree, 0);
}

function isMap(node: ConfigTree): node is { readonly [key: string]: ConfigTree } {
  return typeof node === 'object' && !Array.isArray(node);
}

/** Words that YAML would read as another kind are quoted. */
function yamlScalar(value: ConfigTree): string {
  if (typeof value !== 'string') return String(value);
  return /^[A-Za-z][A-Za-z0-9 _./-]*$/.test(value) && !/^(yes|no|on|off|true|false|null|y|n)$/i.test(value) ? value : JSON.stringify(value);
}

function yaml(node: { readonly [key: string]: ConfigTree }, depth: number): string {
  const pad = '  '.repeat(depth);
  return Object.entries(node).map(([key, value]) => {
    if (Array.isArray(value)) {
      if (value.every((v) => typeof v !== 'object')) return `${pad}${key}: [${value.map(yamlScalar).join(', ')}]\n`;
      const items = value.map((v) => `${pad}  - ${yaml(v as { readonly [key: string]: ConfigTree }, depth + 2).trimStart()}`).join('');
      return `${pad}${key}:\n${items}`;
    }
    return isMap(value) ? `${pad}${key}:\n${yaml(value, depth + 1)}` : `${pad}${key}: ${yamlScalar(value)}\n`;
  }).join('');
}

const escaped = (text: string) => text.replaceAll('&', '&amp;').replaceAll('<', '&lt;');

function xml(name: string, node: ConfigTree, depth: number): string {
  const pad = '  '.repeat(depth);
  if (Array.isArray(node)) return node.map((item) => xml(name, item, depth)).join('');
  if (!isMap(node)) return `${pad}<${name}>${escaped(String(node))}</${name}>\n`;
  const inner = Object.entries(node);
  if (inner.length === 1 && inner[0][1] === XER_CHOICE) return `${pad}<${name}><${inner[0][0]}/></${name}>\n`;
  return `${pad}<${name}>\n${inner.map(([key, value]) => xml(key, value, depth + 1)).join('')}${pad}</${name}>\n`;
}

/** Marks an enumerated value for XER: `{ kHz30: XER_CHOICE }` becomes `<kHz30/>`. */
export const XER_CHOICE = '\u0000';

function conf(tree: { readonly [key: string]: ConfigTree }): string {
  const line = ([key, value]: [string, ConfigTree]) => `${key} = ${Array.isArray(value) ? value.join(', ') : String(value)}\n`;
  const loose = Object.entries(tree).filter(([, v]) => !isMap(v)).map(line).join('');
  const groups = Object.entries(tree).flatMap(([key, value]) => (isMap(value) ? [`\n[${key}]\n${Object.entries(value).map(line).join('')}`] : []));
  return loose + groups.join('');
}

function braces(node: { readonly [key: string]: ConfigTree }, depth: number): string {
  const pad = '  '.repeat(depth);
  const scalar = (value: ConfigTree) => (typeof value === 'string' ? JSON.stringify(value) : String(value));
  return Object.entries(node).map(([key, value]) => {
    if (Array.isArray(value)) {
      if (value.every((v) => typeof v !== 'object')) return `${pad}${key} = ( ${value.map(scalar).join(', ')} );\n`;
      return `${pad}${key} = (\n${value.map((v) => `${pad}  {\n${braces(v as { readonly [key: string]: ConfigTree }, depth + 2)}${pad}  }`).join(',\n')}\n${pad});\n`;
    }
    return isMap(value) ? `${pad}${key} = {\n${braces(value, depth + 1)}${pad}};\n` : `${pad}${key} = ${scalar(value)};\n`;
  }).join('');
}
