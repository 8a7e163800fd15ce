import { parameterFacts, PARAMETER_NAMES, uplinkName, type ParameterName } from '#shared/parameters';
import { compact, type Step } from './names.js';
import { UNIT_SUFFIXES } from './units.js';

export interface PlainName { readonly parameter: ParameterName; readonly unit: string | null }

const NAMES: ReadonlyMap<string, ParameterName> = new Map([
  ...PARAMETER_NAMES.filter((n) => !n.startsWith('uplink')).map((n): [string, ParameterName] => [compact(n), n]),
  ['scs', 'subcarrierSpacing'], ['pci', 'physicalCellId'], ['ssbscs', 'ssbSubcarrierSpacing'], ['channelnumber', 'wifiChannel'],
  ['commonscs', 'subcarrierSpacing'], ['dlarfcn', 'nrArfcn'], ['tddperiod', 'tddPeriodicity'],
  ...PARAMETER_NAMES.filter((n) => n.startsWith('tdd')).map((n): [string, ParameterName] => [`tddpattern${compact(n.slice(3))}`, n]),
  ...PARAMETER_NAMES.filter((n) => /^tdd(Down|Up)link/.test(n)).map((n): [string, ParameterName] => [compact(n.replace('Downlink', 'Dl').replace('Uplink', 'Ul')), n]),
  ['ssbperiod', 'ssbPeriodicity'], ['eaxcid', 'eaxcIds'], ['ntaoffset', 'nTaOffset'],
]);

/** `ul`, `uplink`, `dl` or `downlink` before the name itself. */
const DIRECTION = /^(ul|uplink|dl|downlink)(?=[a-z])/;

/**
 * The plain name that a key spells, alone or with the keys above it (`ssb: { arfcn }`,
 * `tdd: { downlink: { slots } }`), with its unit suffix.
 */
export function plainName(steps: readonly Step[]): PlainName | null {
  const key = steps.at(-1)?.compact ?? '';
  const above = steps.slice(0, -1).map((s) => s.compact).filter((c) => c !== '');
  const joined = [above.slice(-2).join('') + key, (above.at(-1) ?? '') + key];
  for (const name of above.length > 0 ? joined : []) {
    const found = nameWithUnit(name);
    if (found !== null) return found;
  }
  return nameWithUnit(key) ?? directedName(key);
}

function nameWithUnit(name: string): PlainName | null {
  const whole = NAMES.get(name);
  if (whole !== undefined) return { parameter: whole, unit: null };
  for (const unit of UNIT_SUFFIXES) {
    const parameter = name.endsWith(unit) ? NAMES.get(name.slice(0, -unit.length)) : undefined;
    if (parameter !== undefined) return { parameter, unit };
  }
  return null;
}

function directedName(key: string): PlainName | null {
  const direction = DIRECTION.exec(key)?.[1];
  const found = direction === undefined ? null : nameWithUnit(key.slice(direction.length));
  if (found === null || direction === undefined || parameterFacts(found.parameter)?.directional !== true) return null;
  return direction.startsWith('u') ? { ...found, parameter: uplinkName(found.parameter) } : found;
}

/** The common name that a glossary means, in any of the three spellings. */
export function parameterNamed(name: string): ParameterName | null {
  const wanted = compact(name);
  return NAMES.get(wanted) ?? PARAMETER_NAMES.find((n) => compact(n) === wanted) ?? null;
}

/** The common name nearest to a misspelt one, where one is near enough to suggest. */
export function nearestName(name: string): ParameterName | null {
  const wanted = compact(name).slice(0, 60);
  const scored = PARAMETER_NAMES.map((n) => ({ n, distance: editDistance(wanted, compact(n)) })).sort((a, b) => a.distance - b.distance);
  return scored[0].distance <= Math.max(2, wanted.length / 3) ? scored[0].n : null;
}

function editDistance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const next = [i];
    for (let j = 1; j <= b.length; j += 1) {
      next.push(Math.min(row[j] + 1, next[j - 1] + 1, row[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1)));
    }
    row = next;
  }
  return row[b.length];
}
