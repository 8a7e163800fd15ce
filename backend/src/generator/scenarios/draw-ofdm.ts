import type { OwnOfdmSpec } from '../plain/own-ofdm.js';
import { BARKER_11 } from '../plain/single-carrier.js';
import type { Random } from '../random.js';
import type { CaptureSpec, SignalSpec } from './capture.js';
import { drawImpairments, drawReceiver, drawRecording } from './draw-receiver.js';
import type { Drawn, Wish } from './drawn.js';

/** A private radio's own OFDM, away from the cellular and Wi-Fi numbers. */
export function drawOwnOfdm(random: Random, wish: Wish): Drawn {
  const spacingHz = wish.spacingHz ?? random.pick([2500, 5000, 6250, 10_000, 12_500, 20_000, 25_000, 40_000, 50_000, 75_000, 100_000, 1000 * random.integer(3, 80)]);
  const sizes = [64, 128, 256, 512, 1024, 2048].filter((n) => n === 64 || (n * spacingHz >= 0.5e6 && n * spacingHz <= Math.min(60e6, wish.maxRateHz ?? 60e6)));
  const fftSize = random.pick(sizes);
  const prefixSamples = fftSize / random.pick([4, 8, 8, 16, 16, 32].filter((d) => fftSize / d >= 4));
  const edge = Math.floor(fftSize * random.uniform(0.3, 0.42));
  const spec: OwnOfdmSpec = {
    carrierHz: 1000 * random.integer(1_400_000, 5_800_000), spacingHz, fftSize, prefixSamples, lowest: -edge, highest: edge, emptyDc: random.chance(0.6),
    modulation: random.pick(['qpsk', '16qam', '64qam']), pilotEvery: random.pick([0, 0, 8, 14]), bursts: random.chance(0.3) ? { on: random.integer(10, 40), off: random.integer(2, 20) } : null, seed: random.bits(),
  };
  const symbolS = (fftSize + prefixSamples) / (fftSize * spacingHz);
  const durationS = Math.max(0.004, Math.min(wish.maxDurationS ?? 0.03, 400 * symbolS));
  const receiver = drawReceiver(random, { carrierHz: spec.carrierHz, widthHz: (2 * edge + 1) * spacingHz, durationS }, wish);
  const prefixS = prefixSamples / (fftSize * spacingHz);
  const capture: CaptureSpec = { signal: { kind: 'ofdm', spec }, receiver, impairments: drawImpairments(random, wish, prefixS), recording: drawRecording(random), seed: random.bits() };
  return {
    signal: capture.signal, capture, label: `own OFDM, ${spacingHz / 1000} kHz, prefix 1/${fftSize / prefixSamples}`,
    declared: {
      technology: 'ofdm', subcarrierSpacing: spacingHz, guardInterval: prefixS, fftSize, sampleRate: fftSize * spacingHz, carrierFrequency: spec.carrierHz,
      channelBandwidth: 1000 * Math.ceil(((2 * edge + 1) * spacingHz) / 1000),
    },
    air: {
      technology: { oneOf: ['ofdm'] },
      subcarrierSpacingHz: { value: spacingHz, tol: 0.005 * spacingHz },
      cyclicPrefixS: { value: prefixS, tol: 0.12 * prefixS },
      carrierOffsetHz: { value: spec.carrierHz - receiver.centreHz + (receiver.carrierOffsetHz ?? 0), tol: 0.02 * spacingHz, modulo: spacingHz },
    },
  };
}

/** Not OFDM, or nothing: noise, a tone, one carrier, one carrier spread. */
export function drawNotOfdm(random: Random, wish: Wish): Drawn {
  const kind = random.pick(['noise', 'noise', 'tone', 'single-carrier', 'spread'] as const);
  const carrierHz = 1e5 * random.integer(8000, 40_000);
  const symbolRateHz = kind === 'spread' ? 11e6 : 1e5 * random.integer(5, 80);
  const signal: SignalSpec = kind === 'noise' || kind === 'tone'
    ? { kind, spec: { carrierHz } }
    : { kind: 'single-carrier', spec: { carrierHz, symbolRateHz, rollOff: random.uniform(0.15, 0.5), bursts: random.chance(0.5) ? { on: 4000, off: 1500 } : null, seed: random.bits(), ...(kind === 'spread' ? { spreading: BARKER_11 } : {}) } };
  const widthHz = kind === 'noise' || kind === 'tone' ? 4e6 : symbolRateHz * 1.5;
  const receiver = drawReceiver(random, { carrierHz, widthHz, durationS: random.uniform(0.004, 0.012) }, wish);
  const capture: CaptureSpec = { signal, receiver, impairments: drawImpairments(random, wish, Infinity), recording: drawRecording(random), seed: random.bits() };
  const nothing = { isNull: true } as const;
  return {
    signal, capture, declared: {}, label: `not OFDM: ${kind}`,
    air: { technology: nothing, subcarrierSpacingHz: nothing, cyclicPrefix: nothing, physicalCellId: nothing, mib: nothing },
  };
}
