import type { AirValue } from '#shared/decode';
import type { BlindOfdm } from '../types.js';
import type { Look } from './look.js';

const SHIFT_HZ = 7500;
/** A terminal's 0.1 ppm (TS 36.101 and 38.101-1 clause 6.5.1) and 2 ppm of a recorder that states none. */
const CLOCKS_PPM = 2.1;
/** One standard deviation of a residue measured by the prefixes, as a part of the spacing. */
const SCATTER = 0.01;

/**
 * Half a subcarrier between the stated centre and the middle of the carrier (LTE uplink, TS 36.211
 * clause 5.6; NR uplink, TS 38.104 clause 5.4.2.1), from the residue of the subcarriers modulo
 * 15 kHz. Null where the clocks' error could make the one look like the other. Speaks only where
 * no downlink synchronisation was found.
 */
export function halfShift({ source }: Look, blind: BlindOfdm): AirValue {
  const centre = source.centreFrequencyHz;
  if (Math.abs(blind.subcarrierSpacingHz / 15e3 - 1) > 0.01 || blind.cyclicPrefix === null) return absent('only symbols of 15 kHz are shifted');
  if (centre === null) return absent('the recording does not state its centre');
  const residue = Math.abs(blind.grid.referenceHz - 15e3 * Math.round(blind.grid.referenceHz / 15e3));
  const limit = CLOCKS_PPM * 1e-6 * centre + 3 * SCATTER * 15e3;
  const [plain, shifted] = [residue <= limit, SHIFT_HZ - residue <= limit];
  if (plain === shifted) return absent('the clocks\' error leaves open whether the residue is a shift');
  const doubt = Math.exp(-0.5 * ((plain ? SHIFT_HZ - residue : residue) / (limit / 3)) ** 2);
  return { value: shifted, confidence: Math.min(0.97, 1 - doubt), method: `subcarriers lie ${(residue / 1e3).toFixed(2)} kHz off the stated centre modulo 15 kHz` };
}

function absent(reason: string): AirValue {
  return { value: null, reason };
}
