import { randomPoint, type Modulation } from '../constellations.js';
import { addSymbol, type Canvas } from '../ofdm-symbol.js';
import { Random } from '../random.js';
import type { Emission } from '../signal.js';

/** OFDM of a private radio: any spacing, prefix and set of subcarriers, every symbol alike. */
export interface OwnOfdmSpec {
  /** Frequency of subcarrier 0, Hz. */
  readonly carrierHz: number;
  readonly spacingHz: number;
  readonly fftSize: number;
  /** Samples of the prefix at `spacingHz`·`fftSize`. */
  readonly prefixSamples: number;
  /** Lowest and highest subcarrier in use. */
  readonly lowest: number;
  readonly highest: number;
  readonly emptyDc: boolean;
  readonly modulation: Modulation;
  /** Every n-th subcarrier carries a known QPSK pilot; 0: none. */
  readonly pilotEvery: number;
  /** Symbols on and off in turn; null: always on. */
  readonly bursts: { readonly on: number; readonly off: number } | null;
  readonly seed: number;
}

export function ownOfdm(spec: OwnOfdmSpec): Emission {
  const baseHz = spec.spacingHz * spec.fftSize;
  return {
    referenceHz: spec.carrierHz,
    lowHz: (spec.lowest - 0.5) * spec.spacingHz,
    highHz: (spec.highest + 0.5) * spec.spacingHz,
    onPower: 1,
    nativeRateHz: (minimumHz) => baseHz * Math.max(1, Math.ceil(minimumHz / baseHz - 1e-9)),
    render: (rateHz, first, count) => render(spec, { iq: new Float32Array(2 * count), first, rateHz }),
  };
}

function render(spec: OwnOfdmSpec, canvas: Canvas): Float32Array {
  const times = Math.round(canvas.rateHz / (spec.spacingHz * spec.fftSize));
  const size = spec.fftSize * times;
  const prefix = spec.prefixSamples * times;
  const subcarriers = Array.from({ length: spec.highest - spec.lowest + 1 }, (_, i) => spec.lowest + i).filter((k) => k !== 0 || !spec.emptyDc);
  const end = canvas.first + canvas.iq.length / 2;
  const bins = new Float64Array(2 * size);
  const point = new Float64Array(2);
  for (let l = Math.floor(canvas.first / (size + prefix)); l * (size + prefix) < end; l++) {
    if (spec.bursts && (((l % (spec.bursts.on + spec.bursts.off)) + spec.bursts.on + spec.bursts.off) % (spec.bursts.on + spec.bursts.off)) >= spec.bursts.on) continue;
    const random = new Random(spec.seed, 'symbol', l);
    const pilots = new Random(spec.seed, 'pilots');
    bins.fill(0);
    for (const k of subcarriers) {
      const isPilot = spec.pilotEvery > 0 && (((k % spec.pilotEvery) + spec.pilotEvery) % spec.pilotEvery) === 0;
      randomPoint(point, 0, isPilot ? { modulation: 'qpsk', random: pilots } : { modulation: spec.modulation, random });
      const bin = (k + size) % size;
      bins[2 * bin] = point[0] / Math.sqrt(subcarriers.length);
      bins[2 * bin + 1] = point[1] / Math.sqrt(subcarriers.length);
    }
    addSymbol(canvas, { bins, start: l * (size + prefix), prefix });
  }
  return canvas.iq;
}
