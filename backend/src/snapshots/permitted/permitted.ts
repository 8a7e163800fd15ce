import type { NotPermitted } from '../types.js';
import type { View } from '../compare/view.js';
import { dataSpacing, extendedPrefix, ltePrefix, lteSpacing, ssbSpacing, wifiGuard } from './numerology.js';
import { ranges } from './ranges.js';
import { blockInBand, carrierInBand, channelNumber, duplexOfBand, lteChannel, synchronisationChannel } from './raster.js';
import { tddPattern } from './tdd.js';
import { width } from './width.js';

/** Checks that need one side only, in the order in which they are reported. None flags what a standard allows. */
const BOTH_DIRECTIONS = [extendedPrefix, dataSpacing, lteSpacing, ltePrefix, width, channelNumber, carrierInBand, lteChannel];
const ONCE = [ssbSpacing, synchronisationChannel, blockInBand, duplexOfBand, tddPattern, wifiGuard];

/** What the standards do not allow in a side's settings of one direction. */
export function notPermittedIn(view: View): NotPermitted[] {
  const checks = view.direction === 'downlink' ? [...BOTH_DIRECTIONS, ...ONCE] : BOTH_DIRECTIONS;
  const found = checks.flatMap((check) => check(view));
  const inRange = ranges(view).filter((r) => view.direction === 'downlink' || r.parameter.startsWith('uplink'));
  return [...found, ...inRange].filter((f, i, all) => all.findIndex((g) => g.parameter === f.parameter) === i);
}
