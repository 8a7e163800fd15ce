import type { PolarCode } from './polar.js';

/** A decoded message and its path metric: the smaller, the likelier. */
export interface PolarPath {
  readonly message: Uint8Array;
  readonly metric: number;
}

/**
 * Successive-cancellation list decoding with log-likelihood ratios (Tal and Vardy, IEEE Trans.
 * Inf. Theory 61 (2015) 2213; Balatsoukas-Stimming et al., IEEE Trans. Signal Process. 63 (2015)
 * 5165), min-sum. `llr` holds one value a codeword bit, positive for 0. Returns at most
 * `listSize` messages in the order of the sub-channels, likeliest first.
 */
export function polarListDecode(code: PolarCode, llr: ArrayLike<number>, listSize: number): PolarPath[] {
  const start = new Path(code.length);
  for (let i = 0; i < code.length; i++) start.llr[code.length + i] = llr[i];
  const list = new PathList(code, listSize, start);
  decodeNode(list, code.length, 0);
  return list.paths
    .sort((a, b) => a.metric - b.metric)
    .map((path) => ({ message: Uint8Array.from(code.information, (i) => path.decided[i]), metric: path.metric }));
}

/**
 * One path's memory. A node of size M keeps its ratios at M to 2M−1 of `llr`, the partial sums
 * of its first half in the same place of `left`; `sums` carries a finished node's bits upwards.
 */
class Path {
  readonly llr: Float64Array;
  readonly left: Uint8Array;
  readonly sums: Uint8Array;
  readonly decided: Uint8Array;
  metric = 0;

  constructor(length: number) {
    this.llr = new Float64Array(2 * length);
    this.left = new Uint8Array(2 * length);
    this.sums = new Uint8Array(length);
    this.decided = new Uint8Array(length);
  }

  copyFrom(other: Path): void {
    this.llr.set(other.llr);
    this.left.set(other.left);
    this.decided.set(other.decided);
    this.metric = other.metric;
  }
}

class PathList {
  paths: Path[];
  private readonly spare: Path[] = [];

  constructor(readonly code: PolarCode, readonly limit: number, start: Path) {
    this.paths = [start];
  }

  /** Both values of an information bit are followed; the best `limit` of the doubled list stay. */
  fork(position: number): void {
    const forks = this.paths.flatMap((path) => [0, 1].map((bit) => ({ path, bit, metric: path.metric + penalty(path.llr[1], bit) })));
    forks.sort((a, b) => a.metric - b.metric);
    const kept = forks.slice(0, this.limit);
    const taken = new Set<Path>();
    const next: Path[] = [];
    // Copies first: the parent's memory is still whole then.
    const moves = kept.map((fork) => {
      if (!taken.has(fork.path)) {
        taken.add(fork.path);
        return { ...fork, target: fork.path };
      }
      const target = this.spare.pop() ?? new Path(this.code.length);
      target.copyFrom(fork.path);
      return { ...fork, target };
    });
    for (const { target, bit, metric } of moves) {
      target.metric = metric;
      target.decided[position] = bit;
      target.sums[0] = bit;
      next.push(target);
    }
    for (const path of this.paths) if (!taken.has(path)) this.spare.push(path);
    this.paths = next;
  }
}

/** What deciding `bit` against the ratio costs. */
function penalty(llr: number, bit: number): number {
  return bit === (llr < 0 ? 1 : 0) ? 0 : Math.abs(llr);
}

/** Decodes the `size` sub-channels from `position` on, in every path; their code bits end in `sums`. */
function decodeNode(list: PathList, size: number, position: number): void {
  if (size === 1) {
    decide(list, position);
    return;
  }
  const half = size / 2;
  for (const path of list.paths) minSum(path.llr, half);
  decodeNode(list, half, position);
  for (const path of list.paths) {
    path.left.set(path.sums.subarray(0, half), half);
    combine(path, half);
  }
  decodeNode(list, half, position + half);
  for (const { sums, left } of list.paths) {
    sums.copyWithin(half, 0, half);
    for (let i = 0; i < half; i++) sums[i] ^= left[half + i];
  }
}

function decide(list: PathList, position: number): void {
  if (!list.code.frozen[position]) {
    list.fork(position);
    return;
  }
  for (const path of list.paths) {
    path.metric += penalty(path.llr[1], 0);
    path.decided[position] = 0;
    path.sums[0] = 0;
  }
}

/** First half of a node: f(a, b) = sign(a)·sign(b)·min(|a|, |b|). */
function minSum(llr: Float64Array, half: number): void {
  for (let i = 0; i < half; i++) {
    const a = llr[2 * half + i];
    const b = llr[3 * half + i];
    const least = Math.min(Math.abs(a), Math.abs(b));
    llr[half + i] = a < 0 === b < 0 ? least : -least;
  }
}

/** Second half, the first half's bits known: g(a, b) = b ± a. */
function combine({ llr, left }: Path, half: number): void {
  for (let i = 0; i < half; i++) {
    const a = llr[2 * half + i];
    const b = llr[3 * half + i];
    llr[half + i] = left[half + i] ? b - a : b + a;
  }
}
