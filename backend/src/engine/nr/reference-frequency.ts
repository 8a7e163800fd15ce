import type { BlindOfdm } from '../types.js';
import { BLOCK_PREFIX, blockSymbolS } from './block-grid.js';
import { BLOCK_SYMBOLS } from './block-layout.js';
import type { Cell } from './cell.js';
import { dataNumerologies, measurePrefix, type DataPrefix } from './data-prefix.js';
import type { FrequencyEstimate } from './frequency-fit.js';
import { numerologyOf } from './numerology.js';
import type { WorkSignal } from './work-signal.js';

/** The data's numerology at the block's slots, and SS_REF with the data's prefixes for help. */
export interface ReferenceFrequency {
  readonly estimate: FrequencyEstimate;
  readonly method: string;
  readonly data: DataPrefix | null;
}

/** Correlation below which no numerology is believed, in multiples of chance. */
const CLEAR = 5;
/** A leaking oscillator or a tone repeats at every lag alike: the right one stands out of the others. */
const AHEAD = 1.5;

/**
 * The numerology whose prefixes fit the slots best, the blind estimate's first where it is one of
 * them; null where none stands out.
 */
export function dataNumerology(work: WorkSignal, cell: Cell, { blind, centreHz }: { blind: BlindOfdm | null; centreHz: number | null }): DataPrefix | null {
  const all = dataNumerologies(cell.spacingHz, centreHz).filter(({ spacingHz }) => 16 * spacingHz <= work.rateHz);
  const frame = {
    subframeS: cell.frameStartS,
    blocks: cell.blocks.map(({ usefulS }) => ({ fromS: usefulS - BLOCK_PREFIX / cell.spacingHz, toS: usefulS + blockSymbolS(cell.spacingHz, BLOCK_SYMBOLS) })),
  };
  const measured = all.map((each) => measurePrefix(work, frame, each));
  const best = measured.reduce((a, b) => (b.correlation > a.correlation ? b : a));
  const rival = Math.max(...measured.filter((each) => each !== best).map((each) => each.correlation));
  if (best.correlation < CLEAR * best.chance || best.correlation < AHEAD * rival) return null;
  if (!blind || blind.confidence < 0.9) return best;
  const mu = numerologyOf(blind.subcarrierSpacingHz);
  const same = measured.find((each) => numerologyOf(each.spacingHz) === mu && each.extended === (blind.cyclicPrefix === 'extended'));
  return same && same.correlation > 0.7 * best.correlation ? same : best;
}

/**
 * SS_REF from inside the block's symbols, sharpened by the residue that the data's prefixes give:
 * the block's subcarriers lie whole units of the common grid from the data's (15 kHz in FR1, 60 kHz
 * above), and the block says which.
 */
export function referenceFrequency(work: WorkSignal, cell: Cell, data: DataPrefix | null): ReferenceFrequency {
  const own = { estimate: cell.reference, method: 'from inside the synchronisation block’s symbols', data };
  if (!data) return own;
  const unit = cell.spacingHz <= 30_000 ? 15_000 : 60_000;
  const residueHz = work.centreHz + data.residue.hz;
  const away = (cell.reference.hz - residueHz) / unit;
  const hz = residueHz + Math.round(away) * unit;
  const sigmaHz = Math.max(data.residue.sigmaHz, 1e-4 * data.spacingHz);
  const tolerance = 5 * Math.hypot(cell.reference.sigmaHz, sigmaHz) + 0.01 * cell.spacingHz;
  if (Math.abs(hz - cell.reference.hz) > tolerance || sigmaHz > unit / 10) return own;
  const a = 1 / sigmaHz ** 2;
  const b = 1 / cell.reference.sigmaHz ** 2;
  return {
    estimate: { hz: (a * hz + b * cell.reference.hz) / (a + b), sigmaHz: 1 / Math.sqrt(a + b) },
    method: 'from inside the synchronisation block’s symbols and from the data’s cyclic prefixes',
    data,
  };
}
