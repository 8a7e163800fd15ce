import { transformOf } from '../fourier/fft.js';
import { primarySequence, SYNC_LENGTH } from './sequences.js';
import type { WorkSignal } from './work-signal.js';

/**
 * Search for the primary synchronisation signal over every frequency in steps of half a spacing,
 * in both senses of the spectrum. A window of one useful symbol is transformed; neighbouring
 * subcarriers are multiplied (one conjugated, amplitudes dropped), which turns the m-sequence
 * into another ±1 sequence and a timing error into one common phase; that sequence is then
 * sought along the frequency axis. So windows a quarter of a symbol apart suffice.
 *
 * The statistic |Σ ±z|²/126 of a window is 126 for a clean signal and about Exp(1) without one.
 */
export interface PrimaryHit {
  /** First sample of the window, in the work signal. */
  readonly sample: number;
  /** SS_REF as captured, Hz in the work signal, within a quarter of a spacing. */
  readonly referenceHz: number;
  readonly nId2: number;
  readonly inverted: boolean;
  readonly statistic: number;
  /** Rank among cells: the excess of the cell's best windows over what noise would give. */
  readonly score: number;
}

const TEMPLATES = 6;
const HALVES = 2;
/** Best windows kept for each frequency and sequence. */
const KEPT = 3;
/** About what the largest of a few hundred windows of noise reaches: ln(300) and a little. */
const NOISE_LEVEL = 8;

export class PrimaryScan {
  readonly size: number;
  private readonly low: number;
  private readonly high: number;
  private readonly cells: number;
  private readonly group: Float64Array;
  private readonly groupAt: Int32Array;
  private readonly best: Float64Array;
  private readonly bestAt: Int32Array;
  private readonly templates: readonly Float64Array[];
  private readonly input: Float64Array;
  private readonly spectrum: Float64Array;
  private readonly products: Float64Array;
  private readonly correlation: Float64Array;
  private readonly halfTurn: Float64Array;

  constructor(private readonly work: WorkSignal, readonly spacingHz: number, band: { lowHz: number; highHz: number }) {
    const size = Math.round(work.rateHz / spacingHz);
    this.size = size;
    const bin = (hz: number) => hz / spacingHz + size / 2;
    this.low = Math.max(0, Math.ceil(bin(Math.max(work.lowHz, band.lowHz))) - 1);
    this.high = Math.min(size - 1, Math.floor(bin(Math.min(work.highHz, band.highHz))) + 1);
    this.cells = Math.max(0, this.high - SYNC_LENGTH + 2 - this.low);
    this.group = new Float64Array(HALVES * TEMPLATES * this.cells);
    this.groupAt = new Int32Array(this.group.length);
    this.best = new Float64Array(KEPT * this.group.length);
    this.bestAt = new Int32Array(this.best.length);
    this.input = new Float64Array(2 * size);
    this.spectrum = new Float64Array(2 * size);
    this.products = new Float64Array(2 * size);
    this.correlation = new Float64Array(2 * size);
    this.templates = templateSpectra(size);
    this.halfTurn = Float64Array.from({ length: 2 * size }, (_, i) => (i % 2 === 0 ? Math.cos((Math.PI * (i >> 1)) / size) : -Math.sin((Math.PI * (i >> 1)) / size)));
  }

  /** False where the band cannot hold the signal. */
  get possible(): boolean {
    return this.cells > 0;
  }

  /** One window; call `closeGroup` after those that may hold the same symbol. */
  scan(sample: number): void {
    if (sample < 0 || 2 * (sample + this.size) > this.work.iq.length) return;
    for (let half = 0; half < HALVES; half++) {
      this.load(sample, half);
      this.neighbourProducts();
      for (let t = 0; t < TEMPLATES; t++) this.correlate(t, { sample, base: (half * TEMPLATES + t) * this.cells });
    }
  }

  private load(sample: number, half: number): void {
    const { size, input, halfTurn } = this;
    const { iq } = this.work;
    if (half === 0) for (let i = 0, from = 2 * sample; i < 2 * size; i++) input[i] = iq[from + i];
    else {
      for (let i = 0, from = 2 * sample; i < 2 * size; i += 2) {
        const re = iq[from + i];
        const im = iq[from + i + 1];
        input[i] = re * halfTurn[i] - im * halfTurn[i + 1];
        input[i + 1] = re * halfTurn[i + 1] + im * halfTurn[i];
      }
    }
    transformOf(size).forward(input, this.spectrum);
  }

  /** z(k) = u(k)·u*(k−1) with u = Y/|Y|, in order of frequency; then its transform, into `products`. */
  private neighbourProducts(): void {
    const { size, spectrum, input } = this;
    input.fill(0);
    for (let j = this.low + 1; j <= this.high; j++) {
      const a = 2 * ((j + size / 2) % size);
      const b = 2 * ((j - 1 + size / 2) % size);
      const re = spectrum[a] * spectrum[b] + spectrum[a + 1] * spectrum[b + 1];
      const im = spectrum[a + 1] * spectrum[b] - spectrum[a] * spectrum[b + 1];
      const scale = 1 / Math.sqrt(re * re + im * im + 1e-300);
      input[2 * j] = re * scale;
      input[2 * j + 1] = im * scale;
    }
    transformOf(size).forward(input, this.products);
  }

  private correlate(t: number, { sample, base }: { sample: number; base: number }): void {
    const { size, products, input, correlation, group, groupAt, low } = this;
    const template = this.templates[t];
    for (let i = 0; i < 2 * size; i += 2) {
      input[i] = products[i] * template[i] - products[i + 1] * template[i + 1];
      input[i + 1] = products[i] * template[i + 1] + products[i + 1] * template[i];
    }
    transformOf(size).inverse(input, correlation);
    for (let c = 0, at = 2 * low; c < this.cells; c++, at += 2) {
      const power = correlation[at] * correlation[at] + correlation[at + 1] * correlation[at + 1];
      if (power > group[base + c]) {
        group[base + c] = power;
        groupAt[base + c] = sample;
      }
    }
  }

  closeGroup(): void {
    const { group, groupAt, best, bestAt } = this;
    for (let c = 0; c < group.length; c++) {
      const power = group[c] / (SYNC_LENGTH - 1);
      let at = KEPT * c + KEPT - 1;
      if (power > best[at]) {
        for (; at > KEPT * c && power > best[at - 1]; at--) {
          best[at] = best[at - 1];
          bestAt[at] = bestAt[at - 1];
        }
        best[at] = power;
        bestAt[at] = groupAt[c];
      }
      group[c] = 0;
    }
  }

  /** The likeliest cells, best first: for each, its windows in falling order of the statistic. */
  ranked(limit: number): PrimaryHit[][] {
    const cells: { cell: number; score: number }[] = [];
    for (let c = 0; c < this.group.length; c++) {
      let score = 0;
      for (let k = 0; k < KEPT; k++) score += Math.max(0, this.best[KEPT * c + k] - NOISE_LEVEL);
      if (score > 0) cells.push({ cell: c, score });
    }
    cells.sort((a, b) => b.score - a.score);
    return cells.slice(0, limit).map(({ cell, score }) => this.hitsOf(cell, score));
  }

  private hitsOf(cell: number, score: number): PrimaryHit[] {
    const row = Math.floor(cell / this.cells);
    const t = row % TEMPLATES;
    const inverted = t >= 3;
    // SS_REF is the signal's place 64 (subcarrier 120 − 56); seen from above, place 62.
    const bin = this.low + (cell % this.cells) + (inverted ? 62 : 64) + (row >= TEMPLATES ? 0.5 : 0) - this.size / 2;
    const hits: PrimaryHit[] = [];
    for (let k = 0; k < KEPT; k++) {
      const statistic = this.best[KEPT * cell + k];
      if (statistic > 0) hits.push({ sample: this.bestAt[KEPT * cell + k], referenceHz: bin * this.spacingHz, nId2: t % 3, inverted, statistic, score });
    }
    return hits;
  }
}

/** Conjugate spectra of the three sequences' neighbour products, upright and from above. */
function templateSpectra(size: number): Float64Array[] {
  return Array.from({ length: TEMPLATES }, (_, t) => {
    const upright = primarySequence(t % 3);
    const sequence = t < 3 ? upright : upright.slice().reverse();
    const input = new Float64Array(2 * size);
    for (let n = 1; n < SYNC_LENGTH; n++) input[2 * n] = sequence[n] * sequence[n - 1];
    const output = new Float64Array(2 * size);
    transformOf(size).forward(input, output);
    for (let i = 1; i < 2 * size; i += 2) output[i] = -output[i];
    return output;
  });
}
