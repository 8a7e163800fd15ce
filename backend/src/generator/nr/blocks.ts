import { addSymbol, taperSamples, type Canvas } from '../ofdm-symbol.js';
import { BLOCK_SUBCARRIERS, BLOCK_SYMBOLS, blockGrid } from './block-grid.js';
import { blockSpacingHz, blockStartSymbol } from './block-pattern.js';
import { nrNumerology, TC_PER_S, TC_PER_SUBFRAME, type NrNumerology } from './numerology.js';
import type { NrBlocks, NrSpec } from './spec.js';

/** A block's symbol: in which subframe of the half frame, which symbol there. */
interface BlockSymbol {
  readonly blockIndex: number;
  readonly symbolOfBlock: number;
  readonly subframe: number;
  readonly l: number;
}

/** Sends the synchronisation blocks of a carrier. Subframes count from the transmitter's time zero. */
export class BlockSender {
  private readonly numerology: NrNumerology;
  private readonly symbols: readonly BlockSymbol[];
  /** Resource blocks of the carrier that the block touches, last one excluded. */
  private readonly lowBlock: number;
  private readonly highBlock: number;

  constructor(private readonly spec: NrSpec, private readonly blocks: NrBlocks) {
    const spacingHz = blockSpacingHz(blocks.blockCase);
    this.numerology = nrNumerology(spacingHz);
    const perSubframe = this.numerology.symbolsPerSubframe;
    this.symbols = blocks.sent.flatMap((blockIndex) => Array.from({ length: BLOCK_SYMBOLS }, (_, symbolOfBlock) => {
      const s = blockStartSymbol(blocks.blockCase, blockIndex) + symbolOfBlock;
      return { blockIndex, symbolOfBlock, subframe: Math.floor(s / perSubframe), l: s % perSubframe };
    }));
    const low = blocks.frequencyHz - (BLOCK_SUBCARRIERS / 2) * spacingHz - (spec.carrierHz - 6 * spec.resourceBlocks * spec.spacingHz);
    const width = 12 * spec.spacingHz;
    this.lowBlock = Math.floor((low - spacingHz / 2 + spec.spacingHz / 2) / width);
    this.highBlock = Math.ceil((low + (BLOCK_SUBCARRIERS - 0.5) * spacingHz + spec.spacingHz / 2) / width);
  }

  /** The carrier's resource blocks that must stay empty during a span of a subframe, or null. */
  takenDuring(subframe: number, fromTc: number, toTc: number): readonly [number, number] | null {
    const at = this.halfFrameSubframe(subframe);
    if (at === null) return null;
    const { startTc, prefixTc, usefulTc } = this.numerology;
    const meets = this.symbols.some((s) => s.subframe === at && startTc[s.l] < toTc && startTc[s.l] + prefixTc[s.l] + usefulTc > fromTc);
    return meets ? [this.lowBlock, this.highBlock] : null;
  }

  addTo(canvas: Canvas, subframe: number): void {
    const at = this.halfFrameSubframe(subframe);
    if (at === null) return;
    const grids = new Map<number, Float64Array[]>();
    for (const symbol of this.symbols) {
      if (symbol.subframe !== at || !this.touches(canvas, subframe, symbol.l)) continue;
      let grid = grids.get(symbol.blockIndex);
      if (!grid) grids.set(symbol.blockIndex, grid = this.grid(subframe, symbol.blockIndex));
      this.place(canvas, { subframe, l: symbol.l, points: grid[symbol.symbolOfBlock] });
    }
  }

  /** Subframe within the half frame that carries blocks, or null where none does. */
  private halfFrameSubframe(subframe: number): number | null {
    const frameMs = 10 * this.spec.mib.systemFrameNumber + subframe;
    const phase = (((frameMs - 5 * this.blocks.halfFrame) % this.blocks.periodMs) + this.blocks.periodMs) % this.blocks.periodMs;
    return phase < 5 ? phase : null;
  }

  private grid(subframe: number, blockIndex: number): Float64Array[] {
    const frame = this.spec.mib.systemFrameNumber + Math.floor(subframe / 10);
    const halfFrame = Math.floor((((subframe % 10) + 10) % 10) / 5) as 0 | 1;
    const mib = { ...this.spec.mib, systemFrameNumber: ((frame % 1024) + 1024) % 1024 };
    return blockGrid(mib, { cellId: this.spec.cellId, blockIndex, halfFrame, maxBlocks: this.blocks.maxBlocks }, this.blocks.pssBoostDb);
  }

  private touches(canvas: Canvas, subframe: number, l: number): boolean {
    const samples = canvas.rateHz / TC_PER_S;
    const { startTc, prefixTc, usefulTc } = this.numerology;
    const start = (subframe * TC_PER_SUBFRAME + startTc[l]) * samples;
    return start < canvas.first + canvas.iq.length / 2 && start + (prefixTc[l] + usefulTc) * samples > canvas.first;
  }

  private place(canvas: Canvas, { subframe, l, points }: { subframe: number; l: number; points: Float64Array }): void {
    const { spec, blocks, numerology } = this;
    const size = Math.round(canvas.rateHz / numerology.spacingHz);
    const bins = new Float64Array(2 * size);
    // Equal spectral density: a wider subcarrier carries more power.
    const amplitude = 10 ** ((blocks.gainDb ?? 0) / 20) * Math.sqrt(numerology.spacingHz / spec.spacingHz / (12 * spec.resourceBlocks));
    for (let k = 0; k < BLOCK_SUBCARRIERS; k++) {
      const bin = (k - BLOCK_SUBCARRIERS / 2 + size) % size;
      bins[2 * bin] = amplitude * points[2 * k];
      bins[2 * bin + 1] = amplitude * points[2 * k + 1];
    }
    const samples = canvas.rateHz / TC_PER_S;
    const usefulTc = numerology.startTc[l] + numerology.prefixTc[l];
    const cycles = (spec.carrierHz / TC_PER_S) * usefulTc;
    addSymbol(canvas, {
      bins,
      start: (subframe * TC_PER_SUBFRAME + numerology.startTc[l]) * samples,
      prefix: numerology.prefixTc[l] * samples,
      offsetHz: blocks.frequencyHz - spec.carrierHz,
      taper: taperSamples(spec.taperS, canvas),
      phase: spec.phaseCompensation ? -2 * Math.PI * (cycles - Math.floor(cycles)) : 0,
    });
  }
}
