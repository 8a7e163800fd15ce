import { describe, expect, it } from 'vitest';
import { crcBits } from '#backend/generator/crc';
import { lteCarrier } from '#backend/generator/lte/carrier';
import { mibTransportBits, rateMatch, tailBiting } from '#backend/generator/lte/pbch';
import { referenceSubcarriers, reservedSubcarriers } from '#backend/generator/lte/reference';
import type { LteSpec } from '#backend/generator/lte/spec';
import { ltePss, lteSss } from '#backend/generator/lte/sync-signals';
import { lteSlot } from '#backend/generator/lte/timing';
import { lteUplink, type UplinkSpec } from '#backend/generator/lte/uplink';
import { receive } from '#backend/generator/receive';
import { meanPower } from '#backend/generator/signal';

const SPEC: LteSpec = {
  carrierHz: 1.8563e9, resourceBlocks: 25, prefix: 'normal', duplex: 'fdd', cellId: 409, ports: 1, systemFrameNumber: 261, phichDuration: 'normal', phichResource: 1, controlSymbols: 2,
  load: { subframes: 1, blocks: 1, modulations: ['qpsk'] }, seed: 1,
};
const place = { cellId: 409, prefix: 'normal' as const, slot: 1, symbol: 0, resourceBlocks: 25 };

describe('numbers of TS 36.211 and 36.212', () => {
  it('fills a slot of 15360 T_s with either prefix (clause 6.12)', () => {
    for (const prefix of ['normal', 'extended'] as const) {
      const { prefixTs } = lteSlot(prefix);
      expect(prefixTs.reduce((sum, cp) => sum + cp + 2048, 0)).toBe(15360);
    }
  });

  it('has primary signals of roots 25, 29 and 34, the last two conjugate (calculated: 29 + 34 = 63)', () => {
    const [one, two] = [ltePss(1), ltePss(2)];
    for (let n = 0; n < 62; n++) {
      expect(one[2 * n]).toBeCloseTo(two[2 * n], 9);
      expect(one[2 * n + 1]).toBeCloseTo(-two[2 * n + 1], 9);
    }
  });

  it('tells the half frames apart: even values of one are built from the other\'s odd shifts', () => {
    for (const id of [0, 90, 409, 503]) expect([...lteSss(id, false)]).not.toEqual([...lteSss(id, true)]);
    const all = new Set(Array.from({ length: 504 }, (_, id) => lteSss(id, false).join()).concat(Array.from({ length: 504 }, (_, id) => lteSss(id, true).join())));
    expect(all.size).toBe(1008);
  });

  // The check word of this polynomial in every CRC catalogue (XMODEM).
  it('gives 0x31C3 for the digits 1 to 9', () => {
    const bits = [...'123456789'].flatMap((c) => Array.from({ length: 8 }, (_, i) => (c.charCodeAt(0) >> (7 - i)) & 1));
    expect(Number.parseInt(crcBits(bits, 0x1021, 16).join(''), 2)).toBe(0x31c3);
  });

  it('answers one bit with the octal polynomials 133, 171 and 165 (36.212 clause 5.1.3.1)', () => {
    const bits = new Uint8Array(40);
    bits[0] = 1;
    expect(tailBiting(bits).map((s) => Number.parseInt(s.slice(0, 7).join(''), 2).toString(8))).toEqual(['133', '171', '165']);
  });

  it('bites its tail: turned input gives turned output', () => {
    const bits = Uint8Array.from({ length: 40 }, (_, i) => ((i * i + 3 * i) % 7) & 1);
    const turned = Uint8Array.from([...bits.slice(5), ...bits.slice(0, 5)]);
    const [plain, moved] = [tailBiting(bits), tailBiting(turned)];
    plain.forEach((stream, s) => expect([...moved[s]]).toEqual([...stream.slice(5), ...stream.slice(0, 5)]));
  });

  it('sends each of 120 coded bits 16 times in 1920', () => {
    const word = rateMatch([0, 1, 2].map((s) => Uint8Array.from({ length: 40 }, (_, i) => 40 * s + i)), 1920);
    const counts = new Map<number, number>();
    word.forEach((bit) => counts.set(bit, (counts.get(bit) ?? 0) + 1));
    expect([...counts.values()]).toEqual(Array.from({ length: 120 }, () => 16));
    // Column 1 is read first (Table 5.1.4-2): with 24 empty places, bit 9 leads, then bit 25 of the first column pair.
    expect(word.slice(0, 2)).toEqual(Uint8Array.of(9, 25));
  });

  it('masks the CRC by the number of ports', () => {
    const mib = { resourceBlocks: 25, phichDuration: 'normal' as const, phichResource: 1 as const, systemFrameNumber: 261 };
    const [one, two] = [mibTransportBits(mib, 1), mibTransportBits(mib, 2)];
    expect(one.slice(24).map((bit, i) => bit ^ two[24 + i])).toEqual(new Uint8Array(16).fill(1));
    expect(one.slice(0, 14)).toEqual(Uint8Array.of(0, 1, 0, 0, 0, 1, 0, 1, 0, 0, 0, 0, 0, 1));
  });

  it('leaves 240 elements to the broadcast channel, 216 with the extended prefix (clause 6.6.1)', () => {
    const free = (prefix: 'normal' | 'extended') => [0, 1, 2, 3].reduce((sum, symbol) => {
      const reserved = reservedSubcarriers(4, { ...place, prefix, symbol });
      return sum + Array.from({ length: 72 }, (_, i) => 114 + i).filter((k) => !reserved.has(k)).length;
    }, 0);
    expect([free('normal'), free('extended')]).toEqual([240, 216]);
  });

  it('has reference symbols on every sixth subcarrier, ports 0 and 1 three apart (clause 6.10.1.2)', () => {
    const [zero, one] = [referenceSubcarriers(0, place), referenceSubcarriers(1, place)];
    expect(zero.slice(0, 3)).toEqual([409 % 6, (409 % 6) + 6, (409 % 6) + 12]);
    expect(one[0]).toBe((zero[0] + 3) % 6);
    expect(referenceSubcarriers(0, { ...place, symbol: 3 })).toEqual([]);
  });
});

/** Power of one subcarrier (or half of one) in a symbol, by the definition. */
function power(iq: Float32Array, { start, size, cycles }: { start: number; size: number; cycles: number }): number {
  let re = 0;
  let im = 0;
  for (let n = 0; n < size; n++) {
    const angle = (-2 * Math.PI * cycles * n) / size;
    re += iq[2 * (start + n)] * Math.cos(angle) - iq[2 * (start + n) + 1] * Math.sin(angle);
    im += iq[2 * (start + n)] * Math.sin(angle) + iq[2 * (start + n) + 1] * Math.cos(angle);
  }
  return (re * re + im * im) / size ** 2;
}

describe('an LTE downlink on the air', () => {
  const { iq } = receive(lteCarrier(SPEC), { centreHz: SPEC.carrierHz, sampleRateHz: 7.68e6, startS: 0, durationS: 0.001 });
  const symbol4 = 40 + 512 + 4 * (36 + 512) - 512;

  it('leaves the DC subcarrier empty and uses 150 on either side (36.104 clause 5.6)', () => {
    const used = [-151, -150, -1, 0, 1, 150, 151].map((cycles) => power(iq, { start: symbol4, size: 512, cycles }) > 1e-4);
    expect(used).toEqual([false, true, true, false, true, true, false]);
  });

  it('has power near 1 under full load', () => {
    expect(meanPower(iq)).toBeGreaterThan(0.8);
    expect(meanPower(iq)).toBeLessThan(1.1);
  });

  it('is silent in the uplink subframes of TDD (Table 4.2-2, configuration 1: D S U U D)', () => {
    const tdd = receive(lteCarrier({ ...SPEC, duplex: 'tdd', tddConfiguration: 1, specialSubframe: 7 }), { centreHz: SPEC.carrierHz, sampleRateHz: 7.68e6, startS: 0, durationS: 0.005 }).iq;
    const subframe = (n: number) => meanPower(tdd.subarray(2 * 7680 * n, 2 * 7680 * (n + 1)));
    expect([2, 3].map(subframe)).toEqual([0, 0]);
    expect(subframe(0)).toBeGreaterThan(0.5);
    expect(subframe(4)).toBeGreaterThan(0.5);
    // Special subframe 7 sends 10 of 14 symbols.
    expect(subframe(1) / subframe(0)).toBeCloseTo(10 / 14, 1);
  });
});

describe('a single-carrier uplink', () => {
  const UPLINK: UplinkSpec = { carrierHz: 1.75e9, resourceBlocks: 25, prefix: 'normal', cellId: 7, allocatedBlocks: 25, firstBlock: 0, subframes: 1, modulation: 'qpsk', halfSubcarrierShift: true, seed: 1 };
  const tones = (shift: boolean) => {
    const { iq } = receive(lteUplink({ ...UPLINK, halfSubcarrierShift: shift }), { centreHz: 1.75e9, sampleRateHz: 7.68e6, startS: 0, durationS: 0.0005 });
    return [-0.5, 0, 0.5, 1].map((cycles) => power(iq, { start: 40, size: 512, cycles }));
  };
  it('stands between the subcarriers of the downlink, symmetrical about the carrier (36.211 clause 5.6)', () => {
    const { iq } = receive(lteUplink(UPLINK), { centreHz: 1.75e9, sampleRateHz: 7.68e6, startS: 0, durationS: 0.0005 });
    const used = [-150.5, -149.5, -0.5, 0.5, 149.5, 150.5].map((cycles) => power(iq, { start: 40, size: 512, cycles }) > 1e-5);
    expect(used).toEqual([false, true, true, true, true, false]);
  });
  it('stands on them where the shift is left out', () => {
    expect(tones(false)[1]).toBeGreaterThan(1e-5);
    expect(tones(false)).not.toEqual(tones(true));
  });
  it('has a lower peak-to-average ratio than OFDM: single-carrier QPSK stays below 7 dB at 1 in 1000 (common practice)', () => {
    const { iq } = receive(lteUplink(UPLINK), { centreHz: 1.75e9, sampleRateHz: 30.72e6, startS: 0, durationS: 0.005 });
    const powers = Float64Array.from({ length: iq.length / 2 }, (_, n) => iq[2 * n] ** 2 + iq[2 * n + 1] ** 2).sort();
    expect(10 * Math.log10(powers[Math.floor(0.999 * powers.length)] / meanPower(iq))).toBeLessThan(7);
  });
});
