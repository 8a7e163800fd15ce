import { addSymbol, type Canvas } from '../ofdm-symbol.js';
import { Random } from '../random.js';
import type { Emission } from '../signal.js';
import { wifiFrame, type Field } from './frame.js';
import type { WifiSpec } from './spec.js';
import { HE, HT_VHT, LEGACY, duplicated } from './tones.js';

/** Bursts with gaps as an emission; power 1 while a frame is on the air. The first frame starts after half a gap. */
export function wifiBursts(spec: WifiSpec): Emission {
  const edge = occupiedEdgeHz(spec);
  return {
    referenceHz: spec.carrierHz,
    lowHz: -edge,
    highHz: edge,
    onPower: 1,
    nativeRateHz: (minimumHz) => 20e6 * spec.clock * Math.max(1, Math.ceil(minimumHz / (20e6 * spec.clock) - 1e-9)),
    render: (rateHz, first, count) => render(spec, { iq: new Float32Array(2 * count), first, rateHz }),
  };
}

function occupiedEdgeHz(spec: WifiSpec): number {
  if (spec.format === 'he') return (Math.max(...HE[spec.mhz].used) + 0.5) * 78_125;
  const used = spec.format === 'legacy' ? duplicated(LEGACY.used.map((k) => [k, 1, 0] as const), spec.mhz).map(([k]) => k) : HT_VHT[spec.mhz].used;
  return (Math.max(...used) + 0.5) * 312_500 * spec.clock;
}

/** Where the frames lie, in 20 MHz samples of the PHY's clock: from the seed alone, whatever is rendered. */
function* schedule(spec: WifiSpec): Generator<{ at: number; fields: Field[]; length: number }> {
  const random = new Random(spec.seed, 'schedule');
  let at = Math.round(10 * random.uniform(...spec.gapUs));
  for (let frame = 0; ; frame++) {
    const fields = wifiFrame(spec, random.integer(...spec.symbols), new Random(spec.seed, 'frame', frame));
    const length = fields.reduce((sum, f) => sum + Math.round(20 * (f.guardUs + f.usefulUs)), 0);
    yield { at, fields, length };
    at += length + Math.round(20 * random.uniform(...spec.gapUs));
  }
}

function render(spec: WifiSpec, canvas: Canvas): Float32Array {
  const perTick = canvas.rateHz / (20e6 * spec.clock);
  const end = canvas.first + canvas.iq.length / 2;
  for (const { at, fields, length } of schedule(spec)) {
    if (at * perTick >= end) break;
    if ((at + length) * perTick > canvas.first) addFrame(canvas, { fields, at, perTick, clock: spec.clock });
  }
  return canvas.iq;
}

function addFrame(canvas: Canvas, { fields, at, perTick, clock }: { fields: readonly Field[]; at: number; perTick: number; clock: number }): void {
  let start = at;
  for (const field of fields) {
    const guard = Math.round(20 * field.guardUs);
    const useful = Math.round(20 * field.usefulUs);
    addSymbol(canvas, {
      bins: binsOf(field, Math.round(canvas.rateHz / (field.spacingHz * clock))),
      start: start * perTick,
      prefix: guard * perTick,
      useful: useful * perTick,
    });
    start += guard + useful;
  }
}

/** Tones onto the transform, unit power in all. */
function binsOf({ tones }: Field, size: number): Float64Array {
  const bins = new Float64Array(2 * size);
  const power = tones.reduce((sum, [, re, im]) => sum + re * re + im * im, 0);
  const gain = power === 0 ? 0 : 1 / Math.sqrt(power);
  for (const [k, re, im] of tones) {
    const bin = (k + size) % size;
    bins[2 * bin] = gain * re;
    bins[2 * bin + 1] = gain * im;
  }
  return bins;
}
