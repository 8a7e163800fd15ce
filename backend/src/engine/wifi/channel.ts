import type { CarrierRest, Frame } from './frame.js';
import type { GuardMeasurement } from './guard-interval.js';
import { TONE_SPACING_HZ } from './training.js';

/** Where the whole channel lies. */
export interface ChannelPlace {
  /** Its DC tone against the capture's centre, Hz; modulo the tone spacing where it could not be placed. */
  readonly hz: number;
  readonly placed: boolean;
  /** Width, null where it could not be placed. */
  readonly widthHz: number | null;
}

/**
 * The DC tone of the whole channel: the middle of its 20 MHz subchannels, which every frame of
 * the group shows with its long training; the turn of known symbols and the data's guard
 * intervals refine the frequency. `announced` is the number of subchannels, null if not said.
 */
export function placeChannel(group: readonly Frame[], guard: GuardMeasurement | null, announced: number | null): ChannelPlace {
  const { piece } = group[0].preamble;
  const width = 20e6 / piece.clock;
  const index = (frame: Frame) => Math.round((frame.preamble.piece.offsetHz - piece.offsetHz) / width);
  const first = firstSubchannel(evidenceBySubchannel(group, index), announced, group.length);
  const middle = first ? first.at + (first.count - 1) / 2 : 0;
  const hz = weightedMean(group.flatMap((frame, i) => {
    const coarse = frame.preamble.piece.offsetHz + (middle - index(frame)) * width;
    const rests = [frame.rest, guard?.rest[i] ?? null].filter((rest) => rest !== null);
    return [{ hz: coarse, varianceHz2: UNREFINED_HZ2 }, ...rests.map((rest) => ({ hz: coarse + rest.hz, varianceHz2: rest.varianceHz2 }))];
  }));
  if (first) return { hz, placed: true, widthHz: first.count * width };
  const raster = TONE_SPACING_HZ / piece.clock;
  return { hz: hz - raster * Math.round(hz / raster), placed: false, widthHz: null };
}

/** Of the offset from the long training's repetition alone. */
const UNREFINED_HZ2 = 1e8;

/** Σ over frames of the squared score less its mean by chance. */
function evidenceBySubchannel(group: readonly Frame[], index: (frame: Frame) => number): Map<number, number> {
  const sums = new Map<number, number>();
  for (const frame of group) {
    for (const [channel, square] of frame.preamble.fits) {
      const at = channel + index(frame);
      sums.set(at, (sums.get(at) ?? 0) + square - 1);
    }
  }
  return sums;
}

/** The other places must be this much less likely, nats. */
const LEAST_MARGIN = 5;

/** Where `announced` subchannels lie, all of them in the band; without an announcement, those that stand out beside the strongest. */
function firstSubchannel(evidence: ReadonlyMap<number, number>, announced: number | null, frames: number): { at: number; count: number } | null {
  if (announced === null) {
    const present = (at: number) => (evidence.get(at) ?? 0) > Math.max(9, 4 * Math.sqrt(frames));
    let low = 0, high = 0;
    while (present(low - 1)) low--;
    while (present(high + 1)) high++;
    return { at: low, count: high - low + 1 };
  }
  const places = [...evidence.keys()].flatMap((at) => {
    const members = Array.from({ length: announced }, (_, i) => evidence.get(at + i));
    return members.every((sum) => sum !== undefined) ? [{ at, sum: members.reduce<number>((a, b) => a + (b ?? 0), 0) }] : [];
  }).sort((a, b) => b.sum - a.sum);
  if (!places[0] || (places[1] && places[0].sum - places[1].sum < LEAST_MARGIN)) return null;
  return { at: places[0].at, count: announced };
}

/** Frames that lie elsewhere (another transmitter) are left out: the mean is of those near the median. */
function weightedMean(values: readonly CarrierRest[]): number {
  const sorted = values.map(({ hz }) => hz).sort((a, b) => a - b);
  const middle = sorted[sorted.length >> 1];
  let sum = 0, weights = 0;
  for (const { hz, varianceHz2 } of values) {
    if (Math.abs(hz - middle) > 30_000) continue;
    sum += hz / (varianceHz2 + 1);
    weights += 1 / (varianceHz2 + 1);
  }
  return sum / weights;
}
