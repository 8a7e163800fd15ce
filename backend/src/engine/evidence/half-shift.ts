import type { AirValue } from '#shared/decode';
import { halfShiftOf } from '../lte/half-shift.js';
import type { BlindOfdm } from '../types.js';
import type { Look } from './look.js';

const SPACING_HZ = 15e3;
/** One standard deviation of a residue measured by the prefixes, as a part of the spacing. */
const SCATTER = 0.01;

/** The 7.5 kHz shift of an uplink without known signals; speaks only where no technology's own were found. */
export function halfShift({ source }: Look, blind: BlindOfdm): AirValue {
  if (Math.abs(blind.subcarrierSpacingHz / SPACING_HZ - 1) > 0.01 || blind.cyclicPrefix === null) return { value: null, reason: 'only symbols of 15 kHz are shifted' };
  return halfShiftOf({ residueHz: blind.grid.referenceHz, edgeHz: null, centreHz: source.centreFrequencyHz, scatterHz: SCATTER * SPACING_HZ });
}
