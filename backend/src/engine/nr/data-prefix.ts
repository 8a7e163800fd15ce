import { numerologyOf, prefixTs, TS_HZ, usefulStartTs } from './numerology.js';
import type { FrequencyEstimate } from './frequency-fit.js';
import type { WorkSignal } from './work-signal.js';

/** How well the prefixes of a numerology fit the slots that the block's timing gives. */
export interface DataPrefix {
  readonly spacingHz: number;
  readonly extended: boolean;
  /** |Σ r*(t)·r(t+T)| over the prefixes against the power in them, 0 to 1: S/(S+N) for the right one. */
  readonly correlation: number;
  /** The same of what chance gives: about 1/√samples. */
  readonly chance: number;
  /** Frequency of the band's middle modulo the spacing, Hz in the work signal. */
  readonly residue: FrequencyEstimate;
}

/** Share of each prefix that is left out at its start, where the last symbol's echoes are. */
const SKIPPED = 0.3;

/** What is known of the frame: the start of any subframe in the capture, and the spans that hold synchronisation blocks, s. */
export interface FrameTimes {
  readonly subframeS: number;
  readonly blocks: readonly { readonly fromS: number; readonly toS: number }[];
}

/**
 * Prefix correlation of a numerology at known times. Symbols that meet a synchronisation block
 * are left out: the block's own prefixes say nothing of the data's.
 */
export function measurePrefix(work: WorkSignal, frame: FrameTimes, { spacingHz, extended }: { spacingHz: number; extended: boolean }): DataPrefix {
  const mu = numerologyOf(spacingHz)!;
  const size = work.rateHz / spacingHz;
  const perHalf = (extended ? 6 : 7) * 2 ** mu;
  const samples = work.iq.length / 2;
  const sums: { re: number; im: number }[] = [];
  let power = 0;
  let counted = 0;
  const startS = frame.subframeS - work.startS;
  const firstHalf = Math.ceil(-startS / 0.0005);
  for (let half = firstHalf; ; half++) {
    if ((startS + (half + 1) * 0.0005) * work.rateHz + size > samples) break;
    const sum = { re: 0, im: 0 };
    for (let l = 0; l < perHalf; l++) {
      const usefulS = startS + half * 0.0005 + usefulStartTs(mu, l, extended) / TS_HZ;
      if (meetsBlock(frame, work.startS + usefulS, 1 / spacingHz)) continue;
      const useful = usefulS * work.rateHz;
      const prefix = (prefixTs(mu, l, extended) / TS_HZ) * work.rateHz;
      const from = Math.max(0, Math.ceil(useful - prefix * (1 - SKIPPED)));
      for (let n = from; n < Math.floor(useful); n++) {
        const a = work.iq[2 * n];
        const b = work.iq[2 * n + 1];
        const c = work.iq[2 * (n + size)];
        const d = work.iq[2 * (n + size) + 1];
        sum.re += a * c + b * d;
        sum.im += a * d - b * c;
        power += (a * a + b * b + c * c + d * d) / 2;
        counted++;
      }
    }
    sums.push(sum);
  }
  const re = sums.reduce((total, each) => total + each.re, 0);
  const im = sums.reduce((total, each) => total + each.im, 0);
  const strength = Math.hypot(re, im);
  return {
    spacingHz,
    extended,
    correlation: power > 0 ? strength / power : 0,
    chance: counted > 0 ? 1 / Math.sqrt(counted) : 1,
    residue: { hz: (Math.atan2(im, re) / (2 * Math.PI)) * spacingHz, sigmaHz: (scatter(sums, { re, im }) / (2 * Math.PI)) * spacingHz },
  };
}

function meetsBlock({ blocks }: FrameTimes, usefulS: number, lengthS: number): boolean {
  return blocks.some(({ fromS, toS }) => usefulS < toS && usefulS + lengthS > fromS);
}

/** Standard deviation of the total's phase, from how the half-subframes differ. */
function scatter(sums: readonly { re: number; im: number }[], { re, im }: { re: number; im: number }): number {
  const strength = Math.hypot(re, im) + 1e-300;
  let across = 0;
  for (const sum of sums) across += ((sum.im * re - sum.re * im) / strength) ** 2;
  return sums.length < 3 ? Math.PI : Math.sqrt(across) / strength;
}

/** Where FR2-2 begins, Hz (TS 38.104 Table 5.1-1). */
const FR2_2_HZ = 52.6e9;

/** Numerologies that data may have beside a block of a spacing (TS 38.331: FR1, FR2-1, FR2-2); a block of 120 kHz may be either range's where the centre is not known. */
export function dataNumerologies(blockSpacingHz: number, centreHz: number | null): { spacingHz: number; extended: boolean }[] {
  const normal = spacingsBeside(blockSpacingHz, centreHz).map((spacingHz) => ({ spacingHz, extended: false }));
  return normal.some(({ spacingHz }) => spacingHz === 60_000) ? [...normal, { spacingHz: 60_000, extended: true }] : normal;
}

function spacingsBeside(blockSpacingHz: number, centreHz: number | null): readonly number[] {
  if (blockSpacingHz <= 30_000) return [15_000, 30_000, 60_000];
  const upper = [120_000, 480_000, 960_000];
  if (blockSpacingHz > 240_000) return upper;
  if (blockSpacingHz === 240_000 || (centreHz !== null && centreHz < FR2_2_HZ)) return [60_000, 120_000];
  return centreHz === null ? [60_000, ...upper] : upper;
}
