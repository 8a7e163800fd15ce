import type { ParameterName } from '#shared/parameters';
import { bandwidthOfBlocks, maxResourceBlocks, type BandwidthTable } from '../standards/bandwidths.js';
import { spacingOfFrameStructure } from '../standards/frameStructure.js';
import { earfcnToHz } from '../standards/lteBands.js';
import { cellularPrefixOf, cellularPrefixS, spacingOfNumerology } from '../standards/numerology.js';
import { frequencyRange, gscnToHz, nrArfcnToHz } from '../standards/nrRaster.js';
import { isWifiSpacing, wifiChannelHz, wifiPrefixOf, wifiPrefixS } from '../standards/wifi.js';
import type { FoundValue } from '../types.js';
import type { View } from './view.js';

/** What a side says of a quantity, in whatever words: the value, the parameter it rests on, and how. */
export interface Statement<T = number> {
  readonly value: T;
  readonly name: ParameterName;
  readonly from: FoundValue;
  /** False where the value stands in the file itself, in other words or not. */
  readonly derived: boolean;
  readonly how?: string;
}

type Conversion = (value: number) => number | null;

function stated(view: View, name: ParameterName, convert: Conversion = (v) => v, how?: string): Statement | null {
  const from = view.get(name);
  const value = typeof from?.value === 'number' ? convert(from.value) : null;
  return from === null || value === null || Number.isNaN(value) ? null : { value, name, from, derived: false, ...(how === undefined ? {} : { how }) };
}

const present = <T>(items: readonly (T | null)[]): T[] => items.filter((i): i is T => i !== null);

/** Spacing of the carrier's data, Hz, first what is said outright. */
export function spacingStatements(view: View): Statement[] {
  return present([
    stated(view, 'subcarrierSpacing'),
    stated(view, 'numerology', (mu) => (mu >= 0 && mu <= 6 ? spacingOfNumerology(mu) : null)),
    derivedFrom(stated(view, 'frameStructure', spacingOfFrameStructure), 'the low half of the frame structure'),
    lteSpacing(view),
    transformSpacing(view),
  ]);
}

const derivedFrom = (statement: Statement | null, how: string): Statement | null => (statement === null ? null : { ...statement, derived: true, how });

function lteSpacing(view: View): Statement | null {
  const from = view.get('technology');
  return from?.value === 'lte' ? { value: 15e3, name: 'technology', from, derived: true, how: 'LTE carriers have 15 kHz' } : null;
}

/** Sample rate over transform size: the spacing that the two imply. */
export function transformSpacing(view: View): Statement | null {
  const [rate, size] = [view.number('sampleRate'), view.number('fftSize')];
  const from = view.get('fftSize');
  if (rate === null || size === null || size <= 0 || from === null) return null;
  return { value: rate / size, name: 'fftSize', from, derived: true, how: `sample rate over transform size ${size}` };
}

export const spacingHz = (view: View): number | null => spacingStatements(view)[0]?.value ?? null;

/** A frequency near the carrier from whatever is stated, for the choice of tables. */
function roughHz(view: View): number | null {
  return view.number('carrierFrequency')
    ?? nrArfcnToHz(view.number('nrArfcn') ?? view.number('pointAArfcn') ?? view.number('ssbArfcn') ?? -1)
    ?? gscnToHz(view.number('gscn') ?? -1);
}

/** The bandwidth table that holds for a side; null where its technology has none here. */
export function bandwidthTable(view: View): BandwidthTable | null {
  if (view.technology === 'lte') return 'lte';
  if (view.technology !== 'nr') return null;
  const hz = roughHz(view);
  const range = hz === null ? null : frequencyRange(hz);
  if (range !== null) return range === 'FR1' ? 'FR1' : 'FR2';
  const spacing = spacingHz(view) ?? 0;
  return spacing >= 120e3 || (view.number('channelBandwidth') ?? 0) > 100e6 || (view.number('band') ?? 0) > 256 ? 'FR2' : 'FR1';
}

/** Blocks that the side's channel bandwidth holds at most. */
export function blocksOfBandwidth(view: View): Statement | null {
  const table = bandwidthTable(view);
  const spacing = spacingHz(view);
  if (table === null || spacing === null) return null;
  return derivedFrom(stated(view, 'channelBandwidth', (hz) => maxResourceBlocks(table, spacing, hz)), 'the most that the channel bandwidth holds');
}

/** The channel that the side's blocks fill. */
export function bandwidthOfBlocksStated(view: View): Statement | null {
  const table = bandwidthTable(view);
  const spacing = spacingHz(view);
  if (table === null || spacing === null) return null;
  return derivedFrom(stated(view, 'resourceBlocks', (n) => bandwidthOfBlocks(table, spacing, n)), 'the channel that these blocks fill');
}

/** RF reference of the carrier, Hz. */
export function carrierStatements(view: View): Statement[] {
  const band = view.get('band')?.value ?? null;
  return present([
    stated(view, 'carrierFrequency'),
    stated(view, 'nrArfcn', nrArfcnToHz),
    stated(view, 'earfcn', earfcnToHz),
    stated(view, 'wifiChannel', (n) => wifiChannelHz(n, typeof band === 'string' || typeof band === 'number' ? band : null)),
    carrierFromPointA(view),
  ]);
}

/** Point A, the offset and half the blocks, all in the carrier's own spacing (TS 38.104 clause 5.4.2.2). */
function carrierFromPointA(view: View): Statement | null {
  const offset = view.number('offsetToCarrier');
  const blocks = view.number('resourceBlocks') ?? blocksOfBandwidth(view)?.value ?? null;
  const spacing = spacingHz(view);
  if (offset === null || blocks === null || spacing === null) return null;
  const how = `point A, ${offset} blocks of offset and half of ${blocks} blocks at ${spacing / 1e3} kHz`;
  return derivedFrom(stated(view, 'pointAArfcn', (n) => {
    const pointAHz = nrArfcnToHz(n);
    return pointAHz === null ? null : pointAHz + (12 * offset + 6 * blocks) * spacing;
  }), how);
}

/** SS_REF of the synchronisation block, Hz. */
export const ssbStatements = (view: View): Statement[] => present([
  stated(view, 'ssbFrequency'), stated(view, 'ssbArfcn', nrArfcnToHz), stated(view, 'gscn', gscnToHz),
]);

/** The guard interval in seconds, a fraction of the useful symbol included. */
export function guardS(view: View): Statement | null {
  const from = view.get('guardInterval');
  if (from === null) return null;
  if (typeof from.value === 'number') return { value: from.value, name: 'guardInterval', from, derived: false };
  const fraction = /^(\d+)\/(\d+)$/.exec(String(from.value));
  const spacing = spacingHz(view);
  if (fraction === null || spacing === null || Number(fraction[2]) === 0) return null;
  return { value: Number(fraction[1]) / Number(fraction[2]) / spacing, name: 'guardInterval', from, derived: true, how: `${from.value} of the useful symbol` };
}

/** The prefix in seconds that the side's word means at its spacing. */
export function prefixWordS(view: View): Statement | null {
  const from = view.get('cyclicPrefix');
  const word = view.text('cyclicPrefix');
  const spacing = spacingHz(view);
  const value = word === null ? null : prefixSeconds(view.technology, word, spacing);
  return from === null || value === null ? null : { value, name: 'cyclicPrefix', from, derived: true, how: `the ${word} prefix${spacing === null ? '' : ` at ${spacing / 1e3} kHz`}` };
}

function prefixSeconds(technology: string | null, word: string, spacing: number | null): number | null {
  if (technology === 'wifi' || (spacing !== null && isWifiSpacing(spacing))) return wifiPrefixS(word, spacing);
  if (spacing === null || (word !== 'normal' && word !== 'extended')) return null;
  return technology === 'nr' || technology === 'lte' ? cellularPrefixS(word, spacing) : null;
}

/** The word for the side's guard interval. */
export function prefixOfGuard(view: View): Statement<string> | null {
  const guard = guardS(view);
  if (guard === null) return null;
  const spacing = spacingHz(view);
  // A file that names no technology says by its spacing which words its guard intervals have.
  const isWifi = view.technology === 'wifi' || (view.technology === null && spacing !== null && isWifiSpacing(spacing));
  const word = isWifi ? wifiPrefixOf(guard.value, spacing) : spacing === null ? null : cellularPrefixOf(guard.value, spacing);
  return word === null ? null : { ...guard, value: word, derived: true, how: 'the guard interval at this spacing' };
}
