import { neighbourCoherence } from './reference.js';
import type { CombChannel } from './reference.js';

/**
 * Timing drift, in millionths (positive: the transmitter's symbols come early, its clock is
 * fast), with its standard deviation: the scatter about the line, and what a channel that
 * changes during the window may add by shifting its centre of gravity.
 */
export function clockDrift(combs: readonly CombChannel[], at: { size: number; perSlot: number; noise: number }): { ppm: number; sigmaPpm: number } | null {
  const { size, perSlot } = at;
  const times: number[] = [], delays: number[] = [];
  for (let c = 0; c + 1 < combs.length; c++) {
    const { angle, score } = neighbourCoherence(combs.slice(c, c + 2), { inner: 0, outer: 9999 });
    if (score === 0) continue;
    times.push((combs[c].symbol / perSlot) * 7.5 * size);
    delays.push((-angle * size) / (2 * Math.PI * 3));
  }
  const fit = line(times, delays);
  if (!fit) return null;
  const wander = centroidWander(combs, { ...at, slope: fit.slope }) / Math.max(1, times[times.length - 1] - times[0]);
  return { ppm: -1e6 * fit.slope, sigmaPpm: 1e6 * Math.hypot(fit.deviation, wander) };
}

/** Spread of the delays (samples, from how neighbours agree) times how much the channel has changed from the first quarter to the last. */
function centroidWander(combs: readonly CombChannel[], { size, perSlot, noise, slope }: { size: number; perSlot: number; noise: number; slope: number }): number {
  const quarter = Math.max(2, combs.length >> 2);
  const early = averaged(combs.slice(0, quarter));
  const late = averaged(combs.slice(-quarter));
  const samplesApart = ((combs[combs.length - quarter].symbol - combs[0].symbol) / perSlot) * 7.5 * size;
  const turn = (2 * Math.PI * slope * samplesApart) / size;
  const across = new Likeness(), near = new Likeness();
  for (const [k, a] of early) {
    const b = late.get(k);
    if (b) across.add(a, b, { noise, turn: turn * k });
    const next = early.get(k + 3);
    if (next) near.add(a, next, { noise, turn: 0 });
  }
  // |R(3 subcarriers)| ≈ 1 − (2π·3·spread)²/2 with the spread in useful symbols.
  const spread = (Math.sqrt(2 * (1 - near.value())) / (2 * Math.PI * 3)) * size;
  // Twice the root mean square shift that two such channels have: this is a bound, not a scatter.
  return 2 * spread * Math.sqrt(2 * (1 - across.value()));
}

interface Averaged { readonly re: number; readonly im: number; readonly count: number }

/** |Σ b·a*| over the powers without noise, at most 1. */
class Likeness {
  private re = 0;
  private im = 0;
  private powerA = 0;
  private powerB = 0;

  add(a: Averaged, b: Averaged, { noise, turn }: { noise: number; turn: number }): void {
    const re = b.re * a.re + b.im * a.im;
    const im = b.im * a.re - b.re * a.im;
    this.re += re * Math.cos(turn) - im * Math.sin(turn);
    this.im += im * Math.cos(turn) + re * Math.sin(turn);
    this.powerA += a.re ** 2 + a.im ** 2 - noise / a.count;
    this.powerB += b.re ** 2 + b.im ** 2 - noise / b.count;
  }

  value(): number {
    if (!(this.powerA > 0 && this.powerB > 0)) return 0;
    return Math.min(1, Math.hypot(this.re, this.im) / Math.sqrt(this.powerA * this.powerB));
  }
}

function averaged(combs: readonly CombChannel[]): Map<number, Averaged> {
  const sums = new Map<number, Averaged>();
  for (const { subcarriers: ks, h } of combs) {
    ks.forEach((k, i) => {
      const sum = sums.get(k) ?? { re: 0, im: 0, count: 0 };
      sums.set(k, { re: sum.re + h[2 * i], im: sum.im + h[2 * i + 1], count: sum.count + 1 });
    });
  }
  for (const [k, { re, im, count }] of sums) sums.set(k, { re: re / count, im: im / count, count });
  return sums;
}

function line(x: readonly number[], y: readonly number[]): { slope: number; deviation: number } | null {
  const n = x.length;
  if (n < 8) return null;
  const mx = x.reduce((a, b) => a + b, 0) / n, my = y.reduce((a, b) => a + b, 0) / n;
  let xx = 0, xy = 0;
  for (let i = 0; i < n; i++) {
    xx += (x[i] - mx) ** 2;
    xy += (x[i] - mx) * (y[i] - my);
  }
  const slope = xy / xx;
  let rest = 0;
  for (let i = 0; i < n; i++) rest += (y[i] - my - slope * (x[i] - mx)) ** 2;
  return { slope, deviation: Math.sqrt(rest / (n - 2) / xx) };
}
