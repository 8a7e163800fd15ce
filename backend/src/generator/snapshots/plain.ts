import { groupOf, inUnit, QUANTITY, type Declared, type DeclaredName } from './declared.js';
import type { ConfigTree } from './syntax.js';

export type Spelling = 'camel' | 'snake' | 'kebab';

/** How the plain vocabulary is spelled: with the SI unit, a unit after the name, or one after the value. */
export interface PlainStyle {
  readonly spelling: Spelling;
  readonly units: 'si' | 'in-name' | 'in-value';
  /** Say numerology in place of the spacing. */
  readonly numerology: boolean;
  readonly grouped: boolean;
}

const UNITS = {
  frequency: [['khz', 'kHz', 3], ['mhz', 'MHz', 6]],
  rate: [['msps', 'Msps', 6], ['msps', 'Msps', 6]],
  time: [['ms', 'ms', -3], ['ns', 'ns', -9]],
} as const;

export function plainTree(declared: Declared, style: PlainStyle): { readonly [key: string]: ConfigTree } {
  const tree: Record<string, ConfigTree> = {};
  for (const [name, value] of Object.entries(declared) as [DeclaredName, string | number | boolean][]) {
    if (value === undefined) continue;
    const [key, written] = entry(name, value, style);
    if (!style.grouped) {
      tree[key] = written;
      continue;
    }
    const group = groupOf(name);
    tree[group] = { ...(tree[group] as Record<string, ConfigTree> | undefined), [key]: written };
  }
  return tree;
}

function entry(name: DeclaredName, value: string | number | boolean, style: PlainStyle): [string, ConfigTree] {
  if (style.numerology && name === 'subcarrierSpacing' && Number.isInteger(Math.log2(Number(value) / 15000))) return ['numerology', Math.log2(Number(value) / 15000)];
  const quantity = QUANTITY[name];
  if (!quantity || style.units === 'si') return [spelled(name, style.spelling), value];
  const isSmall = quantity === 'time' ? Number(value) < 1e-4 : Number(value) >= 1e6;
  const [inName, inValue, exponent] = UNITS[quantity][isSmall ? 1 : 0];
  const number = inUnit(Number(value), exponent);
  if (style.units === 'in-value') return [spelled(name, style.spelling), `${number} ${inValue}`];
  return [spelled(`${name}${inName[0].toUpperCase()}${inName.slice(1)}`, style.spelling), number];
}

export function spelled(camel: string, spelling: Spelling): string {
  if (spelling === 'camel') return camel;
  const words = camel.replace(/([a-z0-9])([A-Z])/g, '$1 $2').replace(/([A-Z])([A-Z][a-z])/g, '$1 $2').toLowerCase().split(' ');
  return words.join(spelling === 'snake' ? '_' : '-');
}
