import { describe, expect, it } from 'vitest';
import { analyseWindow, estimateOfdm } from '#engine/sync/estimate';
import { mulberry, noisy, nrPrefix, smallOfdm, white, type SmallOfdm } from '../support/small-ofdm.js';

interface Case extends SmallOfdm {
  readonly name: string;
  readonly cyclicPrefix: 'normal' | 'extended' | null;
}

const nr = (mu: number, rateHz: number, subcarriers: number): Omit<Case, 'name' | 'snrDb'> => ({
  spacingHz: 15e3 * 2 ** mu, prefixS: nrPrefix(mu), subcarriers, rateHz, durationS: mu < 2 ? 6e-3 : 3e-3, cyclicPrefix: 'normal',
});
const even = (spacingHz: number, prefixS: number, rest: { subcarriers: number; rateHz: number; durationS: number; cyclicPrefix?: 'extended' }) => ({
  spacingHz, prefixS: () => prefixS, cyclicPrefix: null, ...rest,
});

/** Native rates and others, whole and fractional samples a symbol; prefixes from the standards' tables. */
const CASES: Case[] = [
  { name: '15 kHz', snrDb: 5, ...nr(0, 3.84e6, 180) },
  { name: '15 kHz at 5 Msps', snrDb: 5, ...nr(0, 5e6, 180) },
  { name: '30 kHz', snrDb: 5, ...nr(1, 7.68e6, 180) },
  { name: '30 kHz at 0 dB', snrDb: 0, ...nr(1, 7.68e6, 180) },
  { name: '30 kHz at 6.25 Msps', snrDb: 5, ...nr(1, 6.25e6, 144) },
  { name: '60 kHz', snrDb: 5, ...nr(2, 11.52e6, 132) },
  { name: '60 kHz, extended (TS 38.211 clause 5.3.1: a quarter)', snrDb: 5, ...even(60e3, 512 / 30.72e6 / 4, { subcarriers: 132, rateHz: 10e6, durationS: 3e-3, cyclicPrefix: 'extended' }), cyclicPrefix: 'extended' },
  { name: '120 kHz', snrDb: 5, ...nr(3, 25e6, 144) },
  { name: '15 kHz, extended (TS 36.211 Table 6.12-1: 512 T_s)', snrDb: 5, ...even(15e3, 512 / 30.72e6, { subcarriers: 180, rateHz: 3.84e6, durationS: 6e-3 }), cyclicPrefix: 'extended' },
  { name: 'Wi-Fi, 0.8 µs', snrDb: 5, ...even(312.5e3, 0.8e-6, { subcarriers: 52, rateHz: 20e6, durationS: 1e-3 }) },
  { name: 'Wi-Fi, 0.4 µs at 25 Msps', snrDb: 5, ...even(312.5e3, 0.4e-6, { subcarriers: 56, rateHz: 25e6, durationS: 1e-3 }) },
  { name: 'Wi-Fi, 12.8 + 3.2 µs', snrDb: 5, ...even(78.125e3, 3.2e-6, { subcarriers: 242, rateHz: 20e6, durationS: 1.5e-3 }) },
  { name: '10 MHz clock, 1.6 µs', snrDb: 5, ...even(156.25e3, 1.6e-6, { subcarriers: 52, rateHz: 10e6, durationS: 2e-3 }) },
  { name: '43 kHz, 1/10 of no list', snrDb: 8, ...even(43e3, 2.33e-6, { subcarriers: 96, rateHz: 6.2e6, durationS: 6e-3 }) },
  { name: '2.5 kHz, 1/16, 48 subcarriers', snrDb: 12, ...even(2.5e3, 25e-6, { subcarriers: 48, rateHz: 1.92e6, durationS: 30e-3 }) },
  { name: '40 kHz, 1/16, three independent samples a prefix', snrDb: 15, ...even(40e3, 1.5625e-6, { subcarriers: 52, rateHz: 4e6, durationS: 10e-3 }) },
  { name: '1 MHz, 1/8', snrDb: 12, ...even(1e6, 0.125e-6, { subcarriers: 64, rateHz: 100e6, durationS: 0.5e-3 }) },
  { name: '7 kHz, 1/4 of no list', snrDb: 8, ...even(7e3, 35.7e-6, { subcarriers: 200, rateHz: 2e6, durationS: 20e-3 }) },
];

function estimate(plan: SmallOfdm) {
  return analyseWindow({ iq: smallOfdm(plan), startSample: 0, sampleRateHz: plan.rateHz });
}

describe('blind numerology', () => {
  it.each(CASES)('reads $name', (plan) => {
    const offsetHz = 0.31 * plan.spacingHz;
    const lateS = 0.37e-3;
    const { found } = estimate({ ...plan, offsetHz, lateS });
    expect(found).not.toBeNull();
    expect(Math.abs(found!.subcarrierSpacingHz / plan.spacingHz - 1)).toBeLessThan(0.004);
    expect(found!.cyclicPrefix).toBe(plan.cyclicPrefix);
    expect(Math.abs(found!.cyclicPrefixS / plan.prefixS(1) - 1)).toBeLessThan(0.05);
    // The offset to 1 % of the spacing; the odd or even number of subcarriers does not matter to it.
    expect(Math.abs(found!.grid.referenceHz - offsetHz)).toBeLessThan(0.012 * plan.spacingHz);
    expect(Math.abs(found!.snrDb! - plan.snrDb)).toBeLessThan(1.5);
    expect(startError(plan, lateS, found!.grid.startSample / plan.rateHz)).toBeLessThan(plan.prefixS(1) / 5);
    expect(found!.confidence).toBeGreaterThan(0.9);
  });

  it('reads the residue of a carrier many subcarriers beside zero: the spacing is good to a part in 10,000', () => {
    const plan = { ...even(73_250, 1.7e-6, { subcarriers: 44, rateHz: 10e6, durationS: 6e-3 }), snrDb: 18 };
    const offsetHz = 31.27 * plan.spacingHz;
    const found = estimate({ ...plan, offsetHz } as SmallOfdm).found!;
    const away = (found.grid.referenceHz - offsetHz) / plan.spacingHz;
    expect(Math.abs(found.subcarrierSpacingHz / plan.spacingHz - 1)).toBeLessThan(1e-4);
    expect(Math.abs(away - Math.round(away))).toBeLessThan(0.01);
  });

  it('places the half subframe where the longer prefix is', () => {
    const lateS = 0.123e-3;
    const plan = { ...CASES[2], lateS };
    const { found } = estimate(plan);
    const phase = (((found!.grid.startSample / plan.rateHz + lateS) % 0.5e-3) + 0.5e-3) % 0.5e-3;
    expect(Math.min(phase, 0.5e-3 - phase)).toBeLessThan(0.3e-6);
    expect(found!.longPrefixEvery).toBe(14);
  });

  it('tells a rate label that is wrong by two from another numerology by how often a longer prefix comes', () => {
    // 15 kHz recorded at 3.84 Msps and labelled 7.68 looks like 30 kHz, but the longer prefix comes every 7 symbols.
    const iq = smallOfdm({ ...nr(0, 3.84e6, 180), snrDb: 12, durationS: 20e-3 });
    const { found } = analyseWindow({ iq, startSample: 0, sampleRateHz: 7.68e6 });
    expect(found!.subcarrierSpacingHz).toBeCloseTo(30e3, -1);
    expect(found!.longPrefixEvery).toBe(7);
  });

  it('reads a carrier with empty slots and one beside its centre', () => {
    const sent = (l: number) => Math.floor(l / 14) % 5 < 2;
    const { found } = estimate({ ...nr(1, 15.36e6, 144), name: '', snrDb: 5, durationS: 5e-3, offsetHz: 3.1e6, sent } as SmallOfdm);
    expect(found!.subcarrierSpacingHz).toBe(30e3);
    expect(found!.cyclicPrefix).toBe('normal');
  });

  it('reads bursts that start when they like', () => {
    const rate = 20e6;
    const iq = new Float32Array(2 * 60_000);
    for (const [i, at] of [1371, 15_020, 33_333].entries()) {
      iq.set(smallOfdm({ spacingHz: 312.5e3, prefixS: () => 0.8e-6, subcarriers: 52, rateHz: rate, durationS: 400e-6, snrDb: 60, seed: i + 1 }), 2 * at);
    }
    const { found } = analyseWindow({ iq: noisy(iq, (10 ** -0.8 * rate) / (52 * 312.5e3), mulberry(5)), startSample: 0, sampleRateHz: rate });
    expect(found!.subcarrierSpacingHz).toBe(312.5e3);
    expect(found!.cyclicPrefixS).toBeCloseTo(0.8e-6, 8);
  });

  it('looks further on when the first 20 ms are silent', () => {
    const rateHz = 3.84e6;
    const signal = smallOfdm({ ...nr(0, rateHz, 180), snrDb: 15, durationS: 20e-3 });
    const quiet = white(76_800, 8).map((v) => v * 0.01);
    const source = {
      sampleRateHz: rateHz, centreFrequencyHz: null, samples: 4 * 76_800,
      read: (start: number, count: number) => {
        const out = new Float32Array(2 * count);
        for (let n = 0; n < count; n++) {
          const from = start + n >= 230_400 ? signal : quiet;
          out.set(from.subarray(2 * ((start + n) % 76_800), 2 * ((start + n) % 76_800) + 2), 2 * n);
        }
        return out;
      },
    };
    const found = estimateOfdm(source);
    expect(found!.subcarrierSpacingHz).toBe(15e3);
    expect(found!.grid.startSample).toBeGreaterThan(230_000);
  });
});

/** Distance of a found symbol start from the nearest true one, s. */
function startError({ prefixS, spacingHz }: SmallOfdm, lateS: number, foundS: number): number {
  let at = -lateS;
  let least = Infinity;
  for (let l = 0; at < foundS + 2 / spacingHz; l++) {
    least = Math.min(least, Math.abs(at - foundS));
    at += prefixS(l) + 1 / spacingHz;
  }
  return least;
}

describe('offset', () => {
  it('scatters as theory says (van de Beek, Sandell and Börjesson 1997; Kay: phase of a correlation)', () => {
    // n products of correlation coefficient ρ leave a phase variance of (1 − ρ²) / (2·n·ρ²), n = band · prefix time.
    const plan = { ...nr(0, 1.92e6, 72), durationS: 4e-3, snrDb: 5 };
    const errors: number[] = [];
    for (let seed = 1; seed <= 60; seed++) {
      const { found } = estimate({ ...plan, seed, offsetHz: 1000 } as SmallOfdm);
      expect(found?.subcarrierSpacingHz).toBe(15e3);
      errors.push((found!.grid.referenceHz - 1000) / 15e3);
    }
    const snr = 10 ** 0.5 * ((72 * 15e3) / 1.92e6);
    const rho = snr / (1 + snr);
    const n = 56 * (144.5 / 30.72e6) * 1.92e6;
    const expected = Math.sqrt((1 - rho ** 2) / (2 * n * rho ** 2)) / (2 * Math.PI);
    const measured = Math.sqrt(errors.reduce((a, e) => a + e * e, 0) / errors.length);
    // The signal's band is 0.56 of the rate, so that its products are not independent: up to 1/√0.56 more; 60 trials scatter by 9 %.
    expect(measured).toBeGreaterThan(0.7 * expected);
    expect(measured).toBeLessThan(1.7 * expected);
  });
});

describe('no OFDM', () => {
  const rate = 7.68e6;
  const samples = 30_000;
  const make = (f: (n: number, random: () => number) => [number, number], snrDb: number, seed: number) => {
    const random = mulberry(seed);
    const iq = new Float32Array(2 * samples);
    for (let n = 0; n < samples; n++) iq.set(f(n, random), 2 * n);
    return noisy(iq, 10 ** (-snrDb / 10), random);
  };
  const claims = (iq: Float32Array, sampleRateHz = rate) => analyseWindow({ iq, startSample: 0, sampleRateHz }).found;

  it('is claimed of white noise', () => {
    for (let seed = 1; seed <= 24; seed++) expect(claims(white(samples, seed))).toBeNull();
  });

  it('is claimed of tones, sweeps or frequency modulation', () => {
    for (let seed = 1; seed <= 8; seed++) {
      const snr = 3 * seed;
      const f = 0.04 * seed - 0.17;
      expect(claims(make((n) => polar(f * n), snr, seed))).toBeNull();
      expect(claims(make((n) => sum(polar(f * n), polar((f + 0.123) * n)), snr, seed))).toBeNull();
      expect(claims(make((n) => polar(((n % 768) ** 2 / 768) * 0.4), snr, seed))).toBeNull();
      expect(claims(make((n) => polar(9 * Math.sin((2 * Math.PI * n * 1500) / rate)), snr, seed))).toBeNull();
    }
  });

  it('is claimed of a spread carrier, with echoes or without', () => {
    // IEEE 802.11 clause 15.4.5.3: one data symbol is this run of 11 chips, so that chips resemble each other within it.
    const barker = [1, -1, 1, 1, -1, 1, 1, 1, -1, -1, -1];
    for (let seed = 1; seed <= 5; seed++) {
      const random = mulberry(seed + 300);
      const bits = Array.from({ length: samples / 22 + 12 }, () => [random() < 0.5 ? -1 : 1, random() < 0.5 ? -1 : 1]);
      const chips = Array.from({ length: 11 * bits.length }, (_, n) => bits[Math.floor(n / 11)].map((bit) => bit * barker[n % 11]));
      // Nine echoes, up to three symbols late, each with a phase of its own.
      const echoes = Array.from({ length: 9 }, (_, k) => [Math.floor(random() * 33), polar(random()).map((part) => part * 0.85 ** k)] as const);
      const echoed = chips.map(([i, q], n) => echoes.reduce(([re, im], [late, [a, b]]) => {
        const [ei, eq] = chips[n - late] ?? [0, 0];
        return [re + a * ei - b * eq, im + a * eq + b * ei];
      }, [i, q]));
      for (const data of [chips, echoed]) expect(claims(make((n) => shaped(data, n / 2.1), 10 + seed, seed), 2.1 * 11e6)?.subcarrierSpacingHz ?? null).toBeNull();
    }
  });

  it('is claimed of single-carrier QPSK', () => {
    for (let seed = 1; seed <= 12; seed++) {
      const symbols = mulberry(seed + 100);
      const data = Array.from({ length: samples / 4 + 40 }, () => [symbols() < 0.5 ? -1 : 1, symbols() < 0.5 ? -1 : 1]);
      expect(claims(make((n) => shaped(data, n / 4), 3 + 2 * seed, seed))).toBeNull();
    }
  });
});

function polar(turns: number): [number, number] {
  return [Math.cos(2 * Math.PI * turns), Math.sin(2 * Math.PI * turns)];
}

function sum(a: [number, number], b: [number, number]): [number, number] {
  return [a[0] + b[0], a[1] + b[1]];
}

/** Raised-cosine pulses, roll-off 0.3, cut at six symbols on either side. */
function shaped(data: number[][], t: number): [number, number] {
  let re = 0;
  let im = 0;
  for (let k = Math.max(0, Math.ceil(t - 6)); k <= t + 6; k++) {
    const x = t - k;
    const sinc = x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x);
    const d = 1 - (0.6 * x) ** 2;
    const pulse = Math.abs(d) < 1e-9 ? 0.5 * sinc * Math.PI / 2 : (sinc * Math.cos(0.3 * Math.PI * x)) / d;
    re += data[k][0] * pulse;
    im += data[k][1] * pulse;
  }
  return [re, im];
}
