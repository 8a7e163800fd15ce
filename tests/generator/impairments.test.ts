import { describe, expect, it } from 'vitest';
import { addDcOffset, addImage, addPhaseNoise, clip, dropSamples, exchangeIq, invertSpectrum, setLevel } from '#backend/generator/impairments/front-end';
import { delay, PROFILES, throughChannel } from '#backend/generator/impairments/multipath';
import { addNoise, noisePower } from '#backend/generator/impairments/noise';
import { toBytes } from '#backend/generator/quantise';
import { Random } from '#backend/generator/random';
import { receive } from '#backend/generator/receive';
import { meanPower, shiftFrequency } from '#backend/generator/signal';
import { tone } from '#backend/generator/plain/tone';
import { ownOfdm, type OwnOfdmSpec } from '#backend/generator/plain/own-ofdm';
import { rootRaisedCosine, singleCarrier } from '#backend/generator/plain/single-carrier';

/** e^{j2πft} at unit power. */
function turning(hz: number, rateHz: number, count: number): Float32Array {
  return Float32Array.from({ length: 2 * count }, (_, i) => (i % 2 === 0 ? Math.cos : Math.sin)((2 * Math.PI * hz * (i >> 1)) / rateHz));
}

/** Power of one frequency, by the definition. */
function powerAt(iq: Float32Array, hz: number, rateHz: number): number {
  let re = 0;
  let im = 0;
  const count = iq.length / 2;
  for (let n = 0; n < count; n++) {
    const angle = (-2 * Math.PI * hz * n) / rateHz;
    re += iq[2 * n] * Math.cos(angle) - iq[2 * n + 1] * Math.sin(angle);
    im += iq[2 * n] * Math.sin(angle) + iq[2 * n + 1] * Math.cos(angle);
  }
  return (re * re + im * im) / count ** 2;
}

const db = (power: number) => 10 * Math.log10(power);

describe('random numbers', () => {
  it('are Gaussian: mean 0, variance 1, kurtosis 3 within three standard errors', () => {
    const random = new Random(5);
    const x = Array.from({ length: 100_000 }, () => random.normal());
    const moment = (p: number) => x.reduce((sum, v) => sum + v ** p, 0) / x.length;
    // Standard errors of the mean, the second and the fourth moment: √(1, 2, 96)/√n.
    expect(Math.abs(moment(1))).toBeLessThan(3 * Math.sqrt(1e-5));
    expect(Math.abs(moment(2) - 1)).toBeLessThan(3 * Math.sqrt(2e-5));
    expect(Math.abs(moment(4) - 3)).toBeLessThan(3 * Math.sqrt(96e-5));
  });
  it('repeat for a seed and differ between neighbours', () => {
    const first = (seed: number) => Array.from({ length: 8 }, () => new Random(seed).bits())[0];
    expect(first(1)).toBe(first(1));
    expect(new Set([0, 1, 2, 3, 4].map(first)).size).toBe(5);
  });
});

describe('front end', () => {
  const RATE = 1e6;
  it('adds noise for a ratio in the occupied band, white over the rate', () => {
    const iq = new Float32Array(400_000);
    addNoise(iq, noisePower({ snrDb: 7, onPower: 1, occupiedHz: 2.5e5, sampleRateHz: RATE }), new Random(1));
    // A quarter of the noise falls into the band: 1/(P/4) = 7 dB.
    expect(-db(meanPower(iq) / 4)).toBeCloseTo(7, 1);
  });
  it('puts the image where the mirrored frequency is, at the level asked', () => {
    const iq = turning(50e3, RATE, 10_000);
    addImage(iq, -20, 1);
    expect(db(powerAt(iq, -50e3, RATE) / powerAt(iq, 50e3, RATE))).toBeCloseTo(-20, 4);
  });
  it('puts DC at the level asked', () => {
    const iq = turning(50e3, RATE, 10_000);
    addDcOffset(iq, -15, 0.3);
    expect(db(powerAt(iq, 0, RATE))).toBeCloseTo(-15, 4);
  });
  it('mirrors the spectrum by conjugation and by exchange alike', () => {
    for (const mirror of [invertSpectrum, exchangeIq]) {
      const iq = turning(50e3, RATE, 10_000);
      mirror(iq);
      expect(powerAt(iq, -50e3, RATE)).toBeCloseTo(1, 6);
    }
  });
  it('calls a tone at full scale 0 dB', () => {
    const iq = turning(50e3, RATE, 1000);
    setLevel(iq, 0);
    expect(Math.max(...iq)).toBeCloseTo(1, 5);
    setLevel(iq, 6);
    expect(clip(iq)).toBeGreaterThan(0.5);
    expect(Math.max(...iq)).toBe(1);
  });
  it('widens a tone to the line asked: phase of a Wiener oscillator grows by 2π·linewidth·t', () => {
    const random = new Random(9);
    let sum = 0;
    for (let run = 0; run < 200; run++) {
      const iq = turning(0, RATE, 1000);
      addPhaseNoise(iq, { linewidthHz: 20, sampleRateHz: RATE, random });
      sum += Math.atan2(iq[1999], iq[1998]) ** 2;
    }
    // Variance 2π·20·1 ms = 0.126; a mean of 200 squares scatters by a tenth.
    expect(sum / 200).toBeGreaterThan(0.126 * 0.7);
    expect(sum / 200).toBeLessThan(0.126 * 1.3);
  });
  it('takes runs of samples out', () => {
    const iq = Float32Array.from({ length: 20 }, (_, i) => i >> 1);
    expect([...dropSamples(iq, [{ at: 2, count: 3 }, { at: 7, count: 1 }])].filter((_, i) => i % 2 === 0)).toEqual([0, 1, 5, 6, 8, 9]);
  });
});

describe('channel', () => {
  const RATE = 30.72e6;
  it('delays by fractions of a sample', () => {
    const iq = turning(4e6, RATE, 400);
    const out = delay(iq, 10.3);
    const turned = turning(4e6, RATE, 400);
    shiftFrequency(turned, { offsetHz: 0, rateHz: RATE, phase: (-2 * Math.PI * 4e6 * 10.3) / RATE });
    for (let n = 60; n < 380; n++) expect(Math.hypot(out[2 * n] - turned[2 * n], out[2 * n + 1] - turned[2 * n + 1])).toBeLessThan(0.003);
  });
  it('keeps the mean power over many fades and fades as Rayleigh does', () => {
    const random = new Random(4);
    const powers = Array.from({ length: 400 }, () => meanPower(throughChannel(turning(0, RATE, 64), { channel: { paths: PROFILES.flat, dopplerHz: 10 }, sampleRateHz: RATE, random })));
    const mean = powers.reduce((a, b) => a + b, 0) / powers.length;
    // Exponential power: mean 1 ± 1/√400 (three of them), and 1 − 1/e of the fades below the mean.
    expect(Math.abs(mean - 1)).toBeLessThan(0.15);
    expect(powers.filter((p) => p < 1).length / 400).toBeGreaterThan(0.55);
    expect(powers.filter((p) => p < 1).length / 400).toBeLessThan(0.72);
  });
});

describe('receiver', () => {
  it('shows a tone at carrier minus tuner plus offset', () => {
    const { iq, sampleRateHz } = receive(tone(1e9), { centreHz: 1e9 - 2.5e5, sampleRateHz: 2e6, startS: 0.00123, durationS: 0.005, carrierOffsetHz: 137 });
    expect(powerAt(iq, 250_137, sampleRateHz)).toBeCloseTo(1, 3);
  });

  const OWN: OwnOfdmSpec = { carrierHz: 2e9, spacingHz: 25e3, fftSize: 512, prefixSamples: 64, lowest: -180, highest: 180, emptyDc: true, modulation: 'qpsk', pilotEvery: 0, bursts: null, seed: 1 };
  it('sees the transmitter\'s symbols shorter where its clock is faster', () => {
    const like = (clockPpm: number, lag: number) => {
      const { iq } = receive(ownOfdm(OWN), { centreHz: 2e9, sampleRateHz: 12.8e6, startS: 0, durationS: 0.0481, clockPpm });
      // Symbol 1000 starts at sample 576,000·(1 − ppm): count what its prefix shares with its end.
      let sum = 0;
      let power = 0;
      for (let n = 0; n < 64; n++) {
        const at = 2 * (576_000 + lag + n);
        sum += iq[at] * iq[at + 1024] + iq[at + 1] * iq[at + 1025];
        power += (iq[at] ** 2 + iq[at + 1] ** 2 + iq[at + 1024] ** 2 + iq[at + 1025] ** 2) / 2;
      }
      return sum / power;
    };
    // 20 ppm of 576,000 samples are 11.5: the prefix now starts that much earlier.
    expect(like(20, -12)).toBeGreaterThan(0.95);
    expect(like(20, 12)).toBeLessThan(0.8);
    expect(like(0, 0)).toBeCloseTo(1, 2);
  });
});

describe('one carrier', () => {
  it('has a pulse that passes itself without interference between symbols (Nyquist)', () => {
    const h = rootRaisedCosine(8, 0.22);
    const at = (lag: number) => h.reduce((sum, v, i) => sum + v * (h[i + lag] ?? 0), 0) / 8;
    expect(at(0)).toBeCloseTo(1, 3);
    for (const k of [1, 2, 3, 5]) expect(Math.abs(at(8 * k))).toBeLessThan(0.005);
  });
  it('has power 1', () => {
    const { iq } = receive(singleCarrier({ carrierHz: 1e9, symbolRateHz: 1e6, rollOff: 0.3, bursts: null, seed: 2 }), { centreHz: 1e9, sampleRateHz: 4e6, startS: 0, durationS: 0.01 });
    expect(meanPower(iq)).toBeCloseTo(1, 1);
  });
});

describe('sample formats of SigMF', () => {
  it('write full scale, its negative and zero', () => {
    const iq = Float32Array.from([1, -1, 0, 0.5]);
    expect([...new Int16Array(toBytes(iq, 'ci16_le').buffer)]).toEqual([32767, -32768, 0, 16384]);
    expect([...toBytes(iq, 'ci16_be')]).toEqual([0x7f, 0xff, 0x80, 0x00, 0x00, 0x00, 0x40, 0x00]);
    expect([...new Int8Array(toBytes(iq, 'ci8').buffer)]).toEqual([127, -128, 0, 64]);
    expect([...toBytes(iq, 'cu8')]).toEqual([255, 0, 128, 191]);
    expect([...new Float32Array(toBytes(iq, 'cf32_le').buffer)]).toEqual([1, -1, 0, 0.5]);
  });
});
