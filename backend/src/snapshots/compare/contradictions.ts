import type { ParameterName } from '#shared/parameters';
import type { HintCode, Side } from '#shared/vocabulary';
import type { Contradiction } from '../types.js';
import { carrierStatements, guardS, prefixWordS, spacingHz, spacingStatements, ssbStatements, type Statement } from './derive.js';
import { sameDuration } from '../standards/numerology.js';
import { frequencyRange } from '../standards/nrRaster.js';
import { transformContradiction } from './transform.js';
import type { View } from './view.js';

type Found = Omit<Contradiction, 'side'>;

/** Statements of one snapshot that cannot both hold. */
export function contradictionsIn(view: View, side: Side): Contradiction[] {
  const found = [...twice(view), ...transform(view), ...transformTooSmall(view), ...prefix(view), ...blockOnGrid(view)]
    .map((c) => ({ side, ...c, parameters: c.parameters.map((p) => view.named(p)) }));
  // What has no direction is looked at once.
  return view.direction === 'downlink' ? found : found.filter((c) => c.parameters.some((p) => p.startsWith('uplink')));
}

/** One quantity stated twice, in words that do not say the same. */
function twice(view: View): Found[] {
  const spacings = spacingStatements(view).filter((s) => s.name !== 'fftSize' && s.name !== 'technology');
  return [
    ...unequal(spacings, { code: 'subcarrier-spacing', within: 1, say: (s) => `${s.value / 1e3} kHz` }),
    ...unequal(carrierStatements(view), { code: 'carrier-frequency', within: 2500, say: (s) => `${s.value / 1e6} MHz` }),
    ...unequal(ssbStatements(view), { code: 'ssb-placement', within: 2500, say: (s) => `${s.value / 1e6} MHz` }),
  ];
}

interface Limits { readonly code: HintCode; readonly within: number; readonly say: (s: Statement) => string }

function unequal(statements: readonly Statement[], { code, within, say }: Limits): Found[] {
  const [first, ...rest] = statements;
  const other = first === undefined ? undefined : rest.find((s) => Math.abs(s.value - first.value) > within);
  if (first === undefined || other === undefined) return [];
  return [{ parameters: [first.name, other.name], code, note: `${first.from.path} says ${say(first)}, ${other.from.path} says ${say(other)}` }];
}

function transform(view: View): Found[] {
  const found = view.direction === 'uplink' ? null : transformContradiction(view);
  if (found === null) return [];
  const { stated, implied, culprit } = found;
  return [{ parameters: [culprit, culprit === 'fftSize' ? 'sampleRate' : 'fftSize'], code: culprit === 'fftSize' ? 'fft-size' : 'sample-rate', note: `sample rate and transform size imply ${Number((implied / 1e3).toFixed(4))} kHz, but ${stated / 1e3} kHz is stated` }];
}

/** A transform must have a point for every subcarrier (TS 38.211 clause 5.3.1). */
function transformTooSmall(view: View): Found[] {
  const [size, blocks] = [view.number('fftSize'), view.number('resourceBlocks')];
  if (view.direction === 'uplink' || size === null || blocks === null || size >= 12 * blocks) return [];
  return [{ parameters: ['fftSize', 'resourceBlocks'], code: 'fft-size', note: `a transform of ${size} points cannot carry the ${12 * blocks} subcarriers of ${blocks} blocks` }];
}

function prefix(view: View): Found[] {
  const [word, guard] = [prefixWordS(view), guardS(view)];
  if (word === null || guard === null || sameDuration(word.value, guard.value)) return [];
  return [{ parameters: ['cyclicPrefix', 'guardInterval'], code: 'cyclic-prefix', note: `${word.how ?? 'the prefix'} is ${us(word.value)}, but ${us(guard.value)} is stated` }];
}

const us = (s: number): string => `${Number((s * 1e6).toFixed(4))} us`;

/**
 * In FR1 the block lies k_SSB subcarriers of 15 kHz above a block edge of the common grid, so that
 * its distance from point A (or the carrier's edge) is k_SSB modulo 12 (TS 38.211 clause 7.4.3.1).
 */
function blockOnGrid(view: View): Found[] {
  const [ssb, kSsb, ssbSpacing] = [ssbStatements(view)[0], view.get('kSsb'), view.number('ssbSubcarrierSpacing')];
  const edge = gridEdge(view);
  if (view.direction === 'uplink' || ssb === undefined || typeof kSsb?.value !== 'number' || kSsb.value > 23 || ssbSpacing === null || edge === null) return [];
  if (frequencyRange(ssb.value) !== 'FR1') return [];
  const distance = (ssb.value - 120 * ssbSpacing - edge.hz) / 15e3;
  const possible = kSsb.lowBitsOnly === true ? [kSsb.value, kSsb.value + 16] : [kSsb.value];
  const fits = Math.abs(distance - Math.round(distance)) < 0.05 && possible.some((k) => modulo(Math.round(distance) - k, 12) === 0);
  if (fits) return [];
  return [{ parameters: ['kSsb', ssb.name, edge.name], code: 'ssb-placement', note: `the block lies ${Number(modulo(distance, 12).toFixed(2))} subcarriers of 15 kHz above a block edge of the carrier, but k_SSB is ${kSsb.value}` }];
}

const modulo = (n: number, m: number): number => ((n % m) + m) % m;

function gridEdge(view: View): { hz: number; name: ParameterName } | null {
  const pointA = carrierStatements(view).find((s) => s.name === 'pointAArfcn');
  const [carrier, blocks, spacing] = [pointA ?? carrierStatements(view)[0], view.number('resourceBlocks'), spacingHz(view)];
  return carrier === undefined || blocks === null || spacing === null ? null : { hz: carrier.value - 6 * blocks * spacing, name: carrier.name };
}
