import { parameterFacts, type ParameterFacts, type ParameterName } from '#shared/parameters';
import type { SettingValue } from '#shared/decode';
import { interpretNumber } from './numbers.js';
import { boolean, TOKENS, tokenFor } from './tokens.js';

/** A text read as a parameter's value; `parameter` where the text speaks of another one. */
export type Interpreted =
  | { readonly ok: true; readonly value: SettingValue; readonly note?: string; readonly parameter?: ParameterName }
  | { readonly ok: false; readonly reason: string };

const read = (value: SettingValue, note?: string): Interpreted => ({ ok: true, value, note });
const refuse = (reason: string): Interpreted => ({ ok: false, reason });

/** Reads one text as the parameter's value in its common unit. `unit` comes from the key or a glossary. */
export function interpret(parameter: ParameterName, text: string, unit: string | null): Interpreted {
  const facts = parameterFacts(parameter);
  if (facts === null) return refuse(`${parameter} is no common parameter`);
  const trimmed = text.trim();
  if (trimmed === '' || /^(null|~|none\/a|n\/a)$/i.test(trimmed)) return refuse('no value stands here');
  return byType(parameter, facts, trimmed, unit);
}

function byType(parameter: ParameterName, facts: ParameterFacts, text: string, unit: string | null): Interpreted {
  switch (facts.type) {
    case 'boolean': return booleanValue(text);
    case 'token': return tokenValue(parameter, text);
    case 'band': return bandValue(text);
    case 'list': return identifierList(text.split(/[\s,;]+/).filter((t) => t !== ''));
    case 'text': return read(text.toLowerCase());
    default: return numberOrWord(parameter, facts, text, unit);
  }
}

function booleanValue(text: string): Interpreted {
  const value = boolean(text);
  return value === null ? refuse(`"${text}" is neither true nor false`) : read(value);
}

const baseName = (parameter: ParameterName): string => {
  const rest = parameter.startsWith('uplink') ? parameter.slice(6) : null;
  return rest === null ? parameter : rest[0].toLowerCase() + rest.slice(1);
};
const sibling = (parameter: ParameterName, name: ParameterName): ParameterName =>
  parameter.startsWith('uplink') ? (`uplink${name[0].toUpperCase()}${name.slice(1)}` as ParameterName) : name;

function tokenValue(parameter: ParameterName, text: string): Interpreted {
  const base = baseName(parameter);
  const token = tokenFor(base, text);
  if (token !== null) return read(token);
  if (base === 'cyclicPrefix') return prefixAsDuration(parameter, text);
  return refuse(`"${text}" is none of ${Object.keys(TOKENS[base] ?? {}).join(', ')}`);
}

/** A prefix given as a duration is a guard interval. */
function prefixAsDuration(parameter: ParameterName, text: string): Interpreted {
  const guard = sibling(parameter, 'guardInterval');
  const facts = parameterFacts(guard);
  const found = facts !== null && /[a-zµμ]\s*$/i.test(text) ? interpretNumber(guard, facts, text, null) : null;
  return found?.ok === true ? { ...found, parameter: guard } : refuse(`"${text}" is none of ${Object.keys(TOKENS['cyclicPrefix']).join(', ')}`);
}

function numberOrWord(parameter: ParameterName, facts: ParameterFacts, text: string, unit: string | null): Interpreted {
  if (baseName(parameter) === 'guardInterval') {
    const word = /^long$/i.test(text) ? 'normal' : tokenFor('cyclicPrefix', text);
    if (word !== null && !/\d/.test(text)) return { ok: true, value: word, parameter: sibling(parameter, 'cyclicPrefix') };
  }
  const found = interpretNumber(parameter, facts, text, unit);
  return baseName(parameter) === 'iqBitWidth' && found.ok && found.value === 0 ? read(16, '0 stands for 16 bits') : found;
}

function bandValue(text: string): Interpreted {
  const found = /^(?:n|b|band\s*)?(\d{1,3})$/i.exec(text);
  if (found !== null) return read(Number(found[1]));
  return read(text.toLowerCase().replace(/\s+/g, ''));
}

/** Identifiers of 16 bits, in order, each once. */
export function identifierList(texts: readonly string[]): Interpreted {
  const numbers = texts.map((t) => Number(t.replace(/^[[(]|[\])]$/g, '')));
  if (numbers.length === 0 || numbers.some((n) => !Number.isInteger(n) || n < 0 || n > 0xffff)) {
    return refuse(`"${texts.join(', ').slice(0, 60)}" is no list of 16-bit numbers`);
  }
  return read([...new Set(numbers)].sort((a, b) => a - b));
}
