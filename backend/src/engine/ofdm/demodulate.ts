import type { Curve, Demodulation } from '#shared/decode';
import { activity } from '../level/activity.js';
import { chooseWindows, readWindow } from '../level/windows.js';
import { spectrumOf } from '../spectrum/spectrum.js';
import { prepare } from '../sync/prepare.js';
import { locate } from '../sync/locate.js';
import type { SampleSource, SymbolGrid, Window } from '../types.js';
import { activeCells, type Cells } from './cells.js';
import { evmPercent, openness, randomEvmPercent, squaredError, type Order } from './constellation.js';
import { blindEqualiser, byDecisions, type Equaliser } from './equalise.js';
import { blocksOf, decideOrder, pointsAt } from './points.js';
import { patternOf, type DemodulationSettings } from './settings.js';
import { symbolsOf, type Symbols } from './symbols.js';

export interface DemodulateOptions {
  readonly under: 'a' | 'b' | 'air';
  readonly occupied?: { readonly lowHz: number; readonly highHz: number } | null;
  /** Signal-on stretches, samples of the capture. */
  readonly segments?: readonly { readonly start: number; readonly end: number }[];
  /** One order for all hypotheses; left out only for the best of them, which then decides it. */
  readonly order?: Order | null;
  /** Grid found blindly: where its settings are the same it is taken over, else it lends its start and its frequency. */
  readonly grid?: SymbolGrid | null;
}

/** Points on the plot at most. */
const POINTS = 1500;
const SYMBOLS = 56;
const FEWEST_POINTS = 150;
/** Training and signalling at the start of a Wi-Fi frame. */
const PREAMBLE_S = 44e-6;
/** Below this part of what random points give, the constellation has closed. */
const CLOSED = 0.7;
const OPEN = 0.85;

/**
 * The capture demodulated under given settings, data unknown. Under the right spacing and prefix
 * the constellation closes; under others the points stay random and the EVM stays near
 * `evmRandomPercent`.
 */
export function demodulateUnder(source: SampleSource, settings: DemodulationSettings, options: DemodulateOptions): Demodulation {
  const pattern = patternOf(settings);
  if (!pattern) return undone(settings, options, 'the settings name no spacing and prefix that describe OFDM symbols');
  if (pattern.usefulS * source.sampleRateHz < 8) return undone(settings, options, 'the sample rate is too low for this spacing');
  const start = options.grid ? Math.max(0, Math.floor(options.grid.startSample)) : chooseWindows(source, { further: 0 })[0];
  const window = readWindow(source, firstWindow(source, start));
  const band = options.occupied ?? spectrumOf(window.iq, window.sampleRateHz).occupied ?? wholeBand(window);
  const on = onStretches(window, options);
  const grid = locate(prepare(window, { occupied: band, on: on.map((s) => ({ start: s.start - window.startSample, end: s.end - window.startSample })) }), pattern, options.grid ?? null);
  if (!grid) return undone(settings, options, 'the capture is shorter than a few symbols under these settings');
  const range = { ...busiest(on, { grid, cellular: pattern.family === 'cellular' }), ...band };
  return measured(symbolsOf(window, grid, range), settings, options);
}

/** The 20 ms that hold the given sample and lie wholly in the capture if they can. */
function firstWindow(source: SampleSource, start: number): number {
  const length = Math.round(0.02 * source.sampleRateHz);
  return Math.max(0, Math.min(Math.floor(start / length) * length, source.samples - length));
}

function wholeBand({ sampleRateHz }: Window): { lowHz: number; highHz: number } {
  return { lowHz: -0.48 * sampleRateHz, highHz: 0.48 * sampleRateHz };
}

function onStretches(window: Window, { segments }: DemodulateOptions): { start: number; end: number }[] {
  const end = window.startSample + (window.iq.length >> 1);
  const given = segments?.filter((s) => s.end > window.startSample && s.start < end)
    .map((s) => ({ start: Math.max(s.start, window.startSample), end: Math.min(s.end, end) }));
  if (given && given.length > 0) return given;
  return activity(window.iq, window.sampleRateHz).segments
    .map((s) => ({ start: s.start + window.startSample, end: s.end + window.startSample }));
}

/**
 * The stretch of symbols that is demodulated. Bursts with a timing of their own: the one that the
 * grid belongs to, its beginning (a preamble) left out where there is enough. Else the place with
 * the most signal.
 */
function busiest(on: readonly { start: number; end: number }[], { grid, cellular }: { grid: SymbolGrid; cellular: boolean }): { from: number; to: number } {
  const symbol = grid.usefulSamples + grid.prefixSamples[grid.prefixSamples.length - 1];
  const own = on.find((s) => s.start <= grid.startSample + symbol && grid.startSample < s.end);
  if (!cellular && own && on.length > 1) {
    const preamble = (PREAMBLE_S * grid.subcarrierSpacingHz * grid.usefulSamples);
    const length = own.end - own.start;
    const from = own.start + (length > 24 * symbol ? Math.max(preamble, 12 * symbol) : length > 1.5 * preamble ? preamble : 0);
    return { from: Math.floor(from), to: Math.ceil(Math.min(own.end, from + SYMBOLS * symbol)) };
  }
  const length = SYMBOLS * symbol;
  const last = on.at(-1)?.end ?? 0;
  const signalIn = (from: number) => on.reduce((sum, s) => sum + Math.max(0, Math.min(s.end, from + length) - Math.max(s.start, from)), 0);
  const starts = on.map((s) => Math.max(0, Math.min(s.start, last - length)));
  const from = starts.reduce((best, at) => (signalIn(at) > 1.02 * signalIn(best) ? at : best), starts[0] ?? 0);
  return { from: Math.floor(from), to: Math.ceil(Math.min(last, from + length)) };
}

function measured(symbols: Symbols, settings: DemodulationSettings, options: DemodulateOptions): Demodulation {
  if (symbols.count < 6 || symbols.width < 8) return undone(settings, options, 'fewer than six symbols with signal lie in the capture under these settings');
  const cells = activeCells(symbols);
  const blind = blindEqualiser(symbols, cells);
  const order = options.order ?? decideOrder(blocksOf(symbols, cells, blind));
  const equaliser = sharpened(symbols, cells, { equaliser: blind, order });
  const { points, subcarriers } = pointsAt(blocksOf(symbols, cells, equaliser), order);
  if (points.length < 2 * FEWEST_POINTS) return undone(settings, options, 'too few subcarriers with signal');
  const closes = openness(points, order) < CLOSED;
  return {
    under: options.under, settings: stated(settings), points: thinned(points), order, closes,
    evmPercent: evmPercent(points, order), evmRandomPercent: randomEvmPercent(points, order),
    evmBySubcarrier: bySubcarrier(symbols, { points, subcarriers, order }),
    reason: closes ? null : 'the points do not gather about a constellation',
  };
}

/** Decisions sharpen an equaliser whose constellation has begun to close; on random points they would only flatter. */
function sharpened(symbols: Symbols, cells: Cells, start: { equaliser: Equaliser; order: Order }): Equaliser {
  const { order } = start;
  let equaliser = start.equaliser;
  for (let i = 0; i < 2; i++) {
    if (openness(pointsAt(blocksOf(symbols, cells, equaliser), order).points, order) > OPEN) break;
    equaliser = byDecisions(symbols, cells, { equaliser, order });
  }
  return equaliser;
}

function thinned(points: Float64Array): number[] {
  const total = points.length / 2;
  const count = Math.min(POINTS, total);
  return Array.from({ length: 2 * count }, (_, i) => Number(points[2 * Math.floor(((i >> 1) * total) / count) + (i & 1)].toFixed(4)));
}

interface Placed { points: Float64Array; subcarriers: number[]; order: Order }

function bySubcarrier(symbols: Symbols, { points, subcarriers, order }: Placed): Curve {
  const step = Math.max(1, Math.ceil(symbols.width / 400));
  const sums = new Float64Array(Math.ceil(symbols.width / step));
  const counts = new Float64Array(sums.length);
  subcarriers.forEach((k, i) => {
    sums[Math.floor(k / step)] += squaredError(points[2 * i], points[2 * i + 1], order);
    counts[Math.floor(k / step)]++;
  });
  const x: number[] = [];
  const y: number[] = [];
  counts.forEach((n, i) => {
    if (n < 2) return;
    x.push(symbols.first + i * step);
    y.push(Number((100 * Math.sqrt(sums[i] / n)).toFixed(2)));
  });
  return { title: 'EVM by subcarrier', xLabel: 'Subcarrier', xUnit: '', yLabel: 'EVM', yUnit: '%', x, y };
}

function stated(settings: DemodulationSettings): Demodulation['settings'] {
  return {
    subcarrierSpacingHz: settings.subcarrierSpacingHz, cyclicPrefix: settings.cyclicPrefix,
    cyclicPrefixS: settings.cyclicPrefixS ?? patternOf(settings)?.cyclicPrefixS ?? null, fftSize: settings.fftSize ?? null,
  };
}

function undone(settings: DemodulationSettings, { under }: DemodulateOptions, reason: string): Demodulation {
  return {
    under, settings: stated(settings), points: [], evmPercent: null, evmRandomPercent: null, order: null, evmBySubcarrier: null, closes: false, reason,
  };
}
