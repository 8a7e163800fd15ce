/**
 * OFDM as its definition has it: a bank of oscillators, one a subcarrier, read at any sample
 * rate. No transform, no table of the engine's. Seeded, so that a failure can be repeated.
 */
export interface SmallOfdm {
  readonly spacingHz: number;
  /** Prefix of symbol number l, counted from the first, s. */
  readonly prefixS: (l: number) => number;
  readonly subcarriers: number;
  readonly rateHz: number;
  readonly durationS: number;
  readonly snrDb: number;
  readonly offsetHz?: number;
  readonly levels?: number;
  readonly seed?: number;
  /** Signal before the first symbol that is recorded, s: where the recording starts. */
  readonly lateS?: number;
  /** Which symbols are sent; default all. */
  readonly sent?: (l: number) => boolean;
}

export function mulberry(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
}

/** Two independent normal variates (Box and Muller 1958). */
export function normalPair(random: () => number): [number, number] {
  const r = Math.sqrt(-2 * Math.log(1 - random()));
  const a = 2 * Math.PI * random();
  return [r * Math.cos(a), r * Math.sin(a)];
}

/** Interleaved samples of signal power 1 (while it is on), white noise of the stated ratio in the signal's band, offset applied. */
export function smallOfdm(plan: SmallOfdm): Float32Array {
  const random = mulberry(plan.seed ?? 1);
  const samples = Math.floor(plan.durationS * plan.rateHz);
  const iq = new Float32Array(2 * samples);
  let start = -(plan.lateS ?? 0);
  for (let l = 0; start < plan.durationS; l++) {
    const prefix = plan.prefixS(l);
    const end = start + prefix + 1 / plan.spacingHz;
    const data = symbolData(plan, random);
    if (end > 0 && (plan.sent?.(l) ?? true)) addSymbol(iq, plan, { data, start, end, useful: start + prefix });
    start = end;
  }
  return noisy(shifted(iq, plan.offsetHz ?? 0, plan.rateHz), noisePower(plan), random);
}

export function noisePower({ snrDb, rateHz, subcarriers, spacingHz }: SmallOfdm): number {
  return (10 ** (-snrDb / 10) * rateHz) / (subcarriers * spacingHz);
}

function symbolData({ subcarriers, levels = 2 }: SmallOfdm, random: () => number): Float64Array {
  const scale = Math.sqrt((2 * (levels * levels - 1)) / 3) * Math.sqrt(subcarriers);
  return Float64Array.from({ length: 2 * subcarriers }, () => (2 * Math.floor(random() * levels) - levels + 1) / scale);
}

interface Placed { data: Float64Array; start: number; end: number; useful: number }

function addSymbol(iq: Float32Array, { rateHz, subcarriers, spacingHz }: SmallOfdm, { data, start, end, useful }: Placed): void {
  const first = Math.max(0, Math.ceil(start * rateHz - 1e-9));
  const last = Math.min(iq.length / 2, Math.ceil(end * rateHz - 1e-9));
  for (let n = first; n < last; n++) {
    const turn = spacingHz * (n / rateHz - useful);
    const stepRe = Math.cos(2 * Math.PI * turn);
    const stepIm = Math.sin(2 * Math.PI * turn);
    let re = Math.cos(-Math.PI * turn * subcarriers);
    let im = Math.sin(-Math.PI * turn * subcarriers);
    for (let k = 0; k < subcarriers; k++) {
      iq[2 * n] += data[2 * k] * re - data[2 * k + 1] * im;
      iq[2 * n + 1] += data[2 * k] * im + data[2 * k + 1] * re;
      const next = re * stepRe - im * stepIm;
      im = re * stepIm + im * stepRe;
      re = next;
    }
  }
}

function shifted(iq: Float32Array, hz: number, rateHz: number): Float32Array {
  for (let n = 0; n < iq.length / 2; n++) {
    const angle = (2 * Math.PI * hz * n) / rateHz;
    const re = iq[2 * n] * Math.cos(angle) - iq[2 * n + 1] * Math.sin(angle);
    iq[2 * n + 1] = iq[2 * n] * Math.sin(angle) + iq[2 * n + 1] * Math.cos(angle);
    iq[2 * n] = re;
  }
  return iq;
}

export function noisy(iq: Float32Array, power: number, random: () => number): Float32Array {
  const scale = Math.sqrt(power / 2);
  for (let n = 0; n < iq.length; n += 2) {
    const [a, b] = normalPair(random);
    iq[n] += scale * a;
    iq[n + 1] += scale * b;
  }
  return iq;
}

export function white(samples: number, seed: number): Float32Array {
  return noisy(new Float32Array(2 * samples), 1, mulberry(seed));
}

/** Prefixes of TS 38.211 clause 5.3.1 in seconds: 144·2^−µ T_s, 16 T_s more at l = 0 and 7·2^µ of each subframe. */
export function nrPrefix(mu: number): (l: number) => number {
  const ts = 1 / (15_000 * 2048);
  return (l) => (144 / 2 ** mu + (l % (7 * 2 ** mu) === 0 ? 16 : 0)) * ts;
}
