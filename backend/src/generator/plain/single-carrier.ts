import { Random } from '../random.js';
import type { Emission } from '../signal.js';

/** One carrier of QPSK symbols, root-raised-cosine shaped; with `spreading` each symbol is a run of chips. */
export interface SingleCarrierSpec {
  readonly carrierHz: number;
  /** Symbols, or chips where spread, a second. */
  readonly symbolRateHz: number;
  readonly rollOff: number;
  readonly spreading?: readonly number[];
  /** Symbols (or chips) on and off in turn; null: always on. */
  readonly bursts: { readonly on: number; readonly off: number } | null;
  readonly seed: number;
}

/** The 11-chip sequence of the direct-sequence PHY, IEEE 802.11 clause 15.4.5.3. */
export const BARKER_11: readonly number[] = [1, -1, 1, 1, -1, 1, 1, 1, -1, -1, -1];

/** Symbols that the pulse reaches to each side. */
const REACH = 12;

export function singleCarrier(spec: SingleCarrierSpec): Emission {
  const edge = (spec.symbolRateHz * (1 + spec.rollOff)) / 2;
  return {
    referenceHz: spec.carrierHz,
    lowHz: -edge,
    highHz: edge,
    onPower: 1,
    nativeRateHz: (minimumHz) => spec.symbolRateHz * Math.max(2, Math.ceil(minimumHz / spec.symbolRateHz - 1e-9)),
    render: (rateHz, first, count) => render(spec, { rateHz, first, count }),
  };
}

function render(spec: SingleCarrierSpec, { rateHz, first, count }: { rateHz: number; first: number; count: number }): Float32Array {
  const perSymbol = Math.round(rateHz / spec.symbolRateHz);
  const pulse = rootRaisedCosine(perSymbol, spec.rollOff);
  const iq = new Float32Array(2 * count);
  const from = Math.floor(first / perSymbol) - REACH;
  const to = Math.ceil((first + count) / perSymbol) + REACH;
  for (let s = from; s <= to; s++) {
    const value = symbol(spec, s);
    if (!value) continue;
    const at = s * perSymbol - REACH * perSymbol - first;
    for (let k = Math.max(0, -at); k < pulse.length && at + k < count; k++) {
      iq[2 * (at + k)] += value[0] * pulse[k];
      iq[2 * (at + k) + 1] += value[1] * pulse[k];
    }
  }
  return iq;
}

function symbol(spec: SingleCarrierSpec, index: number): readonly [number, number] | null {
  if (spec.bursts) {
    const period = spec.bursts.on + spec.bursts.off;
    if (((index % period) + period) % period >= spec.bursts.on) return null;
  }
  const length = spec.spreading?.length ?? 1;
  const chip = spec.spreading?.[((index % length) + length) % length] ?? 1;
  const bits = new Random(spec.seed, Math.floor(index / length)).bits();
  return [(bits & 8 ? chip : -chip) * Math.SQRT1_2, (bits & 32 ? chip : -chip) * Math.SQRT1_2];
}

/** Pulse of unit mean power for unit symbols (textbook form; e.g. TS 25.104 clause 6.8.1 with roll-off 0.22). */
export function rootRaisedCosine(perSymbol: number, a: number): Float64Array {
  return Float64Array.from({ length: 2 * REACH * perSymbol + 1 }, (_, i) => {
    const t = i / perSymbol - REACH;
    if (t === 0) return 1 - a + (4 * a) / Math.PI;
    if (a > 0 && Math.abs(Math.abs(4 * a * t) - 1) < 1e-9) {
      return (a / Math.SQRT2) * ((1 + 2 / Math.PI) * Math.sin(Math.PI / (4 * a)) + (1 - 2 / Math.PI) * Math.cos(Math.PI / (4 * a)));
    }
    return (Math.sin(Math.PI * t * (1 - a)) + 4 * a * t * Math.cos(Math.PI * t * (1 + a))) / (Math.PI * t * (1 - (4 * a * t) ** 2));
  });
}
