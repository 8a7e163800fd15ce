import type { BlindOfdm } from '../types.js';
import { BLOCK_SUBCARRIERS } from './block-layout.js';
import { BLOCK_SPACINGS_HZ } from './block-pattern.js';
import { numerologyOf } from './numerology.js';

/** Block spacings that go with a data spacing: TS 38.331 allows these on one carrier's band (FR1, FR2-1, FR2-2). */
const WITH_DATA: readonly (readonly number[])[] = [
  [15_000, 30_000],
  [30_000, 15_000],
  [30_000, 15_000, 120_000, 240_000],
  [120_000, 240_000, 480_000, 960_000],
  [240_000],
  [480_000, 120_000],
  [960_000, 120_000],
];

/** Trust in the blind estimate from which other spacings are left out. */
const TRUSTED = 0.9;

/**
 * Block spacings worth a search, likeliest first: those that fit the band, the frequency range
 * (where the centre is stated) and the data's spacing (where it is known well: none for a
 * spacing that NR does not have).
 */
export function blockSpacings({ sampleRateHz, centreHz, blind }: { sampleRateHz: number; centreHz: number | null; blind: BlindOfdm | null }): number[] {
  const fits = BLOCK_SPACINGS_HZ.filter((spacing) => BLOCK_SUBCARRIERS * spacing <= sampleRateHz);
  if (blind && blind.confidence >= TRUSTED) {
    const mu = numerologyOf(blind.subcarrierSpacingHz);
    return mu === null ? [] : WITH_DATA[mu].filter((spacing) => fits.includes(spacing));
  }
  if (centreHz === null) return fits;
  if (centreHz >= 24.25e9) return fits.filter((spacing) => spacing >= 120_000);
  const lower = fits.filter((spacing) => spacing <= 30_000);
  return centreHz > 3e9 ? lower.reverse() : lower;
}
