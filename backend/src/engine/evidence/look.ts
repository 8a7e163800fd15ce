import type { BlindOfdm, DetectionContext, SampleSource, TechnologyFinding, Tried } from '../types.js';
import type { CaptureFacts } from '#shared/decode';
import { detectNr } from '../nr/detect.js';
import { surveyLte } from '../lte/detect.js';
import { surveyWifi } from '../wifi/detect.js';
import { analyseOfdm, type BlindEstimate, type BlindResult } from '../sync/estimate.js';
import { chooseWindows, readWindow } from '../level/windows.js';
import { withoutDc } from '../level/without-dc.js';
import { spectrumOf, type SpectrumResult } from '../spectrum/spectrum.js';
import { welch } from '../spectrum/welch.js';
import type { Window } from '../types.js';
import { choose, type Choice } from './choose.js';

/** One reading of the samples: what stands out, what repeats, whose signals they are. */
export interface Look {
  /** Without a strong DC of the receiver, as is `window`. */
  readonly source: SampleSource;
  readonly facts: CaptureFacts;
  readonly window: Window;
  /** The window as it was recorded. */
  readonly raw: Window;
  readonly spectrum: SpectrumResult;
  readonly blind: BlindEstimate | null;
  readonly repetition: BlindResult;
  readonly findings: readonly TechnologyFinding[];
  readonly choice: Choice;
  readonly tried: readonly Tried[];
}

export interface LookOptions {
  /** What any OFDM's repetition showed, where that is known already. */
  readonly repetition?: BlindResult | undefined;
  readonly onProgress?: ((step: string, fraction: number) => void) | undefined;
}

/** The plain reading, from the cheapest to the dearest. */
export function look(source: SampleSource, facts: CaptureFacts, options: LookOptions): Look {
  const starts = chooseWindows(source);
  const raw = readWindow(source, starts[0]!);
  const flat = withoutDc(source, raw.iq);
  const window = flat === source ? raw : readWindow(flat, starts[0]!);
  const spectrum = seen(raw, window);
  const { occupied } = spectrum;
  options.onProgress?.('numerology', 0.1);
  const repetition = analyseOfdm(flat, { occupied });
  const blind = repetition.found;
  const context: DetectionContext = { source: flat, facts, occupied, blind, ...options };
  options.onProgress?.('synchronisation', 0.3);
  const { findings, tried } = survey(context);
  return { source: flat, facts, window, raw, spectrum, blind, repetition, findings, choice: choose(findings, blind), tried };
}

/** What stands out is told without the DC; the density that is drawn shows it. */
function seen(raw: Window, window: Window): SpectrumResult {
  const spectrum = spectrumOf(window.iq, window.sampleRateHz);
  return raw === window ? spectrum : { ...spectrum, density: welch(raw.iq, raw.sampleRateHz) };
}

interface Survey { findings: TechnologyFinding[]; tried: Tried[] }
type Detector = (context: DetectionContext) => { finding: TechnologyFinding | null; tried: readonly Tried[] };

const nr: Detector = (context) => {
  const finding = detectNr(context);
  return { finding, tried: finding?.tried ?? [{ what: 'NR', result: 'no synchronisation block found' }] };
};

/** A finding as sure as this ends the search: the others cannot be there too. */
const SURE = 0.95;

/** The technologies, likeliest first by what the blind look shows; ends at the first sure one. */
function survey(context: DetectionContext): Survey {
  const findings: TechnologyFinding[] = [];
  const tried: Tried[] = [];
  for (const detect of ordered(context.blind)) {
    const { finding, tried: notes } = detect(context);
    tried.push(...notes);
    if (finding) findings.push(finding);
    if (finding && finding.confidence >= SURE) break;
  }
  return { findings, tried };
}

/** Spacings of 60 kHz and more below the Wi-Fi ones are NR's alone; 312.5 kHz and its fractions are Wi-Fi's. */
function ordered(blind: BlindOfdm | null): Detector[] {
  const spacing = blind && blind.confidence > 0.9 ? blind.subcarrierSpacingHz : null;
  if (spacing === null) return [nr, surveyLte, surveyWifi];
  const wifi = [312.5e3, 156.25e3, 78.125e3, 39.0625e3].some((hz) => Math.abs(spacing / hz - 1) < 0.01);
  if (wifi) return [surveyWifi, nr, surveyLte];
  const wide = spacing > 25e3;
  return wide ? [nr, surveyWifi, surveyLte] : [nr, surveyLte, surveyWifi];
}
