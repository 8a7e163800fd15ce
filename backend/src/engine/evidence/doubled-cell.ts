import { syncRasterDistanceHz } from '../nr/raster.js';
import type { Look } from './look.js';
import type { RateSuspicion } from './rate-label.js';

/**
 * A cell of 15 kHz decodes at twice its rate too, as one of 30 kHz, and the other way round. What gives
 * it away: its block then stands at twice its distance from the tuner, off the raster, and its MIB
 * announces a common spacing that its data do not have.
 */

/** Parts per million by which one reading's block has to stand nearer to its raster than the other's. */
const NEARER_PPM = 3;
/** Beyond this no clock of a working link explains a block beside its raster; within the other it stands on it. */
const OFF_PPM = 6;
const ON_PPM = 4;
/** Ratios of a rate to its label under which a cellular spacing stays one. */
export const DOUBLINGS = [1 / 2, 2];

/** True where the reading as labelled decodes and stands nearer to the synchronisation raster. */
export function standsBetter(plain: Look, other: Look): boolean {
  const here = offRasterPpm(blockHz(plain));
  const there = offRasterPpm(blockHz(other));
  return here !== null && (there === null || here + NEARER_PPM < there);
}

/** The rate under which a decoded cell would stand on the raster, where as labelled it neither does nor fits its own MIB. */
export function misfitOf(plain: Look): RateSuspicion | null {
  const off = offRasterPpm(blockHz(plain));
  const centreHz = plain.source.centreFrequencyHz;
  const offset = plain.choice.finding?.air['ssbOffsetHz']?.value;
  if (off === null || off < OFF_PPM || fitsItsMib(plain) || centreHz === null || typeof offset !== 'number') return null;
  const ratio = DOUBLINGS.find((r) => offRasterPpm(centreHz + r * offset)! < ON_PPM);
  if (ratio === undefined) return null;
  const away = syncRasterDistanceHz(blockHz(plain)!) / 1e3;
  return { ratio, proof: `at the stated rate the cell's block stands ${away.toFixed(1)} kHz beside the synchronisation raster and its MIB announces another spacing than the data have; at ${ratio} times the rate both fit` };
}

/** The MIB's common spacing is that of the data; false where either is not known. */
export function fitsItsMib({ choice }: Look): boolean {
  const mib = choice.finding?.air['mib']?.value;
  const common = mib !== null && typeof mib === 'object' && !Array.isArray(mib) ? mib['subCarrierSpacingCommonHz'] : undefined;
  return typeof common === 'number' && common === choice.finding?.grid?.subcarrierSpacingHz;
}

const HIGHEST_FR1_HZ = 7.125e9;
const WIDEST_FR1_HZ = 30e3;

/** False where a block's spacing is none of its frequency range (TS 38.104 table 5.4.3.3-1: 15 and 30 kHz in FR1). */
export function inItsRange({ choice, source }: Look): boolean {
  const spacing = choice.finding?.air['ssbSubcarrierSpacingHz']?.value;
  return typeof spacing !== 'number' || source.centreFrequencyHz === null || source.centreFrequencyHz > HIGHEST_FR1_HZ || spacing <= WIDEST_FR1_HZ;
}

/** Where a cell's block was received, Hz; null without a decoded MIB, or without a stated centre. */
function blockHz({ choice }: Look): number | null {
  const block = choice.finding?.air['ssbFrequencyHz']?.value;
  return choice.finding?.air['mib']?.value == null || typeof block !== 'number' ? null : block;
}

function offRasterPpm(hz: number | null): number | null {
  return hz === null ? null : (1e6 * syncRasterDistanceHz(hz)) / hz;
}
