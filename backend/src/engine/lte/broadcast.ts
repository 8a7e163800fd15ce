import { broadcastScrambling, decodeBroadcast } from './broadcast-code.js';
import type { BroadcastWord } from './broadcast-code.js';
import { interpolateComb } from './comb-interpolation.js';
import type { CombSample } from './comb-interpolation.js';
import { combChannels, combOffset, placeInFrame } from './reference.js';
import type { CombChannel, FramePlace, ReferenceSymbols } from './reference.js';
import { subcarriers } from './rows.js';
import type { Rows } from './rows.js';
import { symbolsPerSlot } from './numerology.js';

/** Half the broadcast channel's width: 72 subcarriers around DC (TS 36.211 clause 6.6.4). */
const HALF = 36;
/** Spread of delays that the channel estimate allows for, µs: the longest profile of TS 36.104 annex B reaches 5. */
const DELAY_SPAN_S = 6e-6;

export interface DecodedBroadcast {
  readonly word: BroadcastWord;
  readonly ports: number;
  /** Complete frame number of the frame `frame` (as `placeInFrame` counts) and how many frames were combined. */
  readonly systemFrameNumber: number;
  readonly frame: number;
  readonly frames: number;
}

export interface BroadcastPlace extends FramePlace {
  /** Half the carrier's subcarriers, as far as measured: reference symbols this far out are used. */
  readonly half: number;
  /** Delay of the channel in turns per subcarrier, from the reference symbols. */
  readonly delayTurns: number;
  /** Noise on a reference symbol over its power. */
  readonly noise: number;
}

/** Tries one, two and four ports and the four places in the 40 ms, with all frames that belong together combined. */
export function decodeBroadcasts(rows: Rows, references: ReferenceSymbols, at: BroadcastPlace): DecodedBroadcast | null {
  const scrambling = broadcastScrambling(references.cellId, rows.cut.prefix);
  const frames = wholeFrames(rows, at.frameSymbol);
  const channels = frames.map((frame) => portChannels(rows, references, { ...at, frame }));
  let best: DecodedBroadcast | null = null;
  for (const ports of [1, 2, 4]) {
    const soft = frames.map((frame, i) => softBits(rows, references, { ...at, frame, channels: channels[i].slice(0, ports) }));
    for (const group of groupings(frames)) {
      const bits = new Float64Array(scrambling.length);
      for (const { index, place } of group) bits.set(soft[index], place * soft[index].length);
      const word = decodeBroadcast(bits, scrambling, ports);
      if (!word || word.agreement < LEAST_AGREEMENT) continue;
      const found = {
        word, ports, frames: group.length, frame: frames[group[0].index],
        systemFrameNumber: 4 * word.information.frameNumberUpper + group[0].place,
      };
      if (!best || found.frames * word.agreement > best.frames * best.word.agreement) best = found;
    }
  }
  return best;
}

/**
 * Noise alone reaches 0.36 ± 0.03 with one frame (the decoder picks the word that agrees best),
 * and less with more; a signal at 0 dB 0.8.
 */
export const LEAST_AGREEMENT = 0.5;

/** Frames whose broadcast symbols (slot 1, symbols 0 to 3) and one reference comb before them are in the rows. */
function wholeFrames(rows: Rows, frameSymbol: number): number[] {
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  const last = rows.first + rows.spectra.length;
  const out: number[] = [];
  for (let f = placeInFrame(rows.cut.prefix, frameSymbol, rows.first).frame; ; f++) {
    const start = frameSymbol + f * 20 * perSlot + perSlot;
    if (start + 4 > last) return out;
    if (start >= rows.first) out.push(f);
  }
}

/** Every way to lay consecutive frames into transmissions of four: sets of (index of a frame, its place). */
function groupings(frames: readonly number[]): { index: number; place: number }[][] {
  const out: { index: number; place: number }[][] = [];
  for (let phase = 0; phase < 4; phase++) {
    const groups = new Map<number, { index: number; place: number }[]>();
    frames.forEach((frame, index) => {
      const key = Math.floor((frame + phase) / 4);
      const group = groups.get(key) ?? [];
      group.push({ index, place: (((frame + phase) % 4) + 4) % 4 });
      groups.set(key, group);
    });
    out.push(...groups.values());
  }
  return out;
}

/** The four ports' channels over the broadcast symbols of a frame, from the combs around them. */
function portChannels(rows: Rows, references: ReferenceSymbols, at: BroadcastPlace & { frame: number }): Float64Array[] {
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  const start = at.frameSymbol + at.frame * 20 * perSlot;
  const half = Math.min(at.half, 60);
  return [0, 1, 2, 3].map((port) => {
    const combs = combChannels(rows, references, { ...at, port, half, keep: (slot) => slot < 2 })
      .filter(({ symbol }) => symbol > start && symbol < start + 2 * perSlot);
    const samples = average(combs);
    const power = samples.reduce((sum, s) => sum + s.re ** 2 + s.im ** 2, 0) / Math.max(1, samples.length);
    const span = { centre: at.delayTurns, width: DELAY_SPAN_S * 15_000 };
    const wide = interpolateComb(scaled(samples, power), span, { half, noise: at.noise });
    const middle = wide.slice(2 * (half - HALF), 2 * (half + HALF + 1));
    return middle.map((v) => v * Math.sqrt(power));
  });
}

function scaled(samples: readonly CombSample[], power: number): CombSample[] {
  const by = power > 0 ? 1 / Math.sqrt(power) : 0;
  return samples.map((s) => ({ ...s, re: s.re * by, im: s.im * by }));
}

function average(combs: readonly CombChannel[]): CombSample[] {
  const sums = new Map<number, { re: number; im: number; weight: number }>();
  for (const { subcarriers: ks, h } of combs) {
    ks.forEach((k, i) => {
      const sum = sums.get(k) ?? { re: 0, im: 0, weight: 0 };
      sums.set(k, { re: sum.re + h[2 * i], im: sum.im + h[2 * i + 1], weight: sum.weight + 1 });
    });
  }
  return [...sums].map(([k, { re, im, weight }]) => ({ k, re: re / weight, im: im / weight, weight }));
}

/** One resource element of the broadcast channel and every port's channel on it. */
interface Element { readonly re: number; readonly im: number; readonly h: readonly { re: number; im: number }[] }

/** Soft bits of one frame, positive for 0, proportional to the channel's power: a faded frame weighs less. */
function softBits(rows: Rows, references: ReferenceSymbols, at: FramePlace & { frame: number; channels: Float64Array[] }): Float64Array {
  const perSlot = symbolsPerSlot(rows.cut.prefix);
  const elements: Element[] = [];
  for (let l = 0; l < 4; l++) {
    const row = subcarriers(rows, at.frameSymbol + (20 * at.frame + 1) * perSlot + l, { ...at, half: HALF });
    if (row) elements.push(...broadcastElements(row, { l, cellId: references.cellId, prefix: rows.cut.prefix, channels: at.channels }));
  }
  return separate(elements, at.channels.length);
}

/** Elements in the order of mapping; those of four ports' reference symbols are left free whatever the ports (TS 36.211 clause 6.6.4). */
function broadcastElements(row: Float64Array, at: { l: number; cellId: number; prefix: Rows['cut']['prefix']; channels: Float64Array[] }): Element[] {
  const offsets = [0, 1, 2, 3].map((port) => combOffset({ port, slot: 1, l: at.l, prefix: at.prefix, cellId: at.cellId }));
  const out: Element[] = [];
  for (let i = 0; i < 2 * HALF; i++) {
    if (offsets.includes(i % 6)) continue;
    const place = 2 * (i < HALF ? i : i + 1);
    out.push({ re: row[place], im: row[place + 1], h: at.channels.map((h) => ({ re: h[place], im: h[place + 1] })) });
  }
  return out;
}

/** Soft QPSK symbols (re, im = the two bits) with transmit diversity undone: TS 36.211 clauses 6.3.3.3, 6.3.4.3. */
function separate(elements: readonly Element[], ports: number): Float64Array {
  const out = new Float64Array(2 * elements.length);
  if (ports === 1) {
    elements.forEach(({ re, im, h: [h] }, i) => {
      out[2 * i] = re * h.re + im * h.im;
      out[2 * i + 1] = im * h.re - re * h.im;
    });
    return out;
  }
  for (let i = 0; i + 1 < elements.length; i += 2) {
    const a = elements[i], b = elements[i + 1];
    const [p, q] = ports === 2 ? [0, 1] : i % 4 === 0 ? [0, 2] : [1, 3];
    const ha = a.h[p], hb = b.h[p], ga = a.h[q], gb = b.h[q];
    // Received: a = h·x₀ − g·x₁*, b = h·x₁ + g·x₀*.
    out[2 * i] = ha.re * a.re + ha.im * a.im + gb.re * b.re + gb.im * b.im;
    out[2 * i + 1] = ha.re * a.im - ha.im * a.re + gb.im * b.re - gb.re * b.im;
    out[2 * i + 2] = hb.re * b.re + hb.im * b.im - ga.re * a.re - ga.im * a.im;
    out[2 * i + 3] = hb.re * b.im - hb.im * b.re - ga.im * a.re + ga.re * a.im;
  }
  return out;
}
