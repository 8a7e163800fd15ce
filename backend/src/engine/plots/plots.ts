import type { Plots } from '#shared/decode';
import type { AnalyseOptions } from '../analyse.js';
import type { Look } from '../evidence/look.js';
import { spectrumCurve } from '../spectrum/spectrum.js';

/** What the issue page draws: the spectrum, the prefix correlation, and the constellation under each setting. */
export function plotsOf(look: Look, _options: AnalyseOptions): Plots {
  return { spectrum: spectrumCurve(look.spectrum), prefixCorrelation: look.repetition.prefixCorrelation, demodulations: [] };
}
