import { sinc } from './lag-sums.js';
import { periodOf, type Hypothesis } from './hypotheses.js';
import type { Prepared, Stretch } from './prepare.js';

export interface SharpLag {
  /** Samples, fractional. */
  readonly lag: number;
  /** One standard deviation, samples. */
  readonly deviation: number;
}

export interface LagPlace {
  /** First sample of the period's first prefix. */
  readonly start: number;
  readonly hypothesis: Hypothesis;
  /** The only stretch whose symbols follow that timing, in samples; null: all of the window. */
  readonly within: Stretch | null;
}

/** Where in a prefix the used part may begin: its beginning holds the symbol before, by the channel's echoes. */
const FROM = [0.05, 0.2, 0.35, 0.5];
/** Towards its end the band's limit blurs the seam, over about 1/band. */
const TO = 0.94;
const BLUR = 1.2;
const SHORTEST = 0.2;
/** Sinc crossings by which the correlation is read between whole lags. */
const REACH = 6;
const FEWEST_PRODUCTS = 24;

/**
 * The lag at which prefixes repeat, to a small part of a sample: the peak of the correlation over
 * the inner parts of all prefixes, read between whole lags as what it is, a band-limited function
 * whose magnitude is even about the right lag whatever channel and offset. Its deviation is that
 * of a delay between two noisy copies of a signal of even spectrum over the band (Carter, Proc.
 * IEEE 75 (1987) 236): √variance of the angle over 2π·B/√12. Null where too little can be compared.
 */
export function sharpLag(window: Prepared, place: LagPlace): SharpLag | null {
  const peak = surest(window, place, (part) => part.peak());
  return peak && { lag: peak.lag, deviation: (Math.sqrt(peak.variance / 2) / ((2 * Math.PI * window.bandHz) / Math.sqrt(12))) * window.rateHz };
}

export interface PrefixAngle {
  /** 2π · offset · useful symbol, −π to π. */
  readonly angle: number;
  /** One standard deviation, as a part of a turn. */
  readonly deviation: number;
}

/** By how much a symbol's end is turned against its prefix, at the hypothesis's own lag (van de Beek et al. 1997, over the inner parts). */
export function prefixAngle(window: Prepared, place: LagPlace): PrefixAngle | null {
  const at = surest(window, place, (part) => part.at(place.hypothesis.usefulS * window.rateHz));
  return at && { angle: Math.atan2(at.im, at.re), deviation: Math.sqrt(at.variance / 2) / (2 * Math.PI) };
}

interface Reading {
  readonly lag: number;
  readonly re: number;
  readonly im: number;
  /** (1 − C²) / (C²·M), of a coherence C in M independent samples: twice the variance of the angle. */
  readonly variance: number;
}

/** The reading of the part of the prefixes that promises the least error: more of it, or less of the symbol before. */
function surest(window: Prepared, place: LagPlace, read: (part: Part) => Reading | null): Reading | null {
  let best: Reading | null = null;
  for (const from of FROM) {
    const parts = innerParts(window, place, from);
    const products = parts.reduce((n, p) => n + p.end - p.start, 0);
    if (products < FEWEST_PRODUCTS) break;
    const reading = read(new Part(window, parts, Math.round(place.hypothesis.usefulS * window.rateHz)));
    if (reading && (!best || reading.variance < best.variance)) best = reading;
  }
  return best;
}

function innerParts({ iq, rateHz, bandHz, on }: Prepared, { start, hypothesis, within }: LagPlace, from: number): Stretch[] {
  const lag = hypothesis.usefulS * rateHz;
  const last = (iq.length >> 1) - lag - 2 * REACH - 16;
  const allowed = within ? on.map((s) => ({ start: Math.max(s.start, within.start), end: Math.min(s.end, within.end) })) : on;
  const out: Stretch[] = [];
  let at = start - periodOf(hypothesis) * rateHz;
  for (let l = 0; at < last; l = (l + 1) % hypothesis.prefixesS.length) {
    const prefix = hypothesis.prefixesS[l]! * rateHz;
    const to = Math.max(from + SHORTEST, Math.min(TO, 1 - (BLUR * rateHz) / (bandHz * prefix)));
    const part = { start: Math.ceil(at + from * prefix), end: Math.floor(at + to * prefix) };
    if (part.start >= 16 && part.end > part.start && part.end < last && allowed.some((s) => s.start <= part.start && part.end + lag <= s.end)) out.push(part);
    at += prefix + lag;
  }
  return out;
}

/** The correlation of given parts with what follows a symbol later, as a function of the lag. */
class Part {
  private readonly reach: number;
  private readonly independent: number;
  private centre: number;
  private values: Float64Array;
  private power: number;

  constructor(private readonly window: Prepared, private readonly parts: readonly Stretch[], centre: number) {
    this.reach = REACH + Math.ceil((1.5 * window.rateHz) / window.bandHz);
    this.centre = centre;
    this.values = correlations(window.iq, parts, { ...this.lags, moved: 'late' });
    this.power = powerOf(window.iq, parts, centre);
    this.independent = Math.max(1, (parts.reduce((n, p) => n + p.end - p.start, 0) * window.bandHz) / window.rateHz);
  }

  /** Null where the correlation has no peak near the centre. */
  peak(): Reading | null {
    const margin = this.reach - REACH;
    const away = strongest(this.values, margin) - this.reach;
    if (away !== 0) {
      this.centre += away;
      this.values = correlations(this.window.iq, this.parts, { ...this.lags, moved: 'late' });
    }
    if (strongest(this.values, margin) !== this.reach) return null;
    const other = correlations(this.window.iq, this.parts, { ...this.lags, moved: 'early' });
    const at = peakNear((x) => magnitudeAt(this.values, x) + magnitudeAt(other, x), this.reach);
    return this.at(this.centre - this.reach + at);
  }

  at(lag: number): Reading {
    const { re, im } = between(this.values, lag - this.centre + this.reach);
    const coherence = Math.min(0.9999, Math.hypot(re, im) / this.power);
    return { lag, re, im, variance: (1 - coherence ** 2) / Math.max(1e-12, coherence ** 2 * this.independent) };
  }

  get lags(): Lags {
    return { centre: this.centre, reach: this.reach };
  }
}

interface Lags { centre: number; reach: number }

/** Which of the two copies moves with the lag while the other stays on its part. */
type Moved = 'late' | 'early';

/**
 * Σ x[n + lag]·x*[n] for every whole lag about the centre, interleaved. The short parts' ends
 * draw the peak to one side, as far to the other where the other copy moves.
 */
function correlations(iq: Float32Array, parts: readonly Stretch[], { centre, reach, moved }: Lags & { moved: Moved }): Float64Array {
  const out = new Float64Array(2 * (2 * reach + 1));
  for (let j = -reach; j <= reach; j++) {
    let re = 0;
    let im = 0;
    const early = moved === 'early' ? -j : 0;
    for (const { start, end } of parts) {
      for (let n = start + early; n < end + early; n++) {
        const a = iq[2 * n]!, b = iq[2 * n + 1]!, c = iq[2 * (n + centre + j)]!, d = iq[2 * (n + centre + j) + 1]!;
        re += c * a + d * b;
        im += d * a - c * b;
      }
    }
    out[2 * (j + reach)] = re;
    out[2 * (j + reach) + 1] = im;
  }
  return out;
}

function powerOf(iq: Float32Array, parts: readonly Stretch[], lag: number): number {
  let early = 0;
  let late = 0;
  for (const { start, end } of parts) {
    for (let i = 2 * start, j = 2 * (start + lag); i < 2 * end; i++, j++) {
      early += iq[i]! * iq[i]!;
      late += iq[j]! * iq[j]!;
    }
  }
  return Math.max(1e-30, Math.sqrt(early * late));
}

/** The strongest whole lag that is at least `margin` from the middle or nearer. */
function strongest(values: Float64Array, margin: number): number {
  const middle = values.length / 4 - 0.5;
  let best = middle;
  for (let i = middle - margin; i <= middle + margin; i++) if (magnitudeAt(values, i) > magnitudeAt(values, best)) best = i;
  return best;
}

function magnitudeAt(values: Float64Array, at: number): number {
  const { re, im } = between(values, at);
  return Math.hypot(re, im);
}

/** The value between whole lags, through a sinc under a raised cosine. */
function between(values: Float64Array, at: number): { re: number; im: number } {
  let re = 0;
  let im = 0;
  const first = Math.max(0, Math.ceil(at - REACH));
  const last = Math.min(values.length / 2 - 1, Math.floor(at + REACH));
  for (let i = first; i <= last; i++) {
    const weight = sinc(at - i) * (0.5 + 0.5 * Math.cos((Math.PI * (at - i)) / REACH));
    re += weight * values[2 * i]!;
    im += weight * values[2 * i + 1]!;
  }
  return { re, im };
}

/** Thirds of the interval until it is below a ten-thousandth of a sample. */
function peakNear(height: (at: number) => number, middle: number): number {
  let low = middle - 1;
  let high = middle + 1;
  while (high - low > 1e-4) {
    const third = (high - low) / 3;
    if (height(low + third) < height(high - third)) low += third;
    else high -= third;
  }
  return (low + high) / 2;
}
