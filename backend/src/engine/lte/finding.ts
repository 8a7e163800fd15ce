import type { AirValue } from '#shared/decode';
import type { DetectionContext, SymbolGrid, TechnologyFinding, Tried } from '../types.js';
import type { DecodedBroadcast } from './broadcast.js';
import type { NativeWindow } from './native.js';
import { prefixSamples, SPACING_HZ, symbolsPerSlot } from './numerology.js';
import type { Duplex } from './numerology.js';
import { clockDrift } from './clock.js';
import { portCombs, powerWhileOn, referenceError } from './quality.js';
import type { ReferenceError } from './quality.js';
import { neighbourCoherence, ReferenceSymbols } from './reference.js';
import type { CombChannel, FramePlace } from './reference.js';
import type { CellSync } from './secondary.js';
import type { Rows } from './rows.js';

export interface CellMeasurement {
  readonly rows: Rows;
  readonly sync: CellSync;
  /** Whose reference symbols were measured. */
  readonly port: number;
  readonly place: FramePlace & { duplex: Duplex };
  readonly references: ReferenceSymbols;
  /** Those of `port` within the carrier. */
  readonly combs: readonly CombChannel[];
  readonly angleOfThree: number;
  readonly error: ReferenceError;
  readonly blocks: { readonly blocks: number; readonly complete: boolean };
  readonly broadcast: DecodedBroadcast | null;
  readonly referenceScore: number;
  readonly halfSeen: number;
}

/** The clock is given where its own scatter is below this. */
const CLOCK_DEVIATION_PPM = 1;

/** What was measured, in the contract's names. */
export function lteFinding(context: DetectionContext, window: NativeWindow, cell: CellMeasurement): TechnologyFinding {
  const confidence = cellConfidence(cell);
  const known = (value: AirValue['value'], method: string, sure = confidence): AirValue => ({ value, confidence: sure, method });
  const absent = (reason: string): AirValue => ({ value: null, reason });
  const { sync, rows, broadcast } = cell;
  const prefix = rows.cut.prefix;
  const carrierOffsetHz = carrierOffset(window, cell);
  const blocks = broadcast?.word.information.resourceBlocks ?? (cell.blocks.complete ? cell.blocks.blocks : null);
  const air: Record<string, AirValue> = {
    technology: known('lte', 'primary and secondary synchronisation signals, reference symbols'),
    subcarrierSpacingHz: known(SPACING_HZ, 'synchronisation and reference symbols'),
    usefulSymbolS: known(1 / SPACING_HZ, 'synchronisation and reference symbols'),
    cyclicPrefix: known(prefix, 'place of the secondary synchronisation signal before the primary'),
    cyclicPrefixS: known(prefixSamples(prefix, 1, 2048) / 2048 / SPACING_HZ, 'place of the secondary synchronisation signal before the primary'),
    carrierOffsetHz: known(carrierOffsetHz, 'DC tone of the synchronisation signals, refined by reference symbols'),
    physicalCellId: known(sync.cellId, 'synchronisation signals and reference symbols'),
    spectrumInverted: known(sync.inverted, 'sense in which secondary signal and reference symbols fit'),
    resourceBlocks: blocks === null ? absent('the capture is narrower than the carrier may be and the broadcast was not read')
      : known(blocks, broadcast ? 'broadcast' : 'reach of the reference symbols'),
    ...qualityValues(cell, known, absent),
    ...broadcastValues(cell, known, absent),
  };
  return {
    technology: 'lte', confidence, spectrumInverted: sync.inverted, air,
    announced: announced(broadcast), grid: grid(context, window, { cell, carrierOffsetHz }), tried: notes(cell),
  };
}

type Known = (value: AirValue['value'], method: string, sure?: number) => AirValue;
type Absent = (reason: string) => AirValue;

function qualityValues(cell: CellMeasurement, known: Known, absent: Absent): Record<string, AirValue> {
  const { error, rows, sync, references } = cell;
  const signal = error.power - error.noise;
  const out: Record<string, AirValue> = {};
  if (!(signal > 0)) {
    const reason = 'too few reference symbols next to each other';
    return { snrDb: absent(reason), evmPercent: absent(reason), sampleClockOffsetPpm: absent(reason) };
  }
  // A cell six further on has its reference symbols in the same places, with other values: chance's error.
  const wrong = new ReferenceSymbols((references.cellId + 6) % 504, references.prefix);
  const half = Math.min(cell.halfSeen, 6 * (cell.broadcast?.word.information.resourceBlocks ?? cell.blocks.blocks));
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  const chance = referenceError(portCombs(rows, wrong, { ...cell.place, port: cell.port, half }), cell.angleOfThree, perSlot);
  out.evmPercent = known(100 * Math.sqrt(error.noise / signal), `reference symbols of port ${cell.port} against the four around each`);
  out.evmRandomPercent = known(100 * Math.sqrt(chance.noise / signal), 'the same with another cell\'s values');
  const on = powerWhileOn(rows, { ...cell.place, half, ...error });
  out.snrDb = on > error.noise ? known(10 * Math.log10((on - error.noise) / error.noise), 'power of the carrier while on against the reference symbols\' error')
    : absent('no power above the noise');
  const drift = clockDrift(cell.combs, { size: rows.size, perSlot, noise: error.noise });
  out.sampleClockOffsetPpm = drift && drift.sigmaPpm <= CLOCK_DEVIATION_PPM
    ? { ...known(drift.ppm, 'drift of the reference symbols\' timing'), sigmaPpm: drift.sigmaPpm }
    : absent(`the drift of the timing is known to ${(drift?.sigmaPpm ?? Number.POSITIVE_INFINITY).toFixed(1)} ppm only (duration, bandwidth, noise, changing channel)`);
  out.duplexMode = known(sync.duplex, 'distance of the two synchronisation signals');
  return out;
}

function broadcastValues(cell: CellMeasurement, known: Known, absent: Absent): Record<string, AirValue> {
  const { broadcast } = cell;
  if (!broadcast) {
    const reason = 'no broadcast word passed its parity check';
    return { systemFrameNumber: absent(reason), mib: absent(reason), antennaPorts: portsByReferences(cell, known) };
  }
  const { word, systemFrameNumber, ports } = broadcast;
  const { frameNumberUpper: _, ...fields } = word.information;
  const method = `broadcast channel, parity passed, ${broadcast.frames} frame${broadcast.frames > 1 ? 's' : ''}`;
  return {
    systemFrameNumber: known(systemFrameNumber, method),
    mib: known({ systemFrameNumber, ...fields }, method),
    antennaPorts: known(ports, 'parity mask of the broadcast (TS 36.212 clause 5.3.1.1)'),
  };
}

function portsByReferences(cell: CellMeasurement, known: Known): AirValue {
  const seen = [1, 2].map((port) => neighbourCoherence(portCombs(cell.rows, cell.references, { ...cell.place, half: 36, port }), { inner: 0, outer: 36 }).score > 4);
  return known(seen[1] ? 4 : seen[0] ? 2 : 1, 'ports whose reference symbols are there', 0.9);
}

/** Frequency of the DC tone against the capture's centre, upright. */
function carrierOffset(window: NativeWindow, { rows, sync }: CellMeasurement): number {
  const raw = rows.cut.offsetHz - window.shiftHz;
  return sync.inverted ? -raw : raw;
}

function grid(context: DetectionContext, window: NativeWindow, at: { cell: CellMeasurement; carrierOffsetHz: number }): SymbolGrid {
  const { rows, angleOfThree } = at.cell;
  const toCapture = context.source.sampleRateHz / (window.size * SPACING_HZ);
  const { cut } = rows;
  const perSlot = symbolsPerSlot(cut.prefix);
  // The transform starts early; the reference symbols' turning says how much later the signal is.
  const late = (-angleOfThree * window.size) / (2 * Math.PI * 3) - cut.early;
  return {
    startSample: window.startSample + (cut.slotStart + late) * toCapture,
    usefulSamples: window.size * toCapture,
    prefixSamples: Array.from({ length: perSlot }, (_, l) => prefixSamples(cut.prefix, l, window.size) * toCapture),
    subcarrierSpacingHz: SPACING_HZ,
    referenceHz: at.carrierOffsetHz,
    placed: true,
  };
}

function announced(broadcast: DecodedBroadcast | null): Record<string, string | number | boolean> {
  if (!broadcast) return {};
  const blocks = broadcast.word.information.resourceBlocks;
  return { resourceBlocks: blocks, channelBandwidth: CHANNEL_HZ[blocks] };
}

/** TS 36.104 Table 5.6-1. */
const CHANNEL_HZ: Readonly<Record<number, number>> = { 6: 1.4e6, 15: 3e6, 25: 5e6, 50: 10e6, 75: 15e6, 100: 20e6 };

/**
 * Against chance: a passed parity check among twelve tries on top of synchronisation and
 * reference symbols leaves next to nothing; without it the scores speak, never above 0.999.
 */
function cellConfidence(cell: CellMeasurement): number {
  return cell.broadcast ? 0.9999 : 0.999 - Math.min(0.5, chanceOf(cell.sync.score, cell.referenceScore));
}

function notes(cell: CellMeasurement): Tried[] {
  const { sync, broadcast } = cell;
  const out: Tried[] = [{
    what: `LTE cell ${sync.cellId}, ${sync.duplex.toUpperCase()}, spectrum ${sync.inverted ? 'inverted' : 'upright'}`,
    result: `secondary signal ${sync.score.toFixed(1)} (next cell ${sync.runnerUp.toFixed(1)}), reference symbols ${cell.referenceScore.toFixed(1)} times chance`,
  }];
  if (!broadcast) out.push({ what: 'LTE broadcast with 1, 2 and 4 ports', result: 'no parity check passed' });
  return out;
}

/** Chance of a false cell in one capture: over candidates, readings and sequences, times that of its reference symbols on two ports in two readings. */
export function chanceOf(secondaryScore: number, referenceScore: number): number {
  const secondary = 16_000 * Math.exp(-(secondaryScore ** 2));
  const reference = 4 * (1 + referenceScore ** 2) * Math.exp(-(referenceScore ** 2));
  return Math.min(1, secondary) * Math.min(1, reference);
}
