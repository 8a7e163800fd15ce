import { addSymbol, taperSamples, type Canvas } from '../ofdm-symbol.js';
import { nativeRate } from '../native-rate.js';
import type { Emission } from '../signal.js';
import { BlockSender } from './blocks.js';
import { fillSymbol } from './data.js';
import { nrNumerology, TC_PER_S, type NrNumerology } from './numerology.js';
import { blockSpacingHz } from './block-pattern.js';
import type { NrSpec, TddPattern } from './spec.js';

/** One NR downlink carrier as an emission; power 1 with every resource block in use. */
export function nrCarrier(spec: NrSpec): Emission {
  const half = 6 * spec.resourceBlocks * spec.spacingHz;
  const blockHalf = spec.blocks ? 120 * blockSpacingHz(spec.blocks.blockCase) : 0;
  const blockAt = spec.blocks ? spec.blocks.frequencyHz - spec.carrierHz : 0;
  const widest = Math.max(spec.spacingHz, spec.blocks ? blockSpacingHz(spec.blocks.blockCase) : 0);
  return {
    referenceHz: spec.carrierHz,
    lowHz: Math.min(-half, blockAt - blockHalf) - spec.spacingHz / 2,
    highHz: Math.max(half, blockAt + blockHalf) - spec.spacingHz / 2,
    onPower: 1,
    nativeRateHz: (minimumHz) => nativeRate(minimumHz, widest),
    render: (rateHz, first, count) => render(spec, { iq: new Float32Array(2 * count), first, rateHz }),
  };
}

function render(spec: NrSpec, canvas: Canvas): Float32Array {
  const sender = spec.blocks ? new BlockSender(spec, spec.blocks) : null;
  const numerology = nrNumerology(spec.spacingHz, spec.prefix);
  const perSubframe = canvas.rateHz / 1000;
  const last = canvas.first + canvas.iq.length / 2;
  for (let subframe = Math.floor(canvas.first / perSubframe); subframe * perSubframe < last; subframe++) {
    addDataSymbols(spec, canvas, { numerology, subframe, sender });
    sender?.addTo(canvas, subframe);
  }
  return canvas.iq;
}

interface Subframe {
  readonly numerology: NrNumerology;
  readonly subframe: number;
  readonly sender: BlockSender | null;
}

function addDataSymbols(spec: NrSpec, canvas: Canvas, { numerology, subframe, sender }: Subframe): void {
  const samples = canvas.rateHz / TC_PER_S;
  const size = Math.round(canvas.rateHz / spec.spacingHz);
  const bins = new Float64Array(2 * size);
  const end = canvas.first + canvas.iq.length / 2;
  for (let l = 0; l < numerology.symbolsPerSubframe; l++) {
    const start = (subframe * canvas.rateHz) / 1000 + numerology.startTc[l] * samples;
    const prefix = numerology.prefixTc[l] * samples;
    if (start + prefix + size <= canvas.first || start >= end) continue;
    const slot = subframe * 2 ** numerology.mu + Math.floor(l / numerology.symbolsPerSlot);
    const symbol = l % numerology.symbolsPerSlot;
    if (spec.tdd && !isDownlink(spec.tdd, numerology, slot, symbol)) continue;
    bins.fill(0);
    const taken = sender?.takenDuring(subframe, numerology.startTc[l], numerology.startTc[l] + numerology.prefixTc[l] + numerology.usefulTc) ?? null;
    if (!fillSymbol(spec, { bins, slot, symbol, taken, slotsPerFrame: 10 * 2 ** numerology.mu })) continue;
    addSymbol(canvas, { bins, start, prefix, phase: compensation(spec, numerology.startTc[l] + numerology.prefixTc[l]), taper: taperSamples(spec.taperS, canvas) });
  }
}

/** −2πf0·t_l, t_l from the subframe's start to the end of the prefix (TS 38.211 clause 5.4), rad. */
function compensation(spec: NrSpec, usefulStartTc: number): number {
  if (!spec.phaseCompensation) return 0;
  const cycles = (spec.carrierHz / TC_PER_S) * usefulStartTc;
  return -2 * Math.PI * (cycles - Math.floor(cycles));
}

/** TS 38.213 clause 11.1, one pattern: downlink slots, then downlink symbols of the next slot. */
export function isDownlink(tdd: TddPattern, numerology: NrNumerology, slot: number, symbol: number): boolean {
  const perPeriod = Math.round(tdd.periodS * 1000 * 2 ** numerology.mu);
  const at = ((slot % perPeriod) + perPeriod) % perPeriod;
  return at < tdd.downlinkSlots || (at === tdd.downlinkSlots && symbol < tdd.downlinkSymbols);
}
