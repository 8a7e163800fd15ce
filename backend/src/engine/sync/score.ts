import { fold } from './fold.js';
import { periodOf, type Hypothesis } from './hypotheses.js';
import type { LagSums } from './lag-sums.js';
import { match, type Match } from './match.js';
import { productSpectrum, type ProductSpectrum, type Span } from './product-spectrum.js';

/** A hypothesis with what the window says of it. */
export interface Scored {
  readonly hypothesis: Hypothesis;
  /** Evidence in nats over what chance gives at the best placing: see `Match.score`. */
  readonly score: number;
  readonly likeness: number;
  /**
   * Correlation within the prefixes: signal / (signal + noise) for a prefix, however short; only
   * the repeating part of it at a lag where a comb of pilots repeats.
   */
  readonly rho: number;
  /** The strongest span's match and the block its phase counts from; null where no span was long enough. */
  readonly best: { readonly match: Match; readonly origin: number; readonly span: Span } | null;
  readonly sums: LagSums;
  /** Over which blocks (of `hop` samples) it was scored, and whether each span had a timing of its own. */
  readonly spans: { readonly blocks: readonly Span[]; readonly hop: number; readonly apart: boolean };
}

export interface Products {
  readonly sums: LagSums;
  readonly rateHz: number;
}

/** Spans that are folded with one timing, and the spectrum of the products in them. */
export interface Stretch {
  readonly spans: readonly Span[];
  readonly spectrum: ProductSpectrum;
}

export function stretchOf(sums: LagSums, spans: readonly Span[]): Stretch {
  return { spans, spectrum: productSpectrum(sums, spans) };
}

/** Scores one hypothesis over the whole window with one timing: what a transmitter that never restarts its clock gives. */
export function scoreCoherent({ sums, rateHz }: Products, hypothesis: Hypothesis, { spans, spectrum }: Stretch): Scored {
  const folded = fold(sums, { period: (periodOf(hypothesis) * rateHz) / sums.hop, spans, spectrum });
  if (!folded) return emptyScore(hypothesis, sums);
  const found = match(folded, hypothesis);
  return {
    hypothesis, score: found.score - Math.log(found.placings), likeness: found.likeness,
    rho: Math.hypot(found.re, found.im) / Math.max(1e-300, found.power), best: { match: found, origin: folded.origin, span: spans[0] }, sums,
    spans: { blocks: spans, hop: sums.hop, apart: false },
  };
}

/** As it was scored first, at another lag or with other blocks: span by span, or all with one timing. */
export function rescore(products: Products, { hypothesis, spans }: Scored): Scored {
  const { sums, rateHz } = products;
  const scale = (s: Span, hop: number): Span => ({
    from: Math.ceil((s.from * hop) / sums.hop), to: Math.min(sums.re.length, Math.floor((s.to * hop) / sums.hop)),
  });
  const stretches = spans.blocks.map((s) => scale(s, spans.hop)).filter((s) => s.to > s.from);
  if (stretches.length === 0) return { ...emptyScore(hypothesis, sums), spans };
  if (!spans.apart) return scoreCoherent({ sums, rateHz }, hypothesis, stretchOf(sums, stretches));
  return scoreBursts(products, hypothesis, stretches.map((s) => stretchOf(sums, [s])));
}

function emptyScore(hypothesis: Hypothesis, sums: LagSums): Scored {
  return { hypothesis, score: 0, likeness: 0, rho: 0, best: null, sums, spans: { blocks: [], hop: sums.hop, apart: false } };
}

/** Scores one hypothesis span by span, each with a timing of its own: bursts that start when they like. */
export function scoreBursts(products: Products, hypothesis: Hypothesis, bursts: readonly Stretch[]): Scored {
  let score = 0;
  let likeness = 0;
  let rho = 0;
  let weight = 0;
  let best: Scored['best'] = null;
  for (const burst of bursts) {
    const one = scoreCoherent(products, hypothesis, burst);
    if (!one.best) continue;
    // The maximum of `placings` exponentials has the mean ln(placings) + 0.58: a span without the hypothesis adds nothing.
    score += one.score - 0.58;
    likeness += one.likeness * one.best.match.score;
    rho += one.rho * one.best.match.score;
    weight += one.best.match.score;
    if (!best || one.best.match.score > best.match.score) best = one.best;
  }
  return { hypothesis, score, likeness: weight > 0 ? likeness / weight : 0, rho: weight > 0 ? rho / weight : 0, best, sums: products.sums, spans: { blocks: bursts.flatMap((b) => b.spans), hop: products.sums.hop, apart: true } };
}
