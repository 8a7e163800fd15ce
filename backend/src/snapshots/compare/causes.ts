import type { ComparisonRow } from '#shared/decode';
import { hintCodeFor, uplinkName, type ParameterName } from '#shared/parameters';
import type { Cause, CompareOptions } from '../types.js';
import { bandwidthOfBlocksStated, carrierStatements, spacingHz, spacingStatements } from './derive.js';
import type { Pair } from './families.js';
import { counted, patternOf } from './tdd.js';
import { transformContradiction } from './transform.js';
import { nrArfcnToHz } from '../standards/nrRaster.js';
import type { View } from './view.js';

/** Whether, and in which of these, a differing parameter has its cause. */
type Because = (pair: Pair) => boolean;
const ALWAYS: Because = () => true;

interface Link { readonly of: ParameterName; readonly by: ParameterName; readonly where: Because }
const links = (of: readonly ParameterName[], by: readonly ParameterName[], where: Because = ALWAYS): Link[] =>
  of.flatMap((o) => by.map((b): Link => ({ of: o, by: b, where })));

const TDD: readonly ParameterName[] = ['tddPeriodicity', 'tddDownlinkSlots', 'tddDownlinkSymbols', 'tddUplinkSlots', 'tddUplinkSymbols', 'tddSecondPeriodicity', 'tddSecondDownlinkSlots', 'tddSecondDownlinkSymbols', 'tddSecondUplinkSlots', 'tddSecondUplinkSymbols', 'tddSubframeAssignment', 'tddSpecialSubframe'];

/** What follows from what, the nearest cause first. */
const LINKS: readonly Link[] = [
  ...links(['subcarrierSpacing'], ['fftSize', 'sampleRate', 'frameStructure'], spacingIsDerived),
  ...links(['subcarrierSpacing', 'cyclicPrefix', 'guardInterval', 'channelBandwidth', 'resourceBlocks', 'fftSize', 'sampleRate', 'duplexMode'], ['technology']),
  ...links(['numerology'], ['subcarrierSpacing']),
  ...links(['guardInterval'], ['cyclicPrefix']),
  ...links(['guardInterval'], ['subcarrierSpacing'], guardScales),
  ...links(['fftSize', 'sampleRate'], ['subcarrierSpacing'], ({ a, b }) => transformContradiction(a) === null && transformContradiction(b) === null),
  ...links(['resourceBlocks'], ['channelBandwidth']),
  ...links(['resourceBlocks'], ['subcarrierSpacing'], sameChannel),
  ...links(['nrArfcn', 'earfcn', 'wifiChannel'], ['carrierFrequency']),
  ...links(['carrierFrequency'], ['subcarrierSpacing', 'channelBandwidth', 'resourceBlocks'], carrierFollows),
  ...links(['pointAArfcn', 'offsetToCarrier'], ['carrierFrequency']),
  ...links(['pointAArfcn'], ['subcarrierSpacing', 'channelBandwidth', 'resourceBlocks'], sameCarrier),
  ...links(['offsetToCarrier'], ['subcarrierSpacing', 'pointAArfcn']),
  ...links(['band'], ['technology', 'carrierFrequency']),
  ...links(['duplexMode'], ['band']),
  ...links(['initialBwpLocation'], ['channelBandwidth', 'resourceBlocks', 'subcarrierSpacing']),
  ...links(['ssbArfcn', 'gscn'], ['ssbFrequency']),
  ...links(['ssbFrequency'], ['carrierFrequency'], blockMovesWithCarrier),
  ...links(['kSsb', 'offsetToPointA'], ['ssbFrequency', 'pointAArfcn', 'carrierFrequency']),
  ...links(['subCarrierSpacingCommon'], ['subcarrierSpacing', 'ssbSubcarrierSpacing']),
  ...links(TDD, ['subcarrierSpacing'], patternScales),
  ...links(['frameStructure'], ['subcarrierSpacing'], (pair) => !spacingIsDerived(pair)),
  ...links(['cpLengthOther'], ['cpLength']),
  ...links(['cpLength', 'cpLengthOther'], ['subcarrierSpacing', 'cyclicPrefix']),
  ...links(['centreOffset'], ['resourceBlocks']),
  ...links(['iqBitWidth'], ['compressionMethod'], ({ a, b }) => a.text('compressionMethod') === 'none' || b.text('compressionMethod') === 'none'),
];

/** Differing rows, each under the one it follows from: a wrong numerology is said once. */
export function causesOf(rows: readonly ComparisonRow[], { pair, uplink, link }: { pair: Pair; uplink: Pair; link: CompareOptions['link'] }): Cause[] {
  const differing = rows.filter((r) => r.verdict === 'differ').map((r) => r.parameter as ParameterName);
  const root = (name: ParameterName, depth = 0): ParameterName => {
    const cause = causeOf(name, differing, { pair, uplink });
    return cause === null || depth > 12 ? name : root(cause, depth + 1);
  };
  const roots = [...new Set(differing.map((n) => root(n)))];
  return roots.map((r) => ({ root: r, code: codeOf(r, differing, link), consequences: differing.filter((n) => n !== r && root(n) === r) }));
}

function causeOf(name: ParameterName, differing: readonly ParameterName[], { pair, uplink }: { pair: Pair; uplink: Pair }): ParameterName | null {
  const own = directionOf(name);
  if (own.uplink && differing.includes(own.base)) return own.base;
  const named = (base: ParameterName): ParameterName => (own.uplink && differing.includes(uplinkName(base)) ? uplinkName(base) : base);
  const found = LINKS.find((l) => l.of === own.base && differing.includes(named(l.by)) && l.where(own.uplink ? uplink : pair));
  if (found !== undefined) return named(found.by);
  // The fields of one pattern are one difference.
  const first = TDD.find((t) => differing.includes(t));
  return TDD.includes(name) && first !== undefined && first !== name ? first : null;
}

function directionOf(name: ParameterName): { base: ParameterName; uplink: boolean } {
  if (!name.startsWith('uplink')) return { base: name, uplink: false };
  const rest = name.slice(6);
  return { base: (rest[0].toLowerCase() + rest.slice(1)) as ParameterName, uplink: true };
}

/** Another point A under the same carrier misplaces the grid, not the carrier. */
function codeOf(root: ParameterName, differing: readonly ParameterName[], link: CompareOptions['link']): Cause['code'] {
  const gridOnly = (root === 'pointAArfcn' || root === 'offsetToCarrier') && !differing.includes('carrierFrequency');
  return gridOnly ? 'ssb-placement' : hintCodeFor(root, link);
}

/** A side's spacing stands only in its transform or its frame structure. */
function spacingIsDerived({ a, b }: Pair): boolean {
  return [a, b].some((v) => ['fftSize', 'frameStructure'].includes(spacingStatements(v)[0]?.name ?? ''));
}

/** Equal fractions of the useful symbol. */
function guardScales({ a, b }: Pair): boolean {
  const part = (v: View): number => (v.number('guardInterval') ?? Number.NaN) * (spacingHz(v) ?? Number.NaN);
  return Math.abs(part(a) - part(b)) < 0.02 * part(a);
}

/** Both counts fill one channel, each at its own spacing; or a stated channel is the same. */
function sameChannel({ a, b }: Pair): boolean {
  const channel = (v: View): number | null => v.number('channelBandwidth') ?? bandwidthOfBlocksStated(v)?.value ?? null;
  const [x, y] = [channel(a), channel(b)];
  if (x !== null && y !== null) return x === y;
  const width = (v: View): number => (v.number('resourceBlocks') ?? 0) * (spacingHz(v) ?? 0);
  return Math.abs(width(a) - width(b)) < 0.2 * Math.max(width(a), width(b));
}

/** With the other side's spacing and blocks, point A gives the other side's carrier. */
function carrierFollows({ a, b }: Pair): boolean {
  const target = (v: View): number | null => carrierStatements(v)[0]?.value ?? null;
  const shifted = (own: View, other: View): number[] => {
    const [pointA, offset] = [nrArfcnToHz(own.number('pointAArfcn') ?? -1), own.number('offsetToCarrier')];
    if (pointA === null || offset === null || carrierStatements(own)[0]?.name !== 'pointAArfcn') return [];
    return [own, other].flatMap((s) => [own, other].map((n) => pointA + (12 * offset + 6 * (n.number('resourceBlocks') ?? Number.NaN)) * (spacingHz(s) ?? Number.NaN)));
  };
  const near = (values: readonly number[], hz: number | null): boolean => hz !== null && values.some((v) => Math.abs(v - hz) <= 500);
  return near(shifted(a, b), target(b)) || near(shifted(b, a), target(a)) || samePointA(a, b);
}

/** Both through one point A and one offset: only spacing and blocks are left to differ. */
const samePointA = (a: View, b: View): boolean =>
  carrierStatements(a)[0]?.name === 'pointAArfcn' && carrierStatements(b)[0]?.name === 'pointAArfcn'
  && a.number('pointAArfcn') === b.number('pointAArfcn') && a.number('offsetToCarrier') === b.number('offsetToCarrier');

/** Around one centre, other blocks or another spacing begin elsewhere. */
function sameCarrier({ a, b }: Pair): boolean {
  return Math.abs((carrierStatements(a)[0]?.value ?? Number.NaN) - (carrierStatements(b)[0]?.value ?? Number.NaN)) <= 500;
}

function blockMovesWithCarrier({ a, b }: Pair): boolean {
  const shift = (name: 'carrierFrequency' | 'ssb'): number => {
    const of = (v: View): number => (name === 'ssb' ? ssbHz(v) : carrierStatements(v)[0]?.value ?? Number.NaN);
    return of(a) - of(b);
  };
  return Math.abs(shift('carrierFrequency') - shift('ssb')) < 500;
}

const ssbHz = (v: View): number => v.number('ssbFrequency') ?? nrArfcnToHz(v.number('ssbArfcn') ?? -1) ?? Number.NaN;

/** The same pattern in time, counted in each side's own slots. */
function patternScales({ a, b }: Pair): boolean {
  const [pa, pb, sa, sb] = [patternOf(a), patternOf(b), spacingHz(a), spacingHz(b)];
  if (pa === null || pb === null || sa === null || sb === null) return false;
  const finer = Math.max(sa, sb);
  return JSON.stringify(counted(pa, finer / sa)) === JSON.stringify(counted(pb, finer / sb));
}
