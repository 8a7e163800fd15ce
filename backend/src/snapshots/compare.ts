import type { ComparisonRow } from '#shared/decode';
import { PARAMETER_NAMES, uplinkName, type ParameterName } from '#shared/parameters';
import { withAir } from './compare/air.js';
import { causesOf } from './compare/causes.js';
import { contradictionsIn } from './compare/contradictions.js';
import { windowRows } from './compare/delays.js';
import { carrierRows, prefixRows, spacingRows, ssbRows, widthRows, type Pair } from './compare/families.js';
import { bitWidthRows, cpLengthRows, delayRows, eaxcRows, kSsbRows, oneUnitRows, plainRows } from './compare/plainRows.js';
import { tddRows } from './compare/tdd.js';
import { transformRows } from './compare/transform.js';
import { View } from './compare/view.js';
import { notPermittedIn } from './permitted/permitted.js';
import type { CompareOptions, Comparison, NotPermitted, SnapshotReading } from './types.js';

/**
 * Sets two snapshots (either may be missing) against each other: parameter by parameter, what is
 * equal in other words compared as equal, each difference under its cause, and what the standards
 * do not allow on either side.
 */
export function compareSnapshots(a: SnapshotReading | null, b: SnapshotReading | null, options: CompareOptions): Comparison {
  const pair = pairOf(a, b, 'downlink');
  const uplink = pairOf(a, b, 'uplink');
  const compared = inOrder([...commonRows(pair, uplink, options), ...directedRows(pair), ...directedRows(uplink)]);
  const shown = (name: ParameterName): ParameterName => shownUnder(name, compared);
  const stated = { a: offStandard(pair.a, uplink.a).map((f) => underDifference(f, compared)), b: offStandard(pair.b, uplink.b).map((f) => underDifference(f, compared)) };
  const placed = (found: readonly NotPermitted[]): NotPermitted[] => found.map((f) => ({ ...f, parameter: shown(f.parameter) }));
  const notPermitted = { a: placed(stated.a), b: placed(stated.b) };
  const causes = causesOf(compared, { pair, uplink, link: options.link });
  const contradictions = [pair, uplink].flatMap((p) => [...contradictionsIn(p.a, 'a'), ...contradictionsIn(p.b, 'b')])
    .map((c) => ({ ...c, parameters: [...new Set(c.parameters.map(shown))] }));
  return { rows: withAir(withOffStandard(compared, { stated, shown }), options), causes, contradictions, notPermitted };
}

/** The quantity's row, under which its other words stand too. */
const QUANTITY: Readonly<Partial<Record<ParameterName, ParameterName>>> = {
  numerology: 'subcarrierSpacing', nrArfcn: 'carrierFrequency', earfcn: 'carrierFrequency', wifiChannel: 'carrierFrequency', pointAArfcn: 'carrierFrequency',
  offsetToCarrier: 'carrierFrequency', ssbArfcn: 'ssbFrequency', gscn: 'ssbFrequency',
};
/** Rows that stand in for one that was compared in other words. */
const STAND_IN: Readonly<Partial<Record<ParameterName, ParameterName>>> = {
  guardInterval: 'cyclicPrefix', cyclicPrefix: 'guardInterval', resourceBlocks: 'channelBandwidth', channelBandwidth: 'resourceBlocks',
};

/**
 * A combination is off standard because one of its settings is wrong. Where the sides differ in one,
 * that one is; under another technology every table is another.
 */
function underDifference(found: NotPermitted, rows: readonly ComparisonRow[]): NotPermitted {
  const differs = (name: ParameterName): boolean => rows.some((r) => r.parameter === shownUnder(name, rows) && r.verdict === 'differ');
  if (differs('technology')) return { ...found, parameter: 'technology', yieldsToDifference: true };
  if (differs(found.parameter)) return found;
  const culprit = found.together?.find(differs);
  return culprit === undefined ? found : { ...found, parameter: culprit, yieldsToDifference: true };
}

/** The row under which a finding about a parameter stands. */
function shownUnder(name: ParameterName, rows: readonly ComparisonRow[]): ParameterName {
  const isUplink = name.startsWith('uplink');
  const base = isUplink ? (name[6].toLowerCase() + name.slice(7)) as ParameterName : name;
  const directed = (n: ParameterName | undefined): ParameterName | undefined => (n !== undefined && isUplink ? uplinkName(n) : n);
  return [directed(QUANTITY[base]), name, directed(STAND_IN[base])].find((n) => n !== undefined && rows.some((r) => r.parameter === n)) ?? name;
}

/** The rows alone, as the decode prints them. */
export const compare = (a: SnapshotReading | null, b: SnapshotReading | null, options: CompareOptions): ComparisonRow[] => [...compareSnapshots(a, b, options).rows];

const pairOf = (a: SnapshotReading | null, b: SnapshotReading | null, direction: 'downlink' | 'uplink'): Pair => ({ a: new View(a, direction), b: new View(b, direction) });

/** What has no direction, or stands for both. */
function commonRows(pair: Pair, uplink: Pair, options: CompareOptions): ComparisonRow[] {
  const kSsbOnAir = options.air?.['kSsb']?.value;
  const windows = windowRows(pair);
  return [
    ...plainRows(pair), ...transformRows(pair), ...tddRows(pair), ...ssbRows(pair), ...kSsbRows(pair, typeof kSsbOnAir === 'number' ? kSsbOnAir : null),
    ...oneUnitRows(pair, options.link), ...eaxcRows(pair, uplink), ...windows,
    ...delayRows(pair).filter((r) => !windows.some((w) => w.parameter === r.parameter)),
  ];
}

function directedRows(pair: Pair): ComparisonRow[] {
  const isUplink = pair.a.direction === 'uplink';
  const apart = isUplink ? [...plainRows(pair).filter((r) => r.parameter.startsWith('uplink')), ...eaxcRows(pair, pair)] : [];
  return [...spacingRows(pair), ...prefixRows(pair), ...carrierRows(pair), ...widthRows(pair), ...bitWidthRows(pair), ...cpLengthRows(pair), ...apart]
    .filter((r) => !isUplink || r.parameter.startsWith('uplink'));
}

function inOrder(rows: readonly ComparisonRow[]): ComparisonRow[] {
  const place = new Map(PARAMETER_NAMES.map((n, i): [string, number] => [n, i]));
  return [...rows].sort((x, y) => (place.get(x.parameter) ?? 0) - (place.get(y.parameter) ?? 0));
}

const offStandard = (view: View, uplink: View): NotPermitted[] => [...notPermittedIn(view), ...notPermittedIn(uplink).filter((f) => f.parameter.startsWith('uplink'))];

/** A number off its raster that also differs from the other side's stays a difference, with both said. */
function withOffStandard(rows: readonly ComparisonRow[], { stated, shown }: { stated: Comparison['notPermitted']; shown: (name: ParameterName) => ParameterName }): ComparisonRow[] {
  return rows.map((r) => {
    const here = (['a', 'b'] as const).flatMap((side) => stated[side].filter((f) => f.parameter === r.parameter || shown(f.parameter) === r.parameter).map((f) => ({ side, ...f })));
    if (here.length === 0) return r;
    const yields = r.verdict === 'differ' && here.every((f) => f.yieldsToDifference === true);
    const note = [...here.map((f) => `side ${f.side.toUpperCase()}: ${f.note}`), ...(r.verdict === 'differ' ? ['the two sides differ'] : []), ...(r.note === null || r.note === undefined ? [] : [r.note])].join('; ');
    return yields ? { ...r, note } : { ...r, verdict: 'not-permitted' as const, clause: here[0].clause, note };
  });
}
