import type { BlindOfdm } from '../types.js';
import type { WindowPlan } from './block-search.js';
import { numerologyOf, prefixTs, TS_HZ, usefulStartTs, usefulTs } from './numerology.js';
import type { WorkSignal } from './work-signal.js';

/** Time after which the search looks at what it has: a half frame. */
const PART_S = 0.005;
/** Blind estimates below this confidence do not narrow the search. */
const TRUSTED = 0.6;

/**
 * Where to look for a block's first symbol: at the symbol starts that the blind estimate gives,
 * where it is trusted and settles them for this spacing, else everywhere in steps of a quarter of
 * a symbol (half a symbol where `sparse`).
 */
export function planWindows(work: WorkSignal, spacingHz: number, { blind, sparse, sampleRateHz }: { blind: BlindOfdm | null; sparse: boolean; sampleRateHz: number }): WindowPlan & { everywhere: boolean } {
  const starts = blind && blind.confidence >= TRUSTED ? startsFromGrid(work, spacingHz, { blind, sampleRateHz }) : null;
  return starts ? { parts: inParts(starts, work), everywhere: false } : { parts: inParts(everywhere(work, spacingHz, sparse ? 2 : 4), work), everywhere: true };
}

function everywhere(work: WorkSignal, spacingHz: number, perSymbol: number): number[][] {
  const size = work.rateHz / spacingHz;
  const samples = work.iq.length / 2;
  const groups: number[][] = [];
  for (let at = 0; at + size <= samples; at += size) {
    groups.push(Array.from({ length: perSymbol }, (_, i) => Math.round(at + (i * size) / perSymbol)));
  }
  return groups;
}

function inParts(groups: readonly number[][], work: WorkSignal): number[][][] {
  const parts: number[][][] = [];
  for (const group of groups) {
    const part = Math.max(0, Math.floor(group[0] / work.rateHz / PART_S));
    (parts[part] ??= []).push(group);
  }
  return parts.filter(Boolean);
}

/**
 * Starts of the symbols of a spacing from the data's grid: the same symbols where the spacings
 * agree, else those that share its half-subframe. A block of wider symbols may start at each
 * symbol of the data, since the grid's longer symbol may be misplaced. Null where the data's grid
 * does not settle them (extended prefix, spacings outside the numerologies).
 */
function startsFromGrid(work: WorkSignal, spacingHz: number, { blind, sampleRateHz }: { blind: BlindOfdm; sampleRateHz: number }): number[][] | null {
  const mu = numerologyOf(spacingHz);
  const dataMu = numerologyOf(blind.subcarrierSpacingHz);
  if (mu === null || dataMu === null) return null;
  const halfS = 0.0005;
  const { prefixSamples } = blind.grid;
  if (prefixSamples.length !== 7 * 2 ** dataMu || blind.cyclicPrefix !== 'normal') return null;
  const originS = blind.grid.startSample / sampleRateHz;
  const shifts = dataMu > mu ? Array.from({ length: 2 ** (dataMu - mu) }, (_, j) => (j * (usefulTs(dataMu) + prefixTs(dataMu, 1))) / TS_HZ) : [0];
  const back = prefixTs(mu, 1) / 2;
  const lastS = work.startS + work.iq.length / 2 / work.rateHz;
  const groups: number[][] = [];
  for (let half = Math.floor((work.startS - originS) / halfS) - 1; originS + half * halfS < lastS; half++) {
    for (let l = 0; l < 7 * 2 ** mu; l++) {
      const atS = originS + half * halfS + (usefulStartTs(mu, l) - back) / TS_HZ - work.startS;
      const group = shifts.map((shift) => Math.round((atS + shift) * work.rateHz)).filter((sample) => sample >= 0);
      if (group.length > 0) groups.push(group);
    }
  }
  return groups;
}
