import type { HintCode, HintSide } from '#shared/vocabulary';

/** A hint's code as the register says it. */
const WORDS: Partial<Record<HintCode, string>> = {
  'fft-size': 'transform size', 'ssb-placement': 'block placement', 'ssb-subcarrier-spacing': 'block spacing',
  'physical-cell-id': 'cell identity', 'tdd-pattern': 'TDD pattern', 'half-subcarrier-shift': '7.5 kHz shift',
  'dc-offset': 'DC offset', 'iq-imbalance': 'I/Q imbalance', 'iq-compression': 'I/Q compression', 'iq-bit-width': 'I/Q bit width',
  'fronthaul-cp-length': 'fronthaul prefix', 'eaxc-mapping': 'antenna-carrier mapping', 'prb-allocation': 'block allocation',
  'timing-offset': 'timing-advance offset',
};
export const hintWords = (code: HintCode): string => WORDS[code] ?? code.replaceAll('-', ' ');

const SIDES: Record<HintSide, string> = { a: 'A', b: 'B', both: 'A and B', capture: 'capture', unknown: 'side open' };
export const hintSideWords = (side: HintSide): string => SIDES[side];
