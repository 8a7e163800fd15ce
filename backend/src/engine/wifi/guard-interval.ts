import type { SampleSource } from '../types.js';
import type { CarrierRest, Frame } from './frame.js';
import { readPiece } from './piece.js';
import type { Piece } from './piece.js';
import { meanPower } from '../vector/power.js';

/** A guard interval that the data may have, nominal µs. */
export interface GuardHypothesis {
  readonly usefulUs: 3.2 | 12.8;
  readonly guardUs: 0.4 | 0.8 | 1.6 | 3.2;
}

/** IEEE 802.11-2016 Tables 17-5, 19-6, 21-5; IEEE 802.11ax Table 27-12. */
const LEGACY_GUARDS: readonly GuardHypothesis[] = [{ usefulUs: 3.2, guardUs: 0.4 }, { usefulUs: 3.2, guardUs: 0.8 }];
const HE_GUARDS: readonly GuardHypothesis[] = [
  { usefulUs: 12.8, guardUs: 0.8 }, { usefulUs: 12.8, guardUs: 1.6 }, { usefulUs: 12.8, guardUs: 3.2 },
];

export interface GuardMeasurement {
  readonly hypothesis: GuardHypothesis;
  /** Mean likeness of prefix and symbol's end under it, 0 to 1. */
  readonly coherence: number;
  /** Posterior among the hypotheses of the same useful length. */
  readonly confidence: number;
  /** Carrier offset that is left in each frame; null where its data are too short. */
  readonly rest: readonly (CarrierRest | null)[];
  /** Every hypothesis with its likeness, for the record. */
  readonly all: readonly { readonly hypothesis: GuardHypothesis; readonly coherence: number }[];
}

/** Longer stretches add nothing. */
const MOST_DATA_US = 480;

/**
 * The guard interval that the data symbols of these frames (of one format) have: products a
 * useful symbol apart, folded at each symbol length. The phase of the fold is left free, so
 * that a wrong reading of the frame's fields does no harm. Null without three whole symbols.
 */
export function measureGuard(source: SampleSource, frames: readonly Frame[]): GuardMeasurement | null {
  const wide = frames[0].format === 'he' || frames[0].format === 'eht';
  const hypotheses = wide ? HE_GUARDS : LEGACY_GUARDS;
  const sums = hypotheses.map(() => ({ gain: 0, re: 0, im: 0, energy: 0 }));
  const turns: (readonly Fold[] | null)[] = [];
  for (const frame of frames) {
    const piece = dataPiece(source, frame);
    if ((piece.iq.length >> 1) < 3.5 * (hypotheses[0].usefulUs + hypotheses[0].guardUs) * piece.samplesPerUs) {
      turns.push(null);
      continue;
    }
    const products = lagProducts(piece, hypotheses[0].usefulUs);
    const folds = hypotheses.map((hypothesis) => bestFold(products, piece, hypothesis));
    turns.push(folds);
    folds.forEach((fold, i) => {
      const share = Math.min(0.9999, Math.hypot(fold.re, fold.im) / Math.max(fold.energy, 1e-30));
      // Log-likelihood ratio of correlated against uncorrelated pairs (Wilks).
      sums[i].gain += -fold.samples * Math.log(1 - share * share);
      sums[i].re += fold.re;
      sums[i].im += fold.im;
      sums[i].energy += fold.energy;
    });
  }
  if (sums[0].energy === 0) return null;
  const best = sums.reduce((top, sum, i) => (sum.gain > sums[top].gain ? i : top), 0);
  const others = sums.reduce((sum, { gain }, i) => (i === best ? sum : sum + Math.exp(Math.max(-50, gain - sums[best].gain))), 0);
  const coherence = ({ re, im, energy }: { re: number; im: number; energy: number }) => Math.hypot(re, im) / energy;
  return {
    hypothesis: hypotheses[best], coherence: coherence(sums[best]),
    confidence: Math.min(0.9995, 1 / (1 + others)) * (sums[best].gain > LEAST_GAIN ? 1 : 0.5),
    rest: turns.map((folds, i) => folds && carrierRest(folds[best], hypotheses[best].usefulUs * 1e-6 * frames[i].preamble.piece.clock)),
    all: hypotheses.map((hypothesis, i) => ({ hypothesis, coherence: coherence(sums[i]) })),
  };
}

/** Noise reaches ln(phases) + 1 or so in the best of some 300 phases. */
const LEAST_GAIN = 12;

/** The frame's data, moved to zero and upright, up to where the level falls. */
function dataPiece(source: SampleSource, frame: Frame): Piece {
  const { piece, startUs, channels } = frame.preamble;
  const perUs = source.sampleRateHz * 1e-6 * piece.clock;
  const width = 20e6 / piece.clock;
  const length = Math.min(MOST_DATA_US, frame.dataEndUs - frame.dataStartUs);
  const data = readPiece(source, {
    startSample: piece.startSample + (startUs + frame.dataStartUs) * perUs,
    nominalUs: Math.max(0, length), clock: piece.clock, inverted: piece.inverted,
    offsetHz: piece.offsetHz + ((channels[0] + channels[channels.length - 1]) / 2) * width, widthHz: channels.length * width,
  });
  return { ...data, iq: data.iq.subarray(0, 2 * levelEnd(data)) };
}

/** Sample at which two blocks of 8 µs in a row have less than half the power of the first two: the frame has ended. */
function levelEnd({ iq, samplesPerUs }: Piece): number {
  const block = 8 * samplesPerUs;
  const blocks = Math.floor((iq.length >> 1) / block);
  const power = Array.from({ length: blocks }, (_, b) => meanPower(iq, b * block, (b + 1) * block));
  const level = (power[0] + power[1]) / 2;
  for (let b = 2; b + 1 < blocks; b++) if (power[b] < 0.5 * level && power[b + 1] < 0.5 * level) return b * block;
  return iq.length >> 1;
}

/** From the phase of the products; its variance is that of a correlation's argument (Kay, Fundamentals of Statistical Signal Processing, 1993, clause 15.4). */
function carrierRest({ re, im, energy, samples }: Fold, lagS: number): CarrierRest {
  const share = Math.min(0.9999, Math.hypot(re, im) / energy);
  const toHz = 1 / (2 * Math.PI * lagS);
  return { hz: -Math.atan2(im, re) * toHz, varianceHz2: ((1 / share ** 2 - 1) / (2 * samples)) * toHz ** 2 };
}

interface Fold { readonly re: number; readonly im: number; readonly energy: number; readonly samples: number }

interface Products { readonly re: Float32Array; readonly im: Float32Array; readonly energy: Float32Array }

function lagProducts({ iq, samplesPerUs }: Piece, usefulUs: number): Products {
  const lag = Math.round(usefulUs * samplesPerUs);
  const count = Math.max(0, (iq.length >> 1) - lag);
  const re = new Float32Array(count), im = new Float32Array(count), energy = new Float32Array(count);
  for (let n = 0; n < count; n++) {
    const a = 2 * n, b = a + 2 * lag;
    re[n] = iq[a] * iq[b] + iq[a + 1] * iq[b + 1];
    im[n] = iq[a + 1] * iq[b] - iq[a] * iq[b + 1];
    energy[n] = 0.5 * (iq[a] ** 2 + iq[a + 1] ** 2 + iq[b] ** 2 + iq[b + 1] ** 2);
  }
  return { re, im, energy };
}

/** The part of the prefix that is used: its first quarter holds the echoes of the symbol before. */
const USED = 0.75;

function bestFold(products: Products, { samplesPerUs }: Piece, { usefulUs, guardUs }: GuardHypothesis): Fold {
  const period = Math.round((usefulUs + guardUs) * samplesPerUs);
  const width = Math.round(USED * guardUs * samplesPerUs);
  const symbols = Math.floor(products.re.length / period);
  const folded = [products.re, products.im, products.energy].map((values) => runningFold(values, period, symbols));
  const window = (sums: Float64Array, at: number) => sums[at + width] - sums[at];
  let best = { re: 0, im: 0, energy: 1e-30, samples: symbols * width }, top = -1;
  for (let at = 0; at < period; at++) {
    const [re, im, energy] = folded.map((sums) => window(sums, at));
    const value = Math.hypot(re, im) / Math.max(energy, 1e-30);
    if (value > top) {
      top = value;
      best = { re, im, energy, samples: symbols * width };
    }
  }
  return best;
}

/** Sums over whole periods, place by place, then running over two periods so that a window may cross the seam. */
function runningFold(values: Float32Array, period: number, periods: number): Float64Array {
  const out = new Float64Array(2 * period + 1);
  for (let k = 0; k < periods; k++) for (let p = 0; p < period; p++) out[p + 1] += values[k * period + p];
  for (let p = 1; p <= period; p++) out[period + p] = out[p];
  for (let p = 1; p <= 2 * period; p++) out[p] += out[p - 1];
  return out;
}
