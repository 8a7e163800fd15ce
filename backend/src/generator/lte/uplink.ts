import { randomPoint, type Modulation } from '../constellations.js';
import { nativeRate } from '../native-rate.js';
import { addSymbol, type Canvas } from '../ofdm-symbol.js';
import { Random } from '../random.js';
import type { Emission } from '../signal.js';
import { inverseTransform } from '../transform.js';
import { LTE_SPACING_HZ, lteSlot, TS_PER_S, TS_PER_SLOT, type LtePrefix } from './timing.js';

/** A single-carrier uplink (PUSCH of one terminal), TS 36.211 clause 5. */
export interface UplinkSpec {
  /** Carrier centre, Hz. */
  readonly carrierHz: number;
  readonly resourceBlocks: number;
  readonly prefix: LtePrefix;
  readonly cellId: number;
  /** Resource blocks in use: 3 or more, of factors 2, 3 and 5. */
  readonly allocatedBlocks: number;
  readonly firstBlock: number;
  readonly subframes: number;
  readonly modulation: Modulation;
  /** The half-subcarrier shift of clause 5.6; a faulty transmitter leaves it out. */
  readonly halfSubcarrierShift: boolean;
  readonly seed: number;
}

export function lteUplink(spec: UplinkSpec): Emission {
  const half = 6 * spec.resourceBlocks;
  const shift = spec.halfSubcarrierShift ? 0.5 : 0;
  return {
    referenceHz: spec.carrierHz,
    lowHz: (12 * spec.firstBlock - half + shift - 0.5) * LTE_SPACING_HZ,
    highHz: (12 * (spec.firstBlock + spec.allocatedBlocks) - half + shift - 0.5) * LTE_SPACING_HZ,
    onPower: 1,
    nativeRateHz: (minimumHz) => nativeRate(minimumHz, LTE_SPACING_HZ),
    render: (rateHz, first, count) => render(spec, { iq: new Float32Array(2 * count), first, rateHz }),
  };
}

function render(spec: UplinkSpec, canvas: Canvas): Float32Array {
  const perTs = canvas.rateHz / TS_PER_S;
  const perSlot = TS_PER_SLOT * perTs;
  const { symbols, startTs, prefixTs } = lteSlot(spec.prefix);
  const size = Math.round(canvas.rateHz / LTE_SPACING_HZ);
  const m = 12 * spec.allocatedBlocks;
  const reference = baseSequence(m, spec.cellId);
  for (let slot = Math.floor(canvas.first / perSlot); slot * perSlot < canvas.first + canvas.iq.length / 2; slot++) {
    if (!new Random(spec.seed, 'subframe', Math.floor(slot / 2)).chance(spec.subframes)) continue;
    for (let l = 0; l < symbols; l++) {
      // Reference symbol: the fourth of seven, the third of six (clause 5.5.2.1.2).
      const points = l === (symbols === 7 ? 3 : 2) ? reference : precoded(spec, m, new Random(spec.seed, slot, l));
      const bins = new Float64Array(2 * size);
      for (let k = 0; k < m; k++) {
        const bin = (12 * spec.firstBlock + k - 6 * spec.resourceBlocks + size) % size;
        bins[2 * bin] = points[2 * k] / Math.sqrt(m);
        bins[2 * bin + 1] = points[2 * k + 1] / Math.sqrt(m);
      }
      addSymbol(canvas, { bins, start: slot * perSlot + startTs[l] * perTs, prefix: prefixTs[l] * perTs, offsetHz: spec.halfSubcarrierShift ? LTE_SPACING_HZ / 2 : 0 });
    }
  }
  return canvas.iq;
}

/** Transform precoding (clause 5.3.3): random points spread over the allocation, unit power. */
function precoded(spec: UplinkSpec, m: number, random: Random): Float64Array {
  const points = new Float64Array(2 * m);
  for (let i = 0; i < m; i++) randomPoint(points, i, { modulation: spec.modulation, random });
  // The forward transform is the inverse one of the conjugate, conjugated.
  const out = new Float64Array(2 * m);
  inverseTransform(m).run(points.map((v, i) => (i % 2 === 1 ? -v : v)), out);
  return out.map((v, i) => (i % 2 === 1 ? -v : v) / Math.sqrt(m));
}

/** Zadoff-Chu base sequence of clause 5.5.1.1, group N_ID mod 30, no shift. */
function baseSequence(m: number, cellId: number): Float64Array {
  const prime = largestPrimeBelow(m);
  const q = Math.floor((prime * ((cellId % 30) + 1)) / 31 + 0.5);
  const r = new Float64Array(2 * m);
  for (let n = 0; n < m; n++) {
    const i = n % prime;
    const angle = (-Math.PI * q * i * (i + 1)) / prime;
    r[2 * n] = Math.cos(angle);
    r[2 * n + 1] = Math.sin(angle);
  }
  return r;
}

function largestPrimeBelow(m: number): number {
  for (let p = m - 1; ; p--) {
    let isPrime = p > 1;
    for (let d = 2; d * d <= p && isPrime; d++) isPrime = p % d !== 0;
    if (isPrime) return p;
  }
}
