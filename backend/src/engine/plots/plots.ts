import type { AirValue, Demodulation, Plots } from '#shared/decode';
import type { Look } from '../evidence/look.js';
import { spectrumCurve } from '../spectrum/spectrum.js';

/** What the issue page draws: the spectrum, the prefix correlation, and the constellation under each setting. */
export function plotsOf(look: Look, demodulated: readonly Demodulation[]): Plots {
  return { spectrum: spectrumCurve(look.spectrum), prefixCorrelation: look.repetition.prefixCorrelation, demodulations: [...demodulated] };
}

/** Where no known symbols gave an error, the data's against one fixed order does. */
export function errorOfData(demodulated: readonly Demodulation[]): Record<string, AirValue> {
  const own = demodulated.find((d) => d.under === 'air');
  if (!own || own.evmPercent === null || !own.closes) return {};
  const method = `the data against one fixed order (${own.order})`;
  return { evmPercent: { value: own.evmPercent, confidence: 0.8, method }, ...(own.evmRandomPercent !== null && { evmRandomPercent: { value: own.evmRandomPercent, method: `random points against ${own.order}` } }) };
}
