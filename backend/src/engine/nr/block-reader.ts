import type { SampleSource } from '../types.js';
import { conjugate } from '../vector/mix.js';
import { blockGrid, BLOCK_PREFIX, blockSymbolS } from './block-grid.js';
import { BLOCK_SYMBOLS } from './block-layout.js';
import type { BothSenses, FoundBlock } from './block-search.js';
import { otherBlocks } from './other-blocks.js';
import { readWork, type WorkPlan, type WorkSignal } from './work-signal.js';

/** Samples around a block that the resampler needs to be whole. */
const EDGE_SAMPLES = 64;

/** Reads blocks at given times of the capture, upright: from the window at hand, else from the source. */
export class BlockReader {
  constructor(
    private readonly source: SampleSource,
    private readonly plan: WorkPlan,
    private readonly senses: BothSenses,
    readonly inverted: boolean,
  ) {}

  get durationS(): number {
    return this.source.samples / this.source.sampleRateHz;
  }

  /** The cell's other blocks in the window at hand, each found by itself. */
  others(first: FoundBlock): FoundBlock[] {
    return otherBlocks(this.senses, first);
  }

  /** The block's grid (phases as of a mixer that runs from the capture's sample 0), or null outside the capture. */
  grid(spacingHz: number, usefulS: number, referenceHz: number): Float64Array[] | null {
    const work = this.around(spacingHz, usefulS);
    if (!work) return null;
    const grid = blockGrid(work, { spacingHz, sample: (usefulS - work.startS) * work.rateHz, referenceHz: referenceHz - work.centreHz });
    return grid && grid.map((points) => turned(points, startPhase(work, referenceHz)));
  }

  /** A work signal that holds the block, or null. */
  around(spacingHz: number, usefulS: number): WorkSignal | null {
    const main = this.senses.in(this.inverted);
    const edgeS = EDGE_SAMPLES / Math.min(this.source.sampleRateHz, this.plan.rateHz);
    const fromS = usefulS - BLOCK_PREFIX / spacingHz - edgeS;
    const lengthS = blockSymbolS(spacingHz, BLOCK_SYMBOLS) + BLOCK_PREFIX / spacingHz + 2 * edgeS;
    if (usefulS < 0 || usefulS + blockSymbolS(spacingHz, BLOCK_SYMBOLS - 1) + 1 / spacingHz > this.durationS) return null;
    if (fromS >= main.startS && fromS + lengthS <= main.startS + main.iq.length / 2 / main.rateHz) return main;
    const read = readWork(this.source, this.plan, { startS: Math.max(0, fromS), durationS: lengthS });
    return this.inverted ? { ...read, iq: conjugate(read.iq), centreHz: -read.centreHz } : read;
  }
}

/** Phase by which a mixer from the capture's sample 0 differs from one that starts with the work signal. */
function startPhase(work: WorkSignal, referenceHz: number): number {
  const turns = (referenceHz - work.centreHz) * work.startS;
  return -2 * Math.PI * (turns - Math.round(turns));
}

function turned(points: Float64Array, angle: number): Float64Array {
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  const out = new Float64Array(points.length);
  for (let i = 0; i < points.length; i += 2) {
    out[i] = points[i] * cos - points[i + 1] * sin;
    out[i + 1] = points[i] * sin + points[i + 1] * cos;
  }
  return out;
}
