import { parameterFacts, type ParameterName } from '#shared/parameters';
import type { TreeNode } from '../syntax/tree.js';

/**
 * The texts of a node that holds a value: a plain one, XER's empty element inside (`<kHz30/>`),
 * `{ value, unit }`, or a list where the parameter allows several. Null where the node is a structure.
 */
export function valueTexts(node: TreeNode, parameter: ParameterName): readonly string[] | null {
  const type = parameterFacts(parameter)?.type;
  if (node.kind === 'leaf') {
    // A field of type ENUMERATED {true} is true by standing there.
    return [node.text === '' && type === 'boolean' ? 'true' : node.text];
  }
  const several = type === 'list' || type === 'band';
  if (node.kind === 'list') return several ? flatTexts(node) : null;
  const only = node.entries.length === 1 ? node.entries[0] : null;
  if (only !== null && only.node.kind === 'leaf' && only.node.text === '') return [only.key];
  return withUnit(node) ?? (several ? flatTexts(node) : null);
}

function withUnit(node: TreeNode): string[] | null {
  if (node.kind !== 'branch') return null;
  const text = (key: string): string | null => {
    const found = node.entries.find((e) => e.key.toLowerCase() === key)?.node;
    return found?.kind === 'leaf' ? found.text : null;
  };
  const value = text('value');
  const unit = text('unit') ?? text('units');
  if (value === null || node.entries.length > (unit === null ? 1 : 2)) return null;
  return unit === null ? [value] : [`${value} ${unit}`];
}

/** Keys under which encoders wrap the items of a list: repeated elements, `{FreqBandIndicatorNR: 78}`. */
const WRAPPERS = /^(value|item|element|eaxc-?id|(nr-?)?multibandinfo|freqbandindicator(nr)?)$/i;

/** Lists are wrapped differently by every encoder: `[78]`, `[{freqBandIndicatorNR: 78}]`, repeated elements. */
function flatTexts(node: TreeNode): string[] | null {
  if (node.kind === 'leaf') return [node.text];
  return joined(node.kind === 'list' ? node.items : node.entries.filter((e) => WRAPPERS.test(e.key)).map((e) => e.node));
}

function joined(nodes: readonly TreeNode[]): string[] | null {
  const texts = nodes.flatMap((n) => flatTexts(n) ?? []);
  return texts.length === 0 ? null : texts;
}
