import { periodOf, uniformPrefix, type Hypothesis } from './hypotheses.js';
import { lagSums, type LagSums } from './lag-sums.js';
import type { Prepared, Stretch } from './prepare.js';
import type { Span } from './product-spectrum.js';
import { rescore, type Scored } from './score.js';
import { prefixAngle, sharpLag } from './sharp-lag.js';

/** Where the symbols lie and how strong they are, in working samples and Hz about the working zero. */
export interface Refined {
  readonly scored: Scored;
  /** First sample of the period's first prefix, fractional, ≥ 0. */
  readonly start: number;
  /** Offset of the subcarriers from whole multiples of the spacing, within ± half of it. */
  readonly residueHz: number;
  /** Signal to noise over the working band while the signal is on; null where it cannot be told. */
  readonly snr: number | null;
}

/** A prefix in this many blocks: timing to a tenth of that. */
const BLOCKS_PER_PREFIX = 24;

export function refine(window: Prepared, coarse: Scored): Refined {
  const hop = Math.max(1, Math.floor((coarse.hypothesis.cyclicPrefixS * window.rateHz) / BLOCKS_PER_PREFIX));
  const sums = hop < coarse.sums.hop ? lagSums(window, coarse.sums.lag, hop) : coarse.sums;
  const fine = hop < coarse.sums.hop ? rescore({ sums, rateHz: window.rateHz }, coarse) : coarse;
  const placed = fine.best && fine.score > 0.6 * coarse.score ? fine : coarse;
  const scored = placed.hypothesis.family === 'free' ? [1, 2].reduce((at) => withPeriod(window, withLag(window, at)), placed) : placed;
  const { hypothesis } = scored;
  const { match, span } = scored.best!;
  const start = startOf(window, scored);
  const own = prefixAngle(window, { start, hypothesis, within: withinOf(scored) });
  const residueHz = (own?.angle ?? Math.atan2(match.im, match.re)) / (2 * Math.PI * hypothesis.usefulS);
  return { scored, start, residueHz, snr: prefixSnr(window, { sums: scored.sums, start, hypothesis, angle: Math.atan2(match.im, match.re), span: scored.spans.apart ? span : null }) };
}

/** A free hypothesis's lag sharpened, its symbol period kept: echoes and a coarse search leave it some tenths of a sample off. */
function withLag(window: Prepared, placed: Scored): Scored {
  const { usefulS, cyclicPrefixS, longEvery } = placed.hypothesis;
  const sharp = longEvery === null ? sharpLag(window, { start: startOf(window, placed), hypothesis: placed.hypothesis, within: withinOf(placed) }) : null;
  if (!sharp) return placed;
  const deviation = Math.max(sharp.deviation, (SYSTEMATIC * window.rateHz) / window.bandHz);
  const lag = roundLag({ ...sharp, deviation }, window.rateHz);
  const hypothesis = uniformPrefix({ usefulS: lag / window.rateHz, cyclicPrefixS: usefulS + cyclicPrefixS - lag / window.rateHz, family: 'free' });
  return rescore({ sums: lagSums(window, lag, placed.sums.hop), rateHz: window.rateHz }, { ...placed, hypothesis });
}

/** Spacings are made by dividing clocks: what lies within the lag's error of a round number is taken for it, where chance would seldom bring one so near. */
const ROUND_HZ = [5000, 2500, 1000, 500, 250, 125];
const WITHIN = 3;
const SELDOM = 0.15;
/** What filters and the symbols' seams leave of an error, in 1/band. */
const SYSTEMATIC = 0.006;

function roundLag({ lag, deviation }: { lag: number; deviation: number }, rateHz: number): number {
  const spacing = rateHz / lag;
  const doubt = (WITHIN * spacing * deviation) / lag;
  const round = ROUND_HZ.find((step) => 2 * doubt < SELDOM * step && Math.abs(spacing - step * Math.round(spacing / step)) < doubt);
  return round === undefined ? lag : rateHz / (round * Math.round(spacing / round));
}

function startOf(window: Prepared, { best, hypothesis, sums }: Scored): number {
  const period = (periodOf(hypothesis) * window.rateHz) / sums.hop;
  return (best!.origin + best!.match.phase * period) * sums.hop;
}

function withinOf({ spans, best, sums }: Scored): Stretch | null {
  return spans.apart ? { start: best!.span.from * sums.hop, end: best!.span.to * sums.hop } : null;
}

/** A free hypothesis's period sharpened: an error of a hundredth of the prefix adds up from symbol to symbol. */
function withPeriod(window: Prepared, placed: Scored): Scored {
  const { usefulS, longEvery } = placed.hypothesis;
  if (longEvery !== null) return placed;
  const length = placed.spans.blocks.reduce((n, s) => Math.max(n, s.to - s.from), 0) * placed.spans.hop;
  const symbols = Math.max(8, length / (window.rateHz * periodOf(placed.hypothesis)) * placed.hypothesis.prefixesS.length);
  let best = placed;
  for (let step = placed.hypothesis.cyclicPrefixS / symbols, i = 0; i < 9; i++) {
    const around = [-step, step].map((d) => uniformPrefix({ usefulS, cyclicPrefixS: best.hypothesis.cyclicPrefixS + d, family: 'free' }))
      .map((hypothesis) => rescore({ sums: best.sums, rateHz: window.rateHz }, { ...best, hypothesis }));
    const better = around.find((s) => s.score > best.score);
    if (better) best = better;
    else step /= 2;
  }
  return best;
}

/** `span`: the burst that the timing belongs to, where bursts have timings of their own. */
interface Placed { sums: LagSums; start: number; hypothesis: Hypothesis; angle: number; span: Span | null }

/**
 * Signal to noise from the prefixes themselves (van de Beek, Sandell and Börjesson, IEEE Trans.
 * Signal Process. 45 (1997) 1800: the correlation coefficient is S / (S + N)), over their later
 * part, which a channel's echoes reach least, in the symbols that are on.
 */
function prefixSnr(window: Prepared, { sums, start, hypothesis, angle, span }: Placed): number | null {
  const prefixes = prefixBlocks(window, { sums, start, hypothesis, angle, span })
    .filter(({ from, to }) => span === null || (span.from <= from && to <= span.to))
    .filter(({ from, to }) => within(window.on, from * sums.hop, to * sums.hop + sums.lag));
  let product = 0;
  let power = 0;
  const late = Math.round(sums.lag / sums.hop);
  for (const { from, to } of prefixes) {
    for (let b = from; b < to; b++) {
      product += sums.re[b] * Math.cos(angle) + sums.im[b] * Math.sin(angle);
      power += (sums.power[b] + (sums.power[b + late] ?? sums.power[b])) / 2;
    }
  }
  const rho = product / power;
  return rho > 0 && rho < 1 ? rho / (1 - rho) : null;
}

function prefixBlocks(window: Prepared, { sums, start, hypothesis }: Placed): { from: number; to: number }[] {
  const out: { from: number; to: number }[] = [];
  const scale = window.rateHz / sums.hop;
  let at = start / sums.hop - periodOf(hypothesis) * scale;
  for (let l = 0; at < sums.re.length; l = (l + 1) % hypothesis.prefixesS.length) {
    const prefix = hypothesis.prefixesS[l] * scale;
    const from = Math.ceil(at + 0.45 * prefix);
    const to = Math.floor(at + 0.95 * prefix);
    if (from >= 0 && to > from && to <= sums.re.length) out.push({ from, to });
    at += prefix + hypothesis.usefulS * scale;
  }
  return out;
}

function within(on: readonly Stretch[], from: number, to: number): boolean {
  return on.some((s) => s.start <= from && to <= s.end);
}
