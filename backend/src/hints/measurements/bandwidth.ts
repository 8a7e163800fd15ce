import type { AirValue, SettingValue } from '#shared/decode';
import { bandwidthOfBlocks, channelBandwidths, maxResourceBlocks, type BandwidthTable } from '../../snapshots/standards/bandwidths.js';
import { frequencyRange } from '../../snapshots/standards/nrRaster.js';
import { SCATTER } from '../priors.js';
import type { Measurement } from '../model.js';
import type { Evidence } from '../types.js';
import { categorical, certainty } from './likelihoods.js';
import { airNumber, airWord } from './numbers.js';

const MOST_BLOCKS = 275;
/** How often the outer blocks of a carrier stay empty for the whole of a capture (common practice). */
const UNFILLED = 0.1;

/** Channel bandwidths of a spacing, about (TS 38.104 table 5.3.2-1): a part of a carrier seldom has as many blocks as one of them. */
const CHANNELS = 12;

/**
 * Resource blocks announced in the broadcast, else those seen. Seen ones are a lower bound: power
 * outside the declared blocks refutes a declaration, empty outer blocks hardly do.
 */
export function resourceBlocks(evidence: Evidence): Measurement | null {
  const announced = evidence.announced['resourceBlocks'];
  if (typeof announced === 'number') return categorical({ value: announced, confidence: 0.999, method: 'announced in the broadcast' }, 6);
  const seen = airNumber(evidence, 'resourceBlocks');
  if (!seen) return occupancy(evidence, { blocksOf: (blocks) => blocks, settingOf: Math.round });
  const sure = certainty(seen.air);
  const whole = isWholeChannel(evidence, seen.value);
  const unfilled = whole ? UNFILLED / CHANNELS : UNFILLED;
  const density = (declared: number): number => {
    const core = Math.exp(-0.5 * ((declared - seen.value) / SCATTER.resourceBlocks) ** 2) / (SCATTER.resourceBlocks * Math.sqrt(2 * Math.PI));
    const partly = declared > seen.value ? unfilled / declared : 0;
    return sure * ((1 - unfilled) * core + partly) + (1 - sure) / MOST_BLOCKS;
  };
  return {
    value: seen.value,
    method: seen.air.method ?? null,
    // Whatever else the channel is, it is one of the few that the standard has.
    otherLogLikelihood: Math.log(whole ? density(seen.value) / CHANNELS : 1 / MOST_BLOCKS),
    logLikelihood: (setting) => Math.log(typeof setting === 'number' ? density(setting) : 1 / MOST_BLOCKS),
  };
}

/**
 * A channel must hold what is on the air: with a 99 % bandwidth W the channel is at least about
 * W, and in practice at most half as wide again (the share that guards take in the tables of
 * TS 38.104 clause 5.3.2 is 2 to 25 %). More than that is weak evidence, since a carrier need
 * not be filled.
 */
export function channelBandwidth(evidence: Evidence): Measurement | null {
  const frames = airNumber(evidence, 'channelBandwidthHz');
  if (frames) return ofFrames(frames.value, { air: frames.air, narrower: airWord(evidence, 'frameFormat') === 'legacy' ? NARROWER.legacy : NARROWER.data });
  return ofBlocks(evidence) ?? ofPower(evidence);
}

/** Through the blocks that the channel has at the spacing on the air; null where either is not known. */
function ofBlocks(evidence: Evidence): Measurement | null {
  const table = tableOf(evidence);
  const spacing = airNumber(evidence, 'subcarrierSpacingHz');
  if (!spacing || !table) return null;
  const blocksOf = (width: number): number | null => maxResourceBlocks(table, spacing.value, width);
  if (!airNumber(evidence, 'resourceBlocks') && evidence.announced['resourceBlocks'] === undefined) return occupancy(evidence, { blocksOf, settingOf: (filled) => channelOf(table, spacing.value, filled) });
  const blocks = resourceBlocks(evidence);
  const width = blocks && bandwidthOfBlocks(table, spacing.value, Number(blocks.value));
  if (!blocks || width === null) return null;
  return { ...blocks, value: width, logLikelihood: (setting) => blocks.logLikelihood(typeof setting === 'number' ? blocksOf(setting) : null) };
}

/** Scatter of the occupied bandwidth over that of the filled blocks, and how often a carrier is filled in part (common practice). */
const OCCUPANCY = { scatter: 0.02, partly: 0.15, other: 0.35 } as const;

/** A setting in resource blocks, and the setting that fills so many (not a whole number). */
interface InBlocks {
  readonly blocksOf: (setting: number) => number | null;
  readonly settingOf: (filledBlocks: number) => number;
}

/** The channel that so many filled blocks are, Hz; where none is near, their own width. */
function channelOf(table: BandwidthTable, spacingHz: number, filled: number): number {
  const near = channelBandwidths(table).find((width) => Math.abs(filled / (maxResourceBlocks(table, spacingHz, width) ?? Infinity) - 1) < 2 * OCCUPANCY.scatter);
  return near ?? 12 * filled * spacingHz;
}

/**
 * The power's extent against that of the blocks that a setting stands for. A filled carrier has 99 %
 * of its power in 99 % of its blocks; one that is filled in part is narrower, and none is wider.
 */
function occupancy(evidence: Evidence, { blocksOf, settingOf }: InBlocks): Measurement | null {
  const occupied = airNumber(evidence, 'occupiedBandwidthHz');
  const spacing = airNumber(evidence, 'subcarrierSpacingHz');
  if (!occupied || !spacing || !tableOf(evidence)) return null;
  const slip = (1 - certainty(occupied.air)) * OCCUPANCY.other;
  const filledBlocks = occupied.value / (0.99 * 12 * spacing.value);
  const density = (blocks: number): number => {
    const ratio = filledBlocks / blocks;
    const filled = Math.exp(-0.5 * ((ratio - 1) / OCCUPANCY.scatter) ** 2) / (OCCUPANCY.scatter * Math.sqrt(2 * Math.PI));
    return (1 - OCCUPANCY.partly) * filled + (ratio < 1 ? OCCUPANCY.partly : 0) + slip;
  };
  const likelihood = (setting: SettingValue): number => {
    const blocks = typeof setting === 'number' ? blocksOf(setting) : null;
    return Math.log(blocks === null ? OCCUPANCY.other : density(blocks));
  };
  return { value: settingOf(filledBlocks), method: `extent of the power: ${(occupied.value / 1e6).toFixed(2)} MHz hold 99 % of it`, logLikelihood: likelihood, otherLogLikelihood: Math.log(OCCUPANCY.other) };
}

function isWholeChannel(evidence: Evidence, blocks: number): boolean {
  const spacing = airNumber(evidence, 'subcarrierSpacingHz');
  const table = tableOf(evidence);
  return spacing !== null && table !== null && bandwidthOfBlocks(table, spacing.value, blocks) !== null;
}

function tableOf(evidence: Evidence): BandwidthTable | null {
  const technology = airWord(evidence, 'technology');
  if (technology === 'lte') return 'lte';
  if (technology !== 'nr') return null;
  const range = frequencyRange(evidence.capture?.centreFrequencyHz ?? Number.NaN);
  return range === null ? null : range === 'FR1' ? 'FR1' : 'FR2';
}

function ofPower(evidence: Evidence): Measurement | null {
  const occupied = airNumber(evidence, 'occupiedBandwidthHz');
  if (!occupied) return null;
  const width = occupied.value;
  return {
    value: width,
    method: occupied.air.method ?? null,
    otherLogLikelihood: Math.log(0.3),
    logLikelihood: (setting) => (typeof setting === 'number' ? Math.log(fit(setting / width)) : 0),
  };
}

/** How often all frames of a capture are narrower than their channel: legacy frames (beacons, control) mostly are, data frames hardly (common practice). */
const NARROWER = { legacy: 0.1, data: 0.015 } as const;

/** Channel of the frames seen: a wide channel also carries narrow frames, a narrow one no wide frames. */
function ofFrames(seen: number, { air, narrower }: { air: AirValue; narrower: number }): Measurement {
  const sure = certainty(air);
  const density = (declared: number): number => (Math.abs(declared / seen - 1) < 0.02 ? sure * (1 - narrower) : declared > seen ? narrower : 1 - sure);
  return { value: seen, method: air.method ?? null, otherLogLikelihood: Math.log(0.3), logLikelihood: (setting) => Math.log(typeof setting === 'number' ? density(setting) : 0.3) };
}

function fit(ratio: number): number {
  if (ratio < 0.97) return 0.001;
  return ratio <= 1.5 ? 1 : Math.max(0.05, 1.5 / ratio ** 3);
}
