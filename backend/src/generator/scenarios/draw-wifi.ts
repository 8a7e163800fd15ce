import type { Random } from '../random.js';
import type { WifiSpec } from '../wifi/spec.js';
import type { CaptureSpec } from './capture.js';
import { drawImpairments, drawReceiver, drawRecording } from './draw-receiver.js';
import type { Drawn, Wish } from './drawn.js';

/** Centres of 5 GHz channels by width (IEEE 802.11 Annex E), MHz. */
const CENTRES: Record<20 | 40 | 80, readonly number[]> = {
  20: [5180, 5200, 5220, 5240, 5300, 5500, 5560, 5660, 5745, 5825, 2412, 2437, 2462],
  40: [5190, 5230, 5270, 5310, 5510, 5755],
  80: [5210, 5290, 5530, 5775],
};
const GUARDS = { legacy: [0.8], ht: [0.4, 0.8], vht: [0.4, 0.8], he: [0.8, 1.6, 3.2] } as const;
const PREFIX_WORD: Record<string, 'short' | 'normal' | 'double' | 'quadruple'> = { 0.4: 'short', 0.8: 'normal', 1.6: 'double', 3.2: 'quadruple' };

export function drawWifi(random: Random, wish: Wish): Drawn {
  const format = wish.wifiFormat ?? random.pick(['legacy', 'ht', 'ht', 'vht', 'he'] as const);
  const clock = format === 'legacy' && random.chance(0.2) ? 0.5 : 1;
  const widths = ([20, 40, 80] as const).filter((w) => (w === 20 || w * 1e6 <= (wish.maxRateHz ?? 100e6)) && (format === 'legacy' ? w === 20 : format !== 'ht' || w <= 40));
  const mhz = random.pick(widths);
  const guardUs = random.pick<number>(GUARDS[format]);
  const spec: WifiSpec = {
    carrierHz: random.pick(CENTRES[mhz]) * 1e6, format, mhz, guardUs, clock, mcs: random.integer(0, 7), symbols: [30, 250], gapUs: random.pick([[20, 120], [50, 600]] as const), seed: random.bits(),
    ...(format === 'he' ? { heTraining: guardUs === 3.2 ? 4 : guardUs === 1.6 ? 2 : random.pick([1, 2] as const) } : {}),
  };
  const durationS = Math.min(wish.maxDurationS ?? 0.02, random.uniform(0.003, 0.012));
  const receiver = drawReceiver(random, { carrierHz: spec.carrierHz, widthHz: 0.92 * mhz * 1e6 * clock, durationS }, wish);
  const capture: CaptureSpec = { signal: { kind: 'wifi', spec }, receiver: { ...receiver, startS: random.uniform(0, 0.002) }, impairments: drawImpairments(random, wish, (guardUs / clock) * 1e-6), recording: drawRecording(random), seed: random.bits() };
  const spacing = (format === 'he' ? 78_125 : 312_500) * clock;
  return {
    signal: capture.signal, capture, label: `Wi-Fi ${format.toUpperCase()}, ${mhz * clock} MHz`,
    declared: {
      technology: 'wifi', subcarrierSpacing: spacing, guardInterval: (guardUs / clock) * 1e-6, cyclicPrefix: PREFIX_WORD[guardUs], fftSize: (mhz * 1e6 * clock) / spacing, sampleRate: mhz * 1e6 * clock,
      carrierFrequency: spec.carrierHz, channelBandwidth: mhz * 1e6 * clock, spectrumSense: wish.inverted ? 'inverted' : 'upright',
    },
    air: {
      technology: { oneOf: ['wifi'] },
      subcarrierSpacingHz: { value: spacing, tol: 0.005 * spacing },
      cyclicPrefix: { oneOf: [PREFIX_WORD[guardUs]] },
      carrierOffsetHz: { value: spec.carrierHz - receiver.centreHz + (receiver.carrierOffsetHz ?? 0), tol: 0.02 * 312_500 * clock, modulo: 312_500 * clock },
      spectrumInverted: { oneOf: [wish.inverted === true] },
    },
  };
}
