import type { AirValue } from '#shared/decode';

const SPACING_HZ = 15e3;
const SHIFT_HZ = 7500;
/** ±2 ppm for a recorder that does not say, ±0.1 ppm for a terminal (TS 36.101 and TS 38.101-1 clause 6.5.1). */
const CLOCKS_PPM = 2.1;
/** Part of the clocks' tolerance over which their likelihood falls off: a limit is kept, but not to the hertz. */
const EDGE = 0.04;
const LEAST_CONFIDENCE = 0.9;
/** Carriers stand on whole 100 kHz (TS 36.104 clause 5.7.2, TS 38.104 clause 5.4.2.3 below 3 GHz), of which 15 kHz leave 5 kHz. */
const RASTER_HZ = 5e3;
/** A resource block has twelve subcarriers, a carrier an even or odd number of blocks about its middle (TS 36.211 clause 5.2.1). */
const HALF_BLOCK_HZ = 6 * SPACING_HZ;

export interface ShiftQuestion {
  /** A subcarrier's frequency against the stated centre, Hz; modulo 15 kHz where `edgeHz` is null. */
  readonly residueHz: number;
  /** The lowest subcarrier in use against the stated centre, Hz; null where no block's edge is known. */
  readonly edgeHz: number | null;
  /** Stated centre, Hz; null where the recording does not say. */
  readonly centreHz: number | null;
  /** One standard deviation of `residueHz`. */
  readonly scatterHz: number;
}

/**
 * Half a subcarrier between the carrier's middle and its subcarriers (LTE uplink, TS 36.211 clause
 * 5.6; NR uplink, TS 38.104 clause 5.4.2.1). The middle is the stated centre, or, for a recorder
 * tuned beside it, some carrier of the raster; both explanations are weighed. Null where the
 * clocks' error makes the one look like the other.
 */
export function halfShiftOf(question: ShiftQuestion): AirValue {
  const { centreHz, residueHz, scatterHz } = question;
  if (centreHz === null) return { value: null, reason: 'the capture\'s centre is not stated' };
  const tolerance = CLOCKS_PPM * 1e-6 * centreHz + 3 * scatterHz;
  const folded = residueHz - SPACING_HZ * Math.round(residueHz / SPACING_HZ);
  const method = `subcarriers ${Math.round(folded)} Hz beside the stated centre's raster of 15 kHz, ${Math.round(fromRaster(centreHz + residueHz))} Hz beside that of 100 kHz carriers, clocks' tolerance ${Math.round(tolerance)} Hz`;
  const [plain, shifted] = [0, SHIFT_HZ].map((shift) => likelihood(question as ShiftQuestion & { centreHz: number }, shift, tolerance)) as [number, number];
  const confidence = Math.max(plain, shifted) / (plain + shifted);
  if (!(confidence > LEAST_CONFIDENCE)) return { value: null, reason: `${method}: an offset explains it as well` };
  return { value: shifted > plain, confidence: Math.min(0.98, confidence), method };
}

function fromRaster(hz: number): number {
  return hz - RASTER_HZ * Math.round(hz / RASTER_HZ);
}

/**
 * How well a shift explains the place, as a density: with the carrier at the stated centre, which
 * then is one of the raster (an edge lies whole half blocks away, unless it is faded); beside the
 * centre, on the raster; or anywhere.
 */
function likelihood({ residueHz, edgeHz, centreHz }: ShiftQuestion & { centreHz: number }, shift: number, tolerance: number): number {
  const cells = (period: number) => HALF_BLOCK_HZ / period;
  const isCarrier = Math.abs(fromRaster(centreHz)) < 1 ? 1 : 0.02;
  const atCentre = within(residueHz - shift, SPACING_HZ, tolerance) / cells(SPACING_HZ);
  const edged = edgeHz === null ? atCentre : within(edgeHz - shift, HALF_BLOCK_HZ, tolerance);
  const onRaster = within(centreHz + residueHz - shift, RASTER_HZ, tolerance) / cells(RASTER_HZ);
  return isCarrier * (0.45 * edged + 0.1 * atCentre) + 0.4 * onRaster + (0.02 * tolerance) / HALF_BLOCK_HZ;
}

/** Even within the tolerance, falling off beyond it; 1 at the middle. */
function within(distance: number, period: number, tolerance: number): number {
  const away = Math.abs(distance - period * Math.round(distance / period));
  return 1 / (1 + Math.exp((away - tolerance) / (EDGE * tolerance)));
}
