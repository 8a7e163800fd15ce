import { SaxesParser } from 'saxes';
import { SnapshotError } from '../error.js';
import { Budget, branch, leaf, type Branch, type ParsedText, type TreeNode } from './tree.js';

interface OpenElement { readonly key: string; readonly node: Branch; readonly unit: string | null; text: string }

/** Attributes that say how to read an element and nothing about the radio. */
const SILENT = /^(xmlns|xsi:|xml:|nc:|operation$|schemaLocation$)/;

/**
 * XML, XER and NETCONF. Elements become keys without their prefixes, attributes keys beside them;
 * `<parameter name="x" value="1"/>` becomes the key x. A document type is refused, so that no
 * entity can be declared. Throws SnapshotError at the first fault.
 */
export function parseXml(text: string): ParsedText {
  const reading = new XmlReading();
  reading.read(text);
  return { root: reading.root, stray: [] };
}

class XmlReading {
  readonly root = branch(1);
  private readonly parser = new SaxesParser();
  private readonly stack: OpenElement[] = [];
  private readonly budget = new Budget();

  read(text: string): void {
    const { parser } = this;
    parser.on('doctype', () => this.refuse('doctype', 'a document type (DOCTYPE) stands here, and none is read, because entities can be declared in it. Take it out.'));
    parser.on('error', (fault) => this.refuse('syntax', `${fault.message.replace(/^\d+:\d+:\s*/, '').replace('undefined entity', 'an entity that is not declared stands here').replace(/\.$/, '')}. Correct the XML there.`));
    parser.on('opentag', (tag) => this.openTag(tag.name, tag.attributes as Record<string, string>, parser.line));
    parser.on('closetag', () => this.closeTag());
    parser.on('text', (piece) => this.addText(piece));
    parser.on('cdata', (piece) => this.addText(piece));
    // In slices, so that a fault stops the reading where it stands.
    for (let at = 0; at < text.length; at += 65_536) parser.write(text.slice(at, at + 65_536));
    parser.close();
  }

  private openTag(name: string, attributes: Record<string, string>, line: number): void {
    this.budget.spend(this.stack.length + 1, line);
    const node = branch(line);
    const named = attributes['name'];
    const rest = Object.entries(attributes).filter(([key]) => !SILENT.test(key));
    const keyed = named !== undefined && rest.every(([key]) => key === 'name' || key === 'value' || key === 'unit');
    if (!keyed) for (const [key, value] of rest) if (key !== 'unit') node.entries.push({ key: local(key), node: leaf(value, line), line });
    this.stack.push({ key: keyed ? named : local(name), node, unit: attributes['unit'] ?? null, text: keyed ? attributes['value'] ?? '' : '' });
  }

  private closeTag(): void {
    const done = this.stack.pop();
    if (done === undefined) return;
    const parent = this.stack.at(-1)?.node ?? this.root;
    parent.entries.push({ key: done.key, node: content(done), line: done.node.line });
  }

  private addText(piece: string): void {
    const top = this.stack.at(-1);
    if (top !== undefined) top.text += piece;
  }

  private refuse(code: 'doctype' | 'syntax', what: string): never {
    const line = this.parser.line;
    throw new SnapshotError(code, `Line ${line}: ${what}`, { line, offset: this.parser.position });
  }
}

function content(element: OpenElement): TreeNode {
  const text = element.text.trim();
  if (element.node.entries.length > 0) {
    if (text !== '') element.node.entries.push({ key: 'value', node: leaf(text, element.node.line), line: element.node.line });
    return element.node;
  }
  return leaf(element.unit !== null && text !== '' ? `${text} ${element.unit}` : text, element.node.line);
}

const local = (name: string): string => name.slice(name.indexOf(':') + 1);
