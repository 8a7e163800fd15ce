import type { AirValue } from '#shared/decode';
import type { DetectionContext, TechnologyFinding } from '../types.js';
import { halfShiftOf } from './half-shift.js';
import type { NativeWindow } from './native.js';
import { prefixSamples, SPACING_HZ, symbolStart, symbolsPerSlot } from './numerology.js';
import type { PrefixFit } from './prefix-search.js';
import { symbolRows } from './rows.js';
import type { Rows } from './rows.js';
import { spreadPoints } from './spread-points.js';
import { allocated, searchUplink } from './uplink-search.js';
import type { UplinkFit } from './uplink-search.js';

/** Fewer pairs of prefix and end cannot hold a reference symbol in every slot. */
const LEAST_PREFIX_SCORE = 6;

/**
 * A terminal's uplink (single carrier, half a subcarrier beside the raster), found by its
 * reference symbols: the fourth symbol of a slot, with the extended prefix the third (TS
 * 36.211 clause 5.5.2.1.2). Tried where no downlink was found.
 */
export function detectUplink(context: DetectionContext, window: NativeWindow, fits: readonly PrefixFit[]): TechnologyFinding | null {
  const [fit] = fits;
  if (!fit || fit.score < LEAST_PREFIX_SCORE) return null;
  const early = Math.round(prefixSamples('normal', 1, window.size) / 2);
  const rows = symbolRows(window, { ...fit, offsetHz: fit.fractionHz, early });
  const uplink = searchUplink(rows, Math.floor((0.9 * window.passHz) / SPACING_HZ));
  return uplink && uplinkFinding(context, window, { fit, rows, uplink });
}

interface Found { readonly fit: PrefixFit; readonly rows: Rows; readonly uplink: UplinkFit }

function uplinkFinding(context: DetectionContext, window: NativeWindow, found: Found): TechnologyFinding {
  const { fit, uplink } = found;
  const confidence = 0.995;
  const known = (value: AirValue['value'], method: string): AirValue => ({ value, confidence, method });
  const absent = (reason: string): AirValue => ({ value: null, reason });
  const residue = wrapped(fit.fractionHz - window.shiftHz);
  const by = 'uplink reference symbols';
  const prefixS = prefixSamples(fit.prefix, 1, 2048) / 2048 / SPACING_HZ;
  const air: Record<string, AirValue> = {
    technology: known('lte', `${by}: Zadoff-Chu group ${uplink.group}`),
    subcarrierSpacingHz: known(SPACING_HZ, by),
    usefulSymbolS: known(1 / SPACING_HZ, by),
    cyclicPrefix: known(fit.prefix, 'repetition of the cyclic prefix'),
    cyclicPrefixS: known(prefixS, 'repetition of the cyclic prefix'),
    carrierOffsetHz: known(residue, 'fractional: a subcarrier\'s place modulo the spacing; an allocation does not show the carrier\'s middle'),
    halfSubcarrierShift: halfShift(context, window, found),
    direction: known('uplink', by),
    resourceBlocks: absent('an uplink allocation does not show how wide the carrier is'),
    physicalCellId: absent('an uplink shows the cell modulo 30 at most'),
    spectrumInverted: absent('turned over, the reference symbols are those of another group'),
    systemFrameNumber: absent('an uplink has no broadcast'),
    mib: absent('an uplink has no broadcast'),
    ...quality(found, known, absent),
  };
  return {
    technology: 'lte', confidence, spectrumInverted: false, air, announced: {}, spreadPoints: dataPoints(window, found),
    grid: grid(context, window, { ...found, residue }),
    tried: [{ what: 'LTE uplink', result: `reference symbols of group ${uplink.group}, ${uplink.score.toFixed(0)} standard deviations above chance` }],
  };
}

/** Cut anew where the slot turned out to begin at another symbol: the longer prefix then stands where it is sent. */
function dataPoints(window: NativeWindow, { fit, rows, uplink }: Found): Float64Array {
  const away = uplink.symbol - (fit.prefix === 'normal' ? 3 : 2);
  if (away === 0 || fit.prefix === 'extended') return spreadPoints(rows, uplink);
  const slotStart = rows.cut.slotStart + symbolStart(fit.prefix, away, window.size);
  const moved = symbolRows(window, { ...rows.cut, slotStart });
  return spreadPoints(moved, { ...uplink, symbol: 3, symbols: uplink.symbols.map((s) => s - away) });
}

function wrapped(hz: number): number {
  return hz - SPACING_HZ * Math.round(hz / SPACING_HZ);
}

function halfShift(context: DetectionContext, window: NativeWindow, { fit, uplink }: Found): AirValue {
  const edgeHz = uplink.low * SPACING_HZ + fit.fractionHz - window.shiftHz;
  const scatterHz = (SPACING_HZ / (2 * Math.PI)) * Math.sqrt(Math.max(0, 1 / fit.coherence ** 2 - 1) / 2) * (fit.coherence / fit.score);
  return halfShiftOf({ residueHz: wrapped(edgeHz), edgeHz, centreHz: context.source.centreFrequencyHz, scatterHz });
}

/** Reference symbols against the mean of both neighbours: 3/2 of the error's variance. */
function quality({ rows, uplink }: Found, known: (value: number, method: string) => AirValue, absent: (reason: string) => AirValue): Record<string, AirValue> {
  const own = neighbourError(rows, uplink, uplink.chirp);
  const other = neighbourError(rows, uplink, uplink.chirp + 7 / 31);
  const signal = own.power - own.noise;
  if (!(signal > 0)) return { snrDb: absent('no power above the noise'), evmPercent: absent('no power above the noise') };
  return {
    evmPercent: known(100 * Math.sqrt(own.noise / signal), 'uplink reference symbols against their neighbours'),
    evmRandomPercent: known(100 * Math.sqrt(other.noise / signal), 'the same with another group\'s values'),
    snrDb: known(10 * Math.log10(signal / own.noise), 'uplink reference symbols, within the allocation'),
    sampleClockOffsetPpm: absent('not measured on an uplink'),
  };
}

function neighbourError(rows: Rows, uplink: UplinkFit, chirp: number): { noise: number; power: number } {
  const channels = uplink.symbols.flatMap((s) => {
    const row = allocated(rows, s, uplink);
    return row ? [despread(row, chirp)] : [];
  });
  let squares = 0, power = 0, count = 0;
  for (const h of channels) {
    const [c, s] = turn(h);
    for (let i = 2; i + 2 < h.length; i += 2) {
      const lr = h[i - 2], li = h[i - 1], hr = h[i + 2], hi = h[i + 3];
      squares += (h[i] - (lr * c - li * s + hr * c + hi * s) / 2) ** 2 + (h[i + 1] - (li * c + lr * s + hi * c - hr * s) / 2) ** 2;
      power += h[i] ** 2 + h[i + 1] ** 2;
      count++;
    }
  }
  return { noise: squares / count / 1.5, power: power / count };
}

/** The row with the chirp taken out; what is left turns evenly. */
function despread(row: Float64Array, chirp: number): Float64Array {
  const h = new Float64Array(row.length);
  for (let i = 0; i < row.length; i += 2) {
    const k = i / 2;
    const angle = Math.PI * ((chirp * k * k) % 2);
    const c = Math.cos(angle), s = Math.sin(angle);
    h[i] = row[i] * c - row[i + 1] * s;
    h[i + 1] = row[i + 1] * c + row[i] * s;
  }
  return h;
}

/** Mean turn from one subcarrier to the next, as cosine and sine. */
function turn(h: Float64Array): [number, number] {
  let re = 0, im = 0;
  for (let i = 0; i + 2 < h.length; i += 2) {
    re += h[i + 2] * h[i] + h[i + 3] * h[i + 1];
    im += h[i + 3] * h[i] - h[i + 2] * h[i + 1];
  }
  const size = Math.hypot(re, im) || 1;
  return [re / size, im / size];
}

function grid(context: DetectionContext, window: NativeWindow, { fit, uplink, residue }: Found & { residue: number }) {
  const toCapture = context.source.sampleRateHz / (window.size * SPACING_HZ);
  const perSlot = symbolsPerSlot(fit.prefix);
  const slotSymbol = uplink.symbol - (fit.prefix === 'normal' ? 3 : 2);
  return {
    startSample: window.startSample + (fit.slotStart + symbolStart(fit.prefix, slotSymbol, window.size)) * toCapture,
    usefulSamples: window.size * toCapture,
    prefixSamples: Array.from({ length: perSlot }, (_, l) => prefixSamples(fit.prefix, l, window.size) * toCapture),
    subcarrierSpacingHz: SPACING_HZ,
    referenceHz: residue,
    placed: false,
  };
}
