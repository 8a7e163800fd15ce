/**
 * Soft-decision Viterbi decoding of the constraint-length-7 codes of cellular and wireless-LAN
 * radio (Viterbi, IEEE Trans. Inf. Theory 13 (1967) 260). Soft values are log-likelihood
 * ratios, positive for a 0 bit; 0 is an erasure. Rates follow from the number of generators.
 */

/** Generators in octal, the newest bit first: IEEE 802.11 clause 17.3.5.6. */
export const WIFI_CODE: readonly number[] = [0o133, 0o171];
/** TS 36.212 clause 5.1.3.1. */
export const LTE_CODE: readonly number[] = [0o133, 0o171, 0o165];

const STATES = 64;

export interface ViterbiResult {
  readonly bits: Uint8Array;
  /** Sum of the soft values that agree with the code word less those that do not. */
  readonly metric: number;
}

/** The code's output for the newest bit `bit` after the six bits in `state` (newest in bit 5), one bit a generator, first generator in bit 0. */
function outputs(generators: readonly number[]): Uint8Array {
  const out = new Uint8Array(2 * STATES);
  for (let word = 0; word < 2 * STATES; word++) {
    // word: newest bit in bit 6, as an octal generator reads from its highest bit.
    generators.forEach((g, j) => { out[word] |= parity(word & g) << j; });
  }
  return out;
}

export function parity(word: number): number {
  let p = word;
  for (let shift = 16; shift > 0; shift >>= 1) p ^= p >> shift;
  return p & 1;
}

/** Encodes `bits` from the given state (newest bit in bit 5); for a tail-biting word pass `tailState(bits)`. */
export function encode(bits: ArrayLike<number>, generators: readonly number[], startState = 0): Uint8Array {
  const table = outputs(generators);
  const out = new Uint8Array(bits.length * generators.length);
  let state = startState;
  for (let i = 0; i < bits.length; i++) {
    const word = (bits[i] << 6) | state;
    for (let j = 0; j < generators.length; j++) out[i * generators.length + j] = (table[word] >> j) & 1;
    state = word >> 1;
  }
  return out;
}

/** The state in which a tail-biting word both starts and ends: its last six bits. */
export function tailState(bits: ArrayLike<number>): number {
  let state = 0;
  for (let i = bits.length - 6; i < bits.length; i++) state = (bits[i] << 5) | (state >> 1);
  return state;
}

/** A word that starts in state 0; `tail` says whether its last six bits are known zeros. Soft values generator by generator for each bit. */
export function decodeFromZero(soft: ArrayLike<number>, generators: readonly number[], tail: boolean): ViterbiResult {
  const start = new Float64Array(STATES).fill(Number.NEGATIVE_INFINITY);
  start[0] = 0;
  const path = run(soft, generators, start);
  return traceBack(path, tail ? 0 : best(path.last));
}

/**
 * A tail-biting word (start state equals end state), maximum likelihood: from every start at
 * once; where the best path does not close, from each start by itself.
 */
export function decodeTailBiting(soft: ArrayLike<number>, generators: readonly number[]): ViterbiResult {
  const open = run(soft, generators, new Float64Array(STATES));
  const end = best(open.last);
  // No circle can be better than the best of all paths: where that is a circle, it is the word.
  if (startOf(open, end) === end) return traceBack(open, end);
  let found: ViterbiResult = { bits: new Uint8Array(open.bitCount), metric: Number.NEGATIVE_INFINITY };
  for (let state = 0; state < STATES; state++) {
    if (open.last[state] <= found.metric) continue;
    const start = new Float64Array(STATES).fill(Number.NEGATIVE_INFINITY);
    start[state] = 0;
    const path = run(soft, generators, start);
    if (path.last[state] > found.metric) found = traceBack(path, state);
  }
  return found;
}

/** Σ of soft values under the code word's signs: the log-likelihood up to a constant. */
export function wordMetric(soft: ArrayLike<number>, word: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < word.length; i++) sum += word[i] ? -soft[i] : soft[i];
  return sum;
}

interface Path {
  /** For each bit and state, which of the two predecessors survived. */
  readonly choice: Uint8Array;
  readonly last: Float64Array;
  readonly bitCount: number;
}

function run(soft: ArrayLike<number>, generators: readonly number[], start: Float64Array): Path {
  const rate = generators.length;
  const bitCount = Math.floor(soft.length / rate);
  const table = outputs(generators);
  const branch = new Float64Array(1 << rate);
  const choice = new Uint8Array(bitCount * STATES);
  const turns = [new Float64Array(STATES), new Float64Array(STATES)];
  let now = start;
  for (let i = 0; i < bitCount; i++) {
    branchMetrics(soft, i, branch);
    const next = turns[i & 1];
    for (let state = 0; state < STATES; state++) {
      // The new state's top bit is the bit that came in; its two predecessors differ in the bit that fell out.
      const word = ((state >> 5) << 6) | ((state & 31) << 1);
      const even = now[word & 63] + branch[table[word]];
      const odd = now[(word & 63) + 1] + branch[table[word + 1]];
      next[state] = odd > even ? odd : even;
      choice[i * STATES + state] = odd > even ? 1 : 0;
    }
    now = next;
  }
  return { choice, last: new Float64Array(now), bitCount };
}

/** The metric of each of the 2^rate output patterns of bit `i`. */
function branchMetrics(soft: ArrayLike<number>, i: number, branch: Float64Array): void {
  const rate = Math.log2(branch.length);
  for (let pattern = 0; pattern < branch.length; pattern++) {
    let sum = 0;
    for (let j = 0; j < rate; j++) sum += (pattern >> j) & 1 ? -soft[i * rate + j] : soft[i * rate + j];
    branch[pattern] = sum;
  }
}

function traceBack(path: Path, endState: number): ViterbiResult {
  const bits = new Uint8Array(path.bitCount);
  let state = endState;
  for (let i = path.bitCount - 1; i >= 0; i--) {
    bits[i] = state >> 5;
    state = ((state & 31) << 1) | path.choice[i * STATES + state];
  }
  return { bits, metric: path.last[endState] };
}

function startOf(path: Path, endState: number): number {
  let state = endState;
  for (let i = path.bitCount - 1; i >= 0; i--) state = ((state & 31) << 1) | path.choice[i * STATES + state];
  return state;
}

function best(metrics: Float64Array): number {
  let at = 0;
  for (let s = 1; s < metrics.length; s++) if (metrics[s] > metrics[at]) at = s;
  return at;
}
