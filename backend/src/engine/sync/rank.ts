import { CELLULAR, WIFI, normalPrefix, uniformPrefix, type Hypothesis } from './hypotheses.js';
import { kurtosis, LEAST_KURTOSIS } from './credible.js';
import { cyclicLags } from './cyclic-lags.js';
import { everyLag, scanLags, screened } from './lag-scan.js';
import { lagPeaks, lagSpectrum, type LagSpectrum } from './lag-spectrum.js';
import { lagSums, type LagSums } from './lag-sums.js';
import type { Span } from './product-spectrum.js';
import { periodPeaks } from './period-search.js';
import type { Prepared } from './prepare.js';
import { scoreBursts, scoreCoherent, stretchOf, type Products, type Scored, type Stretch } from './score.js';

export interface Ranking {
  /** Lag by lag, best first. */
  readonly groups: readonly LagGroup[];
  readonly lags: LagSpectrum;
}

/** The longest useful symbol that is looked for: 250 Hz spacing. */
const LONGEST_S = 4e-3;
/** A lag is found freely where it stands out of 100,000 lags' scatter with a chance below 1 in 10,000. */
const FREE_PEAK = 21;
/** Evidence from which on a symbol period found freely is worth a search for its other lags. */
const SEARCHED = 20;
/** A free period is looked for at a listed lag as well, once that lag shows something. */
const STIRRED = 15;
/** Useful symbols below this are so many in a window that half as many blocks in each serve. */
const SHORT_S = 5e-6;
/** Pauses are left out where they take this part of the window or more. */
const GATED = 0.8;
/** Enough for thousands of symbols at the widest spacings; more would only take time. */
const MOST_BLOCKS = 140_000;
const MOST_BURSTS = 12;
const NEVER_PAUSES = 0.99;
/** Preamble of a Wi-Fi frame: training and signalling symbols with a prefix that is not the data's. */
const PREAMBLE_S = 44e-6;

/** Every hypothesis, scored over one window: the listed ones first, others only where those leave it open. */
export function rank(window: Prepared): Ranking {
  const longest = Math.floor(Math.min(LONGEST_S * window.rateHz, (window.iq.length >> 1) / 6));
  const lags = lagSpectrum(window, Math.max(64, longest));
  const groups: LagGroup[] = [];
  for (const [lagS, listed] of byLag([...CELLULAR, ...WIFI])) {
    const lag = lagS * window.rateHz;
    if (lag >= 8 && lag <= longest) groups.push(scoreLag(window, lag, listed));
  }
  if (!groups.some(isDecisive) && kurtosis(window) > LEAST_KURTOSIS) searchFreely(window, { groups, lags, longest });
  return { groups: groups.sort((x, y) => y.merit - x.merit), lags };
}

interface Search { groups: LagGroup[]; lags: LagSpectrum; longest: number }

/** Lags from no list: correlation peaks, then a scan, then the lags that fit a symbol period already found. */
function searchFreely(window: Prepared, { groups, lags, longest }: Search): void {
  const shortest = Math.max(8, (14 * window.rateHz) / window.bandHz);
  const add = (lag: number) => {
    if (lag >= shortest && lag <= longest && groups.every((g) => !(g.free && Math.abs(g.lag - lag) < 0.3 * (window.rateHz / window.bandHz)))) {
      groups.push(scoreLag(window, lag, []));
    }
  };
  const peaks = lagPeaks(lags, { from: shortest, least: FREE_PEAK, count: 40 });
  for (const lag of screened(window, peaks.map((p) => p.lag), 5)) add(lag);
  // Without a peak nothing outshines a prefix, and a scan would find no more than the peaks did.
  if (peaks.length > 1 && !groups.some(isDecisive)) for (const { lag } of scanLags(window, { from: shortest, to: longest, count: 3 })) add(lag);
  // A narrow band has so few lags that each can be asked for its symbol periods: the correlation alone would need a stronger signal.
  if (standsOut(window) && !groups.some(isDecisive)) for (const { lag } of everyLag(window, { from: shortest, to: longest, count: 4 })) add(lag);
  const best = [...groups].sort((x, y) => y.merit - x.merit).find((g) => g.free && g.chosen.score > SEARCHED);
  if (!best) return;
  const { usefulS, cyclicPrefixS } = best.chosen.hypothesis;
  for (const lag of cyclicLags(window, (usefulS + cyclicPrefixS) * window.rateHz, 5)) add(lag);
}

/** Part of the rate above which a band fills the capture: then only noise, or what the correlation shows without help. */
const FILLED = 0.97;

function standsOut({ bandHz, rateHz }: Prepared): boolean {
  return bandHz < FILLED * rateHz;
}

/** All that was scored at one lag, and the hypothesis chosen there. */
export interface LagGroup {
  /** In working samples. */
  readonly lag: number;
  readonly scored: readonly Scored[];
  readonly chosen: Scored;
  /** True where free periods were tried at this lag. */
  readonly free: boolean;
  /** Evidence for this lag against others; see `meritOf`. */
  readonly merit: number;
}

/** A hypothesis from a list is kept unless a free one explains the same products clearly better. */
const KEPT = 0.9;
const PRESENT = 20;
/** Evidence by which one pattern of longer prefixes has to beat another: odds of 160,000 to 1. */
const PATTERN = 12;

function grouped(lag: number, scored: readonly Scored[], free: boolean): LagGroup {
  const most = Math.max(...scored.map((s) => s.score));
  const listed = scored.filter((s) => !isFree(s) && (s.score >= KEPT * most - 2 || (s.score > PRESENT && explains(s, bestOf(scored)))));
  const usual = bestOf(listed.length > 0 ? listed : scored);
  // The true pattern fits best wherever symbols are sent, so that a little is enough to tell one pattern from another.
  const pattern = bestOf(scored.filter((s) => s.hypothesis.longEvery !== null).concat(usual));
  const chosen = usual.hypothesis.longEvery !== null && pattern.score > 1.01 * usual.score + PATTERN ? pattern : usual;
  const alike = scored.filter((s) => s.score >= 0.85 * chosen.score);
  const likeness = Math.max(...alike.map((s) => s.likeness));
  return { lag, scored, chosen, free, merit: chosen.score <= 0 ? chosen.score : chosen.score * Math.sqrt(likeness) * chosen.rho };
}

/** The same prefix by another name: the cellular pattern's mean, found freely in bursts of a few slots. */
function explains(listed: Scored, free: Scored): boolean {
  const { prefixesS, cyclicPrefixS } = listed.hypothesis;
  const mean = prefixesS.reduce((a, b) => a + b, 0) / prefixesS.length;
  return free.spans.apart && Math.abs(free.hypothesis.cyclicPrefixS - mean) < 0.1 * cyclicPrefixS;
}

/** Free of every list: a free period, or a cellular pattern at a spacing that is none. */
function isFree({ hypothesis }: Scored): boolean {
  return !CELLULAR.includes(hypothesis) && !WIFI.includes(hypothesis);
}

function bestOf(scored: readonly Scored[]): Scored {
  return scored.reduce((a, b) => (b.score > a.score ? b : a));
}

function isDecisive({ chosen }: LagGroup): boolean {
  return chosen.score > 80 && chosen.likeness > 0.45 && chosen.rho > 0.05;
}

function byLag(hypotheses: readonly Hypothesis[]): Map<number, Hypothesis[]> {
  const lags = new Map<number, Hypothesis[]>();
  for (const h of hypotheses) lags.set(h.usefulS, [...(lags.get(h.usefulS) ?? []), h]);
  return lags;
}

function scoreLag(window: Prepared, lag: number, listed: readonly Hypothesis[]): LagGroup {
  const hop = Math.max(1, Math.floor(lag / (lag < SHORT_S * window.rateHz ? 32 : 64)));
  const sums = lagSums(window, lag, hop);
  const products = { sums, rateHz: window.rateHz };
  const whole = stretchOf(sums, [{ from: 0, to: Math.min(sums.re.length, MOST_BLOCKS) }]);
  const bursts = burstSpans(window, sums);
  const gate = onSpans(window, sums);
  const gated = gate ? stretchOf(sums, gate) : null;
  const out = listed.map((h) => scoreListed(products, h, { whole, gated, bursts }));
  const most = Math.max(0, ...out.map((s) => s.score));
  if (listed.length > 0 && most < STIRRED) return grouped(lag, out, false);
  return grouped(lag, [...out, ...scoreFree(products, { whole, gated, bursts }), ...scorePatterns(products, whole)], true);
}

interface Stretches { whole: Stretch; gated: Stretch | null; bursts: readonly Span[] }

function scoreListed(products: Products, h: Hypothesis, { whole, gated, bursts }: Stretches): Scored {
  if (h.family === 'cellular') {
    const ungated = scoreCoherent(products, h, whole);
    return gated ? better(ungated, scoreCoherent(products, h, gated)) : ungated;
  }
  const skip = (PREAMBLE_S * products.rateHz) / products.sums.hop;
  const data = bursts.map((s) => (s.to - s.from > 1.5 * skip ? { from: Math.floor(s.from + skip), to: s.to } : s));
  const continuous = scoreCoherent(products, h, whole);
  return data.length === 0 ? continuous : better(continuous, scoreBursts(products, h, data.map((s) => stretchOf(products.sums, [s]))));
}

function scoreFree(products: Products, { whole, bursts }: Stretches): Scored[] {
  const { sums, rateHz } = products;
  const usefulS = sums.lag / rateHz;
  const apart = bursts.map((s) => stretchOf(sums, [s]));
  const out: Scored[] = [];
  for (const stretches of apart.length > 1 ? [[whole], apart] : [[whole]]) {
    for (const { period } of periodPeaks(sums, stretches.map((s) => s.spectrum), 3)) {
      const cyclicPrefixS = (period * sums.hop) / rateHz - usefulS;
      const h = uniformPrefix({ usefulS, cyclicPrefixS, family: 'free' });
      out.push(stretches.length === 1 ? scoreCoherent(products, h, whole) : scoreBursts(products, h, apart));
    }
  }
  return out;
}

/** The cellular pattern of longer prefixes at any spacing: what a wrong rate label makes of it. */
function scorePatterns(products: Products, whole: Stretch): Scored[] {
  const usefulS = products.sums.lag / products.rateHz;
  return [0, 1, 2, 3].map((mu) => normalPrefix(mu, usefulS * 15e3 * 2 ** mu))
    .filter((h) => CELLULAR.every((c) => c.longEvery !== h.longEvery || Math.abs(c.usefulS / h.usefulS - 1) > 1e-3))
    .map((h) => scoreCoherent(products, h, whole));
}

function better(a: Scored, b: Scored): Scored {
  return b.score > a.score ? b : a;
}

/** Where the signal is on, a little before too (the level crosses its threshold late); null where it hardly pauses. */
function onSpans(window: Prepared, sums: LagSums): Span[] | null {
  const limit = Math.min(sums.re.length, MOST_BLOCKS);
  const spans: Span[] = [];
  for (const { start, end } of window.on) {
    const from = Math.max(spans.at(-1)?.to ?? 0, Math.floor((start - 0.15 * sums.lag) / sums.hop), 0);
    const to = Math.min(limit, Math.ceil((end - 0.9 * sums.lag) / sums.hop));
    if (to > from) spans.push({ from, to });
  }
  const total = spans.reduce((n, s) => n + s.to - s.from, 0);
  return total > 0 && total < GATED * limit ? spans : null;
}

/** None where the signal never pauses: the whole says the same. */
function burstSpans(window: Prepared, sums: LagSums): Span[] {
  const [first] = window.on;
  if (window.on.length === 1 && first && first.end - first.start > NEVER_PAUSES * (window.iq.length >> 1)) return [];
  return window.on
    .map(({ start, end }) => ({ from: Math.max(0, Math.ceil(start / sums.hop)), to: Math.min(sums.re.length, Math.floor((end - sums.lag) / sums.hop)) }))
    .filter((s) => s.to - s.from > (2.5 * sums.lag) / sums.hop)
    .sort((a, b) => b.to - b.from - (a.to - a.from))
    .slice(0, MOST_BURSTS);
}
