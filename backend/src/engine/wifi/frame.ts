import { legacyChannel, axis, encodedTones, knownSymbolFit, softBits, softSymbol, widened } from './field.js';
import type { KnownSymbolFit, LegacyChannel, SoftSymbol } from './field.js';
import { BITS_PER_SYMBOL, decodeHeSignal, decodeHtSignal, decodeLegacySignal, decodeVhtSignal } from './signal-codes.js';
import type { HeSignal, HtSignal, LegacySignal, VhtSignal } from './signal-codes.js';
import type { Preamble } from './synchronise.js';
import { LAYOUT } from './training.js';

/** What a frame's own fields say, and where its data lie (nominal µs after its start). */
export interface Frame {
  readonly preamble: Preamble;
  readonly channel: LegacyChannel;
  readonly format: 'legacy' | 'ht' | 'ht-greenfield' | 'vht' | 'he' | 'eht' | 'unknown';
  readonly legacy: LegacySignal | null;
  readonly signal: HtSignal | VhtSignal | HeSignal | null;
  /** Where the data start, exact where the fields say so, else the earliest place. */
  readonly dataStartUs: number;
  readonly dataEndUs: number;
  /** Error and power of L-SIG against its re-encoded bits. */
  readonly error: KnownSymbolFit | null;
  /** Carrier offset that is left, from the turn of the known symbols since the training. */
  readonly rest: CarrierRest | null;
}

export interface CarrierRest {
  readonly hz: number;
  readonly varianceHz2: number;
}

/** Reads the fields after the legacy training, as far as they hold together. */
export function readFrame(preamble: Preamble): Frame | null {
  const channel = legacyChannel(preamble);
  if (!channel) return null;
  const first = softSymbol(preamble, channel, { us: LAYOUT.signalUs, phase: 0 });
  if (!first) return null;
  const legacy = decodeLegacySignal(softBits(first, 'legacy', false));
  if (!legacy) return greenfield(preamble, channel, first);
  const known = encodedTones(legacy.bits, 48)[0];
  const fit = knownSymbolFit(first, known);
  // L-SIG's middle lies 18.4 µs after the start: the carrier's rest turns on at this rate.
  const turn = fit.phase / (18.4 - TRAINING_MIDDLE_US);
  const read: Reading = {
    preamble, channel, legacy, known,
    phase: (us) => turn * (us + LAYOUT.guardUs + LAYOUT.usefulUs / 2 - TRAINING_MIDDLE_US),
    error: fit, rest: null,
  };
  const frame = readNewer(read) ?? legacyFrame(read);
  return { ...frame, rest: carrierRest(read, frame.signal) };
}

interface Reading {
  readonly preamble: Preamble;
  readonly channel: LegacyChannel;
  readonly legacy: LegacySignal;
  readonly known: Float64Array;
  readonly phase: (us: number) => number;
  readonly error: KnownSymbolFit;
  readonly rest: null;
}

/** Middle of the training's two symbols, nominal µs. */
const TRAINING_MIDDLE_US = 12.8;

/**
 * Slope of the phases of L-SIG and, for HT and VHT, the two symbols after it, against the
 * training (weighted by distance); the training's own error is common to all of them.
 */
function carrierRest(read: Reading, signal: Frame['signal']): CarrierRest {
  const known = [{ us: 16, values: read.known, rotated: false }];
  if (signal?.format === 'ht' || signal?.format === 'vht') {
    const [one, two] = encodedTones(signal.bits, 48);
    known.push({ us: 20, values: one, rotated: signal.format === 'ht' }, { us: 24, values: two, rotated: true });
  }
  let sum = 0, squares = 0, times = 0;
  for (const { us, values, rotated } of known) {
    const symbol = softSymbol(read.preamble, read.channel, { us, phase: read.phase(us) });
    if (!symbol) continue;
    const turn = read.phase(us) + wrapped(knownSymbolFit(symbol, values).phase - (rotated ? Math.PI / 2 : 0));
    const after = us + LAYOUT.guardUs + LAYOUT.usefulUs / 2 - TRAINING_MIDDLE_US;
    sum += turn * after;
    squares += after * after;
    times += after;
  }
  const tones = 48 * read.preamble.channels.length;
  const phaseVariance = read.error.error / Math.max(read.error.power, 1e-30) / 2 / tones;
  const variance = phaseVariance / squares + ((phaseVariance / 2) * times * times) / (squares * squares);
  const toHz = 1 / (2 * Math.PI * 1e-6 * read.preamble.piece.clock);
  return { hz: (sum / squares) * toHz, varianceHz2: variance * toHz * toHz };
}

function wrapped(angle: number): number {
  return angle - 2 * Math.PI * Math.round(angle / (2 * Math.PI));
}

function legacyFrame({ preamble, channel, legacy, error, rest }: Reading): Frame {
  const symbols = Math.ceil((16 + 8 * legacy.length + 6) / BITS_PER_SYMBOL[legacy.rateMbps]);
  return { preamble, channel, format: 'legacy', legacy, signal: null, dataStartUs: 20, dataEndUs: 20 + 4 * symbols, error, rest };
}

/** HT, VHT and HE frames announce 6 Mb/s in L-SIG, so that older stations wait. */
function readNewer(read: Reading): Frame | null {
  if (read.legacy.rateMbps !== 6) return null;
  const [one, two] = [20, 24].map((us) => softSymbol(read.preamble, read.channel, { us, phase: read.phase(us) }));
  if (!one || !two) return null;
  return heFrame(read, one) ?? htFrame(read, [one, two]) ?? vhtFrame(read, [one, two]) ?? unread(read, axis(one), axis(two));
}

/** End of the frame as L-SIG spoofs it: 20 µs and four for every three octets (IEEE 802.11-2016 clause 19.3.9.3.5). */
function spoofedEnd(legacy: LegacySignal): number {
  return 20 + 4 * Math.ceil((legacy.length + 3) / 3);
}

function join(symbols: readonly SoftSymbol[], tones: 'legacy' | 'wide', rotated: readonly boolean[]): Float64Array {
  const parts = symbols.map((symbol, i) => softBits(symbol, tones, rotated[i]));
  return Float64Array.from(parts.flatMap((part) => [...part]));
}

function htFrame(read: Reading, symbols: readonly SoftSymbol[]): Frame | null {
  if (axis(symbols[0]) > 0 || axis(symbols[1]) > 0) return null;
  const signal = decodeHtSignal(join(symbols, 'legacy', [true, true]));
  if (!signal) return null;
  return { ...read, format: 'ht', signal, dataStartUs: 32 + 4 * signal.longTrainings, dataEndUs: spoofedEnd(read.legacy) };
}

function vhtFrame(read: Reading, symbols: readonly SoftSymbol[]): Frame | null {
  if (axis(symbols[1]) > 0) return null;
  const signal = decodeVhtSignal(join(symbols, 'legacy', [false, true]));
  if (!signal) return null;
  return { ...read, format: 'vht', signal, dataStartUs: 36 + 4 * signal.longTrainings, dataEndUs: spoofedEnd(read.legacy) };
}

/** Other symbols are 0 ± 0.13 (48 tones); QBPSK stays below −0.35 down to some 2 dB. */
const CLEAR_AXIS = 0.35;

/** Rotation tells the format even where the field's parity did not pass; the data then start no earlier than after one training. */
function unread(read: Reading, first: number, second: number): Frame | null {
  if (second > -CLEAR_AXIS || Math.abs(first) < CLEAR_AXIS) return null;
  const format = first < 0 ? 'ht' : 'vht';
  return { ...read, format, signal: null, dataStartUs: first < 0 ? 36 : 40, dataEndUs: spoofedEnd(read.legacy) };
}

/** L-SIG is sent twice in HE and EHT frames: how alike the next symbol is, −1 to 1. */
function repetition(known: Float64Array, symbol: SoftSymbol): number {
  const soft = softBits(symbol, 'legacy', false);
  const inOrder = encodedOrder(known);
  let sum = 0, magnitude = 0;
  for (let i = 0; i < soft.length; i++) {
    sum -= soft[i] * inOrder[i];
    magnitude += Math.abs(soft[i]);
  }
  return magnitude > 0 ? sum / magnitude : 0;
}

/** The re-encoded tones in coded order, as `softBits` gives them. */
function encodedOrder(tones: Float64Array): Float64Array {
  return Float64Array.from(tones, (_, k) => tones[3 * (k % 16) + Math.floor(k / 16)]);
}

/** Another frame's symbol agrees by 0 ± 0.15: the chance of 0.5 is below 10⁻³, and noise leaves a true one above it down to −3 dB. */
const LEAST_REPETITION = 0.5;

function heFrame(read: Reading, next: SoftSymbol): Frame | null {
  if (repetition(read.known, next) < LEAST_REPETITION) return null;
  const remainder = read.legacy.length % 3;
  const end = spoofedEnd(read.legacy);
  if (remainder === 0) return { ...read, format: 'eht', signal: null, dataStartUs: 36, dataEndUs: end };
  const channel = widened(read.preamble, read.channel, [16, 20].map((us) => ({ us, phase: read.phase(us) })));
  const symbols = [24, 28, 32, 36].map((us) => softSymbol(read.preamble, channel, { us, phase: read.phase(us) }));
  const [a, b, c, d] = symbols;
  let signal = a && b ? decodeHeSignal(join([a, b], 'wide', [false, false]), remainder, false) : null;
  let extended = false;
  if (a && b && c && d && remainder === 2 && axis(b) < 0) {
    const repeated = [join([a, c], 'wide', [false, false]), join([b, d], 'wide', [true, false])];
    signal = decodeHeSignal(repeated[0].map((v, i) => v + repeated[1][i]), remainder, true);
    extended = true;
  }
  return { ...read, channel: read.channel, format: 'he', signal, dataStartUs: heDataStart(signal, extended), dataEndUs: end };
}

function heDataStart(signal: HeSignal | null, extended: boolean): number {
  const afterSignal = extended ? 40 : 32;
  if (!signal) return afterSignal + 4;
  const short = signal.kind === 'trigger-based' ? 8 : 4;
  const trainings = signal.longTrainings !== null && signal.ltfType !== null && signal.guardIntervalUs !== null
    ? signal.longTrainings * (3.2 * signal.ltfType + signal.guardIntervalUs) : 0;
  return afterSignal + 4 * signal.sigBSymbols + short + trainings;
}

/** Without L-SIG: HT-SIG right after the first long training (IEEE 802.11-2016 clause 19.3.9.5). */
function greenfield(preamble: Preamble, channel: LegacyChannel, first: SoftSymbol): Frame | null {
  const second = softSymbol(preamble, channel, { us: 20, phase: 0 });
  if (!second || axis(first) > 0 || axis(second) > 0) return null;
  const signal = decodeHtSignal(join([first, second], 'legacy', [true, true]));
  if (!signal) return null;
  const start = 24 + 4 * (signal.longTrainings - 1);
  return { preamble, channel, format: 'ht-greenfield', legacy: null, signal, dataStartUs: start, dataEndUs: start + 4 * 2000, error: null, rest: null };
}
