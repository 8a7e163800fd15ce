import type { ParameterName } from '#shared/parameters';
import type { Interpreted } from './values.js';

/** Enumerations of TS 38.331 in their order, ms. */
const PATTERN_MS = [0.5, 0.625, 1, 1.25, 2, 2.5, 5, 10];
const EXTENDED_MS = [3, 4];
const BLOCK_MS = [5, 10, 20, 40, 80, 160];

/**
 * Some files hold the place in an enumeration instead of its name. A number that could be either is
 * not guessed at. Null where the text is no bare number.
 */
export function byIndex(parameter: ParameterName, text: string): Interpreted | null {
  const choices = parameter.endsWith('Periodicity') ? (parameter.startsWith('tdd') ? PATTERN_MS : BLOCK_MS) : null;
  if (choices === null || !/^\d+(\.\d+)?$/.test(text.trim())) return null;
  const number = Number(text);
  const place = Number.isInteger(number) ? choices[number] : undefined;
  const named = choices.includes(number) || (parameter.startsWith('tdd') && EXTENDED_MS.includes(number)) ? number : undefined;
  if (place !== undefined && named !== undefined) return { ok: false, reason: `"${text}" may be ${named} ms or the enumeration's place for ${place} ms; write ms${String(named).replace('.', 'p')}` };
  const ms = place ?? named;
  if (ms === undefined) return null;
  return { ok: true, value: ms / 1e3, note: place === undefined ? 'no unit stands there; read as ms' : 'read as the place in the enumeration' };
}
