import { ownOfdm } from '#backend/generator/plain/own-ofdm';
import { raw } from '#backend/generator/recording';

const SPACING_HZ = 30e3;
const FFT_SIZE = 512;

/** Raw ci16 samples of a plain OFDM signal, 30 kHz apart with a normal prefix, and what an upload says of them. */
export function ofdmCapture(durationS: number): { bytes: Buffer; query: Record<string, string> } {
  const rateHz = SPACING_HZ * FFT_SIZE;
  const emission = ownOfdm({
    carrierHz: 3.5e9, spacingHz: SPACING_HZ, fftSize: FFT_SIZE, prefixSamples: 36, lowest: -150, highest: 150, emptyDc: true,
    modulation: 'qpsk', pilotEvery: 0, bursts: null, seed: 7,
  });
  const iq = emission.render(rateHz, 0, Math.round(durationS * rateHz)).map((sample) => sample * 0.2);
  const { bytes } = raw('crane', { iq, datatype: 'ci16_le', sampleRateHz: rateHz, centreHz: 3.5e9 });
  return { bytes: Buffer.from(bytes), query: { datatype: 'ci16_le', sampleRateHz: String(rateHz), centreFrequencyHz: '3500000000' } };
}
