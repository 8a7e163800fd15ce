import { addSymbol, taperSamples, type Canvas } from '../ofdm-symbol.js';
import { Random } from '../random.js';
import type { Emission } from '../signal.js';
import { nativeRate } from '../native-rate.js';
import { fillLteSymbol } from './resource-grid.js';
import { LTE_SPACING_HZ, lteSlot, TS_PER_S, TS_PER_SLOT } from './timing.js';
import { downlinkSymbols, type LteSpec } from './spec.js';

/**
 * One LTE downlink as an emission; power 1 with every resource element in use. Two antenna ports
 * are sent from two antennas whose gains at the receiver differ by a fixed random factor.
 */
export function lteCarrier(spec: LteSpec): Emission {
  const half = (6 * spec.resourceBlocks + 0.5) * LTE_SPACING_HZ;
  return {
    referenceHz: spec.carrierHz,
    lowHz: -half,
    highHz: half,
    onPower: 1,
    nativeRateHz: (minimumHz) => nativeRate(minimumHz, LTE_SPACING_HZ),
    render: (rateHz, first, count) => render(spec, { iq: new Float32Array(2 * count), first, rateHz }),
  };
}

/** Gains of the ports at the receiver: unit power in all. */
export function portGains(spec: LteSpec): { re: number; im: number }[] {
  if (spec.ports === 1) return [{ re: 1, im: 0 }];
  const random = new Random(spec.seed, 'ports');
  const share = random.uniform(0.25, 0.75);
  const angle = random.uniform(0, 2 * Math.PI);
  return [{ re: Math.sqrt(2 * share), im: 0 }, { re: Math.sqrt(2 - 2 * share) * Math.cos(angle), im: Math.sqrt(2 - 2 * share) * Math.sin(angle) }];
}

function render(spec: LteSpec, canvas: Canvas): Float32Array {
  const perTs = canvas.rateHz / TS_PER_S;
  const perSlot = TS_PER_SLOT * perTs;
  const { symbols, startTs, prefixTs } = lteSlot(spec.prefix);
  const size = Math.round(canvas.rateHz / LTE_SPACING_HZ);
  const end = canvas.first + canvas.iq.length / 2;
  const gains = portGains(spec);
  const ports = gains.map(() => new Float64Array(24 * spec.resourceBlocks));
  const bins = new Float64Array(2 * size);
  for (let slot = Math.floor(canvas.first / perSlot); slot * perSlot < end; slot++) {
    const inFrame = ((slot % 20) + 20) % 20;
    for (let l = 0; l < symbols; l++) {
      if ((inFrame % 2) * symbols + l >= downlinkSymbols(spec, Math.floor(inFrame / 2))) continue;
      for (const port of ports) port.fill(0);
      fillLteSymbol(spec, ports, { slot, symbol: l });
      combine({ ports, gains, bins, amplitude: 1 / Math.sqrt(12 * spec.resourceBlocks) });
      addSymbol(canvas, { bins, start: slot * perSlot + startTs[l] * perTs, prefix: prefixTs[l] * perTs, taper: taperSamples(spec.taperS, canvas) });
    }
  }
  return canvas.iq;
}

/** Ports through their gains onto the transform's bins, with the DC bin left out (TS 36.211 clause 6.12). */
function combine({ ports, gains, bins, amplitude }: { ports: readonly Float64Array[]; gains: readonly { re: number; im: number }[]; bins: Float64Array; amplitude: number }): void {
  bins.fill(0);
  const size = bins.length / 2;
  const used = ports[0].length / 2;
  for (let k = 0; k < used; k++) {
    const from = k - used / 2;
    const bin = from < 0 ? size + from : from + 1;
    ports.forEach((grid, p) => {
      bins[2 * bin] += amplitude * (grid[2 * k] * gains[p].re - grid[2 * k + 1] * gains[p].im);
      bins[2 * bin + 1] += amplitude * (grid[2 * k] * gains[p].im + grid[2 * k + 1] * gains[p].re);
    });
  }
}
