import type { ComparisonRow } from '#shared/decode';
import { carrierFrequency, carrierPeriodHz, folded, ssbFrequency } from '../measurements/carrier.js';
import { SCATTER } from '../priors.js';
import type { Evidence } from '../types.js';
import { declaredBy } from './basis.js';

/** Measured minus declared, Hz; `blockHz` is where the synchronisation block was received, if the shift is the block's. */
export interface Shift { readonly hz: number; readonly fc: number; readonly blockHz: number | null }

/** How far the signal stands from where it was declared; null where nothing is declared or measured. */
export function shiftFromDeclared(evidence: Evidence): Shift | null {
  const ofCarrier = carrierShift(evidence);
  const ofBlock = blockShift(evidence);
  if (!ofBlock) return ofCarrier;
  if (!ofCarrier) return carrierFrequency(evidence) ? null : ofBlock;
  // A clock moves both alike; of a carrier whose grid was not placed only the residue is seen.
  const alike = ofCarrier.periodHz !== null && Math.abs(folded(ofBlock.hz - ofCarrier.hz, ofCarrier.periodHz)) < 3 * SCATTER.ssbFrequencyHz;
  return alike ? ofBlock : ofCarrier;
}

function carrierShift(evidence: Evidence): Shift & { periodHz: number | null } | null {
  const row = carrierRow(evidence);
  const measured = carrierFrequency(evidence);
  if (!row || !measured) return null;
  const periodHz = carrierPeriodHz(evidence);
  const hz = nearest(row, Number(measured.value), (away) => (periodHz ? folded(away, periodHz) : away));
  return hz === null ? null : { hz, fc: Number(measured.value), blockHz: null, periodHz };
}

function blockShift(evidence: Evidence): Shift | null {
  const row = evidence.comparison.rows.find((r) => r.parameter === 'ssbFrequency');
  const measured = ssbFrequency(evidence);
  if (!row || row.verdict === 'differ' || !measured) return null;
  const blockHz = Number(measured.value);
  const hz = nearest(row, blockHz, (away) => away);
  return hz === null ? null : { hz, fc: blockHz, blockHz };
}

/** From the nearest of the declared values, Hz. */
function nearest(row: ComparisonRow, measuredHz: number, fold: (away: number) => number): number | null {
  const shifts = declaredBy(row).map((side) => measuredHz - Number(row[side]!.value)).filter(Number.isFinite).map(fold).sort((x, y) => Math.abs(x) - Math.abs(y));
  return shifts[0] ?? null;
}

/**
 * The row of the direction that was captured. An uplink capture is not held against a carrier far
 * outside it: without a name of its own that is the downlink's.
 */
export function carrierRow(evidence: Evidence): ComparisonRow | null {
  const named = (name: string): ComparisonRow | null => evidence.comparison.rows.find((r) => r.parameter === name) ?? null;
  const plain = named('carrierFrequency');
  if (evidence.air['direction']?.value !== 'uplink') return plain;
  const own = named('uplinkCarrierFrequency');
  const centre = evidence.capture?.centreFrequencyHz ?? 0;
  const far = (row: ComparisonRow): boolean => declaredBy(row).every((side) => Math.abs(Number(row[side]!.value) - centre) > (evidence.capture?.sampleRateHz ?? 0));
  return own ?? (plain && !far(plain) ? plain : null);
}
