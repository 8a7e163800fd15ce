import { describe, expect, it } from 'vitest';
import { receive } from '#backend/generator/receive';
import { meanPower } from '#backend/generator/signal';
import { wifiBursts } from '#backend/generator/wifi/bursts';
import { convolve, interleave, PILOT_POLARITY, signalCrc } from '#backend/generator/wifi/coding';
import { wifiFrame } from '#backend/generator/wifi/frame';
import { heSignalBits, htSignalBits, legacySignalBits, vhtSignalBits } from '#backend/generator/wifi/signal-fields';
import type { WifiSpec } from '#backend/generator/wifi/spec';
import { HE, HT_VHT } from '#backend/generator/wifi/tones';
import { heLongTraining, htVhtTraining } from '#backend/generator/wifi/training';
import { Random } from '#backend/generator/random';

const bits = (text: string) => [...text.replaceAll(' ', '')].map(Number);
const SPEC: WifiSpec = { carrierHz: 5.3e9, format: 'ht', mhz: 20, guardUs: 0.4, mcs: 3, clock: 1, symbols: [20, 40], gapUs: [50, 100], seed: 3 };

describe('SIGNAL field against IEEE 802.11 clause 17 and its annex example (36 Mb/s, 100 octets; from memory)', () => {
  const signal = legacySignalBits(36, 100);
  it('has the bits of the example', () => {
    expect([...signal]).toEqual(bits('1011 0 001001100000 0 000000'));
  });
  it('codes to the bits of the example', () => {
    expect([...convolve(signal)]).toEqual(bits('1101 0001 1010 0001 0000 0010 0011 1110 0111 0000 0000 0000'));
  });
  it('interleaves to the bits of the example', () => {
    expect([...interleave(convolve(signal), 16)]).toEqual(bits('1001 0100 1101 0000 0001 0100 1000 0011 0010 0100 1001 0100'));
  });
  // Worked by two open receivers' rules (gr-ieee802-11 ce70973, gr-ieee80211).
  it.each([[6, 100, '110100010011000000000000'], [6, 14, '110100111000000000000000'], [54, 1500, '001100011101110101000000'], [12, 4095, '010101111111111110000000']])('word of %i Mb/s, %i octets', (mbps, length, word) => {
    expect([...legacySignalBits(mbps, length)]).toEqual(bits(word));
  });
  it('starts the pilots polarity as clause 17.3.5.10 tabulates', () => {
    expect(PILOT_POLARITY.slice(0, 20)).toEqual([1, 1, 1, 1, -1, -1, -1, 1, -1, -1, -1, -1, 1, 1, -1, 1, -1, -1, 1, 1]);
  });
});

describe('SIG fields of later formats', () => {
  it('gives the CRC of the example in clause 19.3.9.4.4 (from memory)', () => {
    const word = bits('1111 0001 0010 0110 0000 0000 1110 0000 00');
    expect([...signalCrc(word)]).toEqual(bits('1010 1000'));
  });
  it('are as long as their two symbols carry', () => {
    expect(htSignalBits({ mcs: 7, mhz: 40, length: 999, shortGuard: true })).toHaveLength(48);
    expect(vhtSignalBits({ mcs: 7, mhz: 80, shortGuard: true, symbols: 9 })).toHaveLength(48);
    expect(heSignalBits({ mcs: 7, mhz: 80, guardAndTraining: 2 })).toHaveLength(52);
  });
  it('put the guard interval where the tables say', () => {
    expect(htSignalBits({ mcs: 0, mhz: 20, length: 8, shortGuard: true })[31]).toBe(1);
    expect(vhtSignalBits({ mcs: 0, mhz: 20, shortGuard: true, symbols: 3 })[24]).toBe(1);
    expect(heSignalBits({ mcs: 0, mhz: 20, guardAndTraining: 2 }).slice(21, 23)).toEqual(Uint8Array.of(0, 1));
  });
});

describe('tones', () => {
  // Counts of IEEE 802.11 Tables 19-6, 21-5 and 27-9, as open channel-state tools list them.
  it.each([[20, 52, 4], [40, 108, 6], [80, 234, 8], [160, 468, 16]] as const)('HT and VHT at %i MHz: %i data, %i pilots', (mhz, data, pilots) => {
    const { used, pilots: set } = HT_VHT[mhz];
    expect([used.length - set.length, set.length]).toEqual([data, pilots]);
    expect(set.every((k) => used.includes(k))).toBe(true);
    expect(htVhtTraining(mhz).map(([k]) => k)).toEqual(used);
  });
  it.each([[20, 234, 8], [40, 468, 16], [80, 980, 16], [160, 1960, 32]] as const)('HE at %i MHz: %i data, %i pilots', (mhz, data, pilots) => {
    const { used, pilots: set } = HE[mhz];
    expect([used.length - set.length, set.length]).toEqual([data, pilots]);
    expect(set.every((k) => used.includes(k))).toBe(true);
    expect(heLongTraining(mhz, 4).map(([k]) => k)).toEqual(used);
  });
});

/** Correlation of a stretch with itself `lag` samples later, 0 to 1. */
function likeness(iq: Float32Array, { start, count, lag }: { start: number; count: number; lag: number }): number {
  let re = 0;
  let im = 0;
  let power = 0;
  for (let n = start; n < start + count; n++) {
    re += iq[2 * n] * iq[2 * (n + lag)] + iq[2 * n + 1] * iq[2 * (n + lag) + 1];
    im += iq[2 * n] * iq[2 * (n + lag) + 1] - iq[2 * n + 1] * iq[2 * (n + lag)];
    power += iq[2 * n] ** 2 + iq[2 * n + 1] ** 2;
  }
  return Math.hypot(re, im) / power;
}

describe('bursts', () => {
  const onset = (iq: Float32Array) => iq.findIndex((v) => Math.abs(v) > 0.01) >> 1;

  it('repeat the short training every 0.8 µs and the long one every 3.2 µs', () => {
    const { iq } = receive(wifiBursts(SPEC), { centreHz: SPEC.carrierHz, sampleRateHz: 20e6, startS: 0, durationS: 0.0003 });
    const start = onset(iq);
    expect(likeness(iq, { start, count: 144, lag: 16 })).toBeCloseTo(1, 5);
    expect(likeness(iq, { start: start + 160, count: 96, lag: 64 })).toBeCloseTo(1, 5);
    // HT-mixed: 20 µs legacy preamble, 8 HT-SIG, 4 HT-STF, 4 HT-LTF; then 3.6 µs symbols.
    expect(likeness(iq, { start: start + 720, count: 8, lag: 64 })).toBeCloseTo(1, 5);
    expect(likeness(iq, { start: start + 720 + 72, count: 8, lag: 64 })).toBeCloseTo(1, 5);
  });

  it.each([
    [{ format: 'he', mhz: 20, guardUs: 3.2, heTraining: 4 }, 20 + 4 + 8 + 4 + 16, 12.8],
    [{ format: 'he', mhz: 40, guardUs: 1.6, heTraining: 2 }, 20 + 4 + 8 + 4 + 8, 12.8],
    [{ format: 'vht', mhz: 80, guardUs: 0.4 }, 20 + 8 + 4 + 4 + 4, 3.2],
    [{ format: 'legacy', mhz: 20, guardUs: 0.8 }, 20, 3.2],
  ] as const)('start the data of %o after %d µs', (change, dataUs, usefulUs) => {
    const spec: WifiSpec = { ...SPEC, ...change };
    const rateHz = spec.mhz * 1e6;
    const { iq } = receive(wifiBursts(spec), { centreHz: spec.carrierHz, sampleRateHz: rateHz, startS: 0, durationS: 0.0003 });
    const at = onset(iq) + dataUs * spec.mhz;
    expect(likeness(iq, { start: at, count: spec.guardUs * spec.mhz, lag: usefulUs * spec.mhz })).toBeCloseTo(1, 4);
    expect(likeness(iq, { start: at + Math.round((spec.guardUs + usefulUs) * spec.mhz), count: spec.guardUs * spec.mhz, lag: usefulUs * spec.mhz })).toBeCloseTo(1, 4);
  });

  it('keep power 1 within a frame', () => {
    const { iq } = receive(wifiBursts({ ...SPEC, gapUs: [0, 0] }), { centreHz: SPEC.carrierHz, sampleRateHz: 40e6, startS: 0, durationS: 0.001 });
    expect(meanPower(iq)).toBeGreaterThan(0.9);
    expect(meanPower(iq)).toBeLessThan(1.1);
  });

  it('let HE be told from HT and VHT by LENGTH modulo 3 (clause 27.3.11.5)', () => {
    const length = (change: Partial<WifiSpec>) => {
      const signal = wifiFrame({ ...SPEC, ...change }, 20, new Random(1))[2].tones.slice(0, 48).map(([, re]) => (re > 0 ? 1 : 0)).join('');
      return Array.from({ length: 4096 }, (_, n) => n).find((n) => interleave(convolve(legacySignalBits(6, n)), 16).join('') === signal)!;
    };
    // HT-mixed: 20 symbols of 3.6 µs after 16 µs of HT preamble, so 88 µs beyond L-SIG: 3·22 − 3.
    expect(length({})).toBe(63);
    expect(length({ format: 'he', guardUs: 0.8, heTraining: 2 }) % 3).toBe(1);
  });
});
