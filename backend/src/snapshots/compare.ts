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
  const placed = (found: readonly NotPermitted[]): NotPermitted[] => found.map((f) => ({ ...f, parameter: shown(f.parameter) }));
  const notPermitted = { a: placed(offStandard(pair.a, uplink.a)), b: placed(offStandard(pair.b, uplink.b)) };
  const causes = causesOf(compared, { pair, uplink, link: options.link });
  const contradictions = [pair, uplink].flatMap((p) => [...contradictionsIn(p.a, 'a'), ...contradictionsIn(p.b, 'b')])
    .map((c) => ({ ...c, parameters: [...new Set(c.parameters.map(shown))] }));
  return { rows: withAir(withOffStandard(compared, notPermitted), options), causes, contradictions, notPermitted };
}

/** Rows under which a statement stands where its own words have none. */
const STANDS_UNDER: Readonly<Partial<Record<ParameterName, ParameterName>>> = {
  numerology: 'subcarrierSpacing', nrArfcn: 'carrierFrequency', earfcn: 'carrierFrequency', wifiChannel: 'carrierFrequency', pointAArfcn: 'carrierFrequency',
  offsetToCarrier: 'carrierFrequency', ssbArfcn: 'ssbFrequency', gscn: 'ssbFrequency', guardInterval: 'cyclicPrefix', cyclicPrefix: 'guardInterval',
  resourceBlocks: 'channelBandwidth', channelBandwidth: 'resourceBlocks',
};

function shownUnder(name: ParameterName, rows: readonly ComparisonRow[]): ParameterName {
  const has = (n: string | undefined): boolean => n !== undefined && rows.some((r) => r.parameter === n);
  if (has(name)) return name;
  const upright = name.startsWith('uplink') ? (name[6].toLowerCase() + name.slice(7)) as ParameterName : name;
  const other = STANDS_UNDER[upright];
  const named = other === undefined || upright === name ? other : uplinkName(other);
  return named !== undefined && has(named) ? named : name;
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
function withOffStandard(rows: readonly ComparisonRow[], found: Comparison['notPermitted']): ComparisonRow[] {
  return rows.map((r) => {
    const here = (['a', 'b'] as const).flatMap((side) => found[side].filter((f) => f.parameter === r.parameter).map((f) => ({ side, ...f })));
    if (here.length === 0) return r;
    const yields = r.verdict === 'differ' && here.every((f) => f.yieldsToDifference === true);
    const note = [...here.map((f) => `side ${f.side.toUpperCase()}: ${f.note}`), ...(r.verdict === 'differ' ? ['the two sides differ'] : []), ...(r.note === null || r.note === undefined ? [] : [r.note])].join('; ');
    return yields ? { ...r, note } : { ...r, verdict: 'not-permitted' as const, clause: here[0].clause, note };
  });
}
