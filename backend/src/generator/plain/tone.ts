import type { Emission } from '../signal.js';

/** An unmodulated carrier of power 1. */
export function tone(carrierHz: number): Emission {
  return {
    referenceHz: carrierHz,
    lowHz: 0,
    highHz: 0,
    onPower: 1,
    nativeRateHz: (minimumHz) => Math.max(1, minimumHz),
    render: (_rateHz, _first, count) => Float32Array.from({ length: 2 * count }, (_, i) => (i % 2 === 0 ? 1 : 0)),
  };
}

/** Nothing at all: the receiver hears its own noise. */
export function silence(carrierHz: number): Emission {
  return { ...tone(carrierHz), render: (_rateHz, _first, count) => new Float32Array(2 * count) };
}
