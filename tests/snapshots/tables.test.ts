import { describe, expect, it } from 'vitest';
import { bandwidthOfBlocks, channelBandwidths, maxResourceBlocks } from '#backend/snapshots/standards/bandwidths';
import { cellularPrefixOf, cellularPrefixS, longPrefixS, numerologyOf, spacingOfNumerology } from '#backend/snapshots/standards/numerology';
import { spacingOfFrameStructure, transformOfFrameStructure } from '#backend/snapshots/standards/frameStructure';
import { wifiPrefixOf, wifiPrefixS } from '#backend/snapshots/standards/wifi';
import { scaleDecimal, TC_S, TS_S } from '#backend/snapshots/vocabulary/units';

// TS 38.104 tables 5.3.2-1 and 5.3.2-2, TS 36.104 table 5.6-1.
describe('blocks by channel', () => {
  it.each([
    ['FR1', 15, 5, 25], ['FR1', 15, 20, 106], ['FR1', 15, 50, 270], ['FR1', 30, 5, 11], ['FR1', 30, 20, 51], ['FR1', 30, 100, 273], ['FR1', 60, 10, 11], ['FR1', 60, 100, 135],
    ['FR2', 60, 50, 66], ['FR2', 60, 200, 264], ['FR2', 120, 50, 32], ['FR2', 120, 100, 66], ['FR2', 120, 400, 264], ['lte', 15, 1.4, 6], ['lte', 15, 20, 100],
  ] as const)('%s, %i kHz, %f MHz: %i', (table, kHz, mhz, blocks) => {
    expect(maxResourceBlocks(table, kHz * 1e3, mhz * 1e6)).toBe(blocks);
    expect(bandwidthOfBlocks(table, kHz * 1e3, blocks)).toBe(mhz * 1e6);
  });
  it('has no channel where the table has a dash', () => {
    expect([maxResourceBlocks('FR1', 60e3, 5e6), maxResourceBlocks('FR1', 15e3, 60e6), maxResourceBlocks('FR2', 60e3, 400e6), maxResourceBlocks('lte', 15e3, 7e6)]).toEqual([null, null, null, null]);
  });
  // The guard bands that TS 38.104 table 5.3.3-1 lists follow from the same counts.
  it.each([[30, 100, 845], [30, 20, 805], [15, 10, 312.5], [60, 40, 1610]])('%i kHz, %i MHz leaves %f kHz on each side', (kHz, mhz, guardKhz) => {
    const blocks = maxResourceBlocks('FR1', kHz * 1e3, mhz * 1e6)!;
    expect((mhz * 1e3 - blocks * 12 * kHz) / 2 - kHz / 2).toBe(guardKhz);
  });
  it('lists the channels of each table once', () => {
    expect(channelBandwidths('lte')).toEqual([1.4e6, 3e6, 5e6, 10e6, 15e6, 20e6]);
    expect(channelBandwidths('FR1')).toHaveLength(17);
  });
});

describe('prefixes', () => {
  // TS 38.211 clause 5.3.1, as tabulated in microseconds: ordinary, long.
  it.each([[0, 4.6875, 5.2083], [1, 2.3438, 2.8646], [2, 1.1719, 1.6927], [3, 0.5859, 1.1068], [4, 0.293, 0.8138], [5, 0.1465, 0.6673], [6, 0.0732, 0.5941]])(
    'µ %i: %f and %f us', (mu, other, long) => {
      const spacing = spacingOfNumerology(mu);
      expect(cellularPrefixS('normal', spacing) * 1e6).toBeCloseTo(other, 4);
      expect(longPrefixS(spacing) * 1e6).toBeCloseTo(long, 4);
      expect(numerologyOf(spacing)).toBe(mu);
      // All symbols of a subframe fill 1 ms exactly: 14·2^µ of them, two of them long.
      const symbols = 14 * 2 ** mu;
      expect(symbols / spacing + (symbols - 2) * cellularPrefixS('normal', spacing) + 2 * longPrefixS(spacing)).toBeCloseTo(1e-3, 12);
    });
  it('fills 1 ms with 48 symbols of the extended prefix at 60 kHz', () => {
    expect(48 * (1 / 60e3 + cellularPrefixS('extended', 60e3))).toBeCloseTo(1e-3, 12);
  });
  it('names a rounded duration, and nothing that no table has', () => {
    expect([cellularPrefixOf(4.7e-6, 15e3), cellularPrefixOf(5.2e-6, 15e3), cellularPrefixOf(16.7e-6, 15e3), cellularPrefixOf(2.34e-6, 30e3), cellularPrefixOf(5e-6, 25e3), cellularPrefixOf(4.17e-6, 60e3)])
      .toEqual(['normal', 'normal', 'extended', 'normal', null, 'extended']);
  });
  it('knows the time units', () => {
    expect(TC_S * 1e9).toBeCloseTo(0.5086263, 7);
    expect(TS_S / TC_S).toBeCloseTo(64, 9);
  });
  // IEEE 802.11: 0.4 and 0.8 us for HT and VHT, 0.8, 1.6 and 3.2 us for HE.
  it('names the guard intervals of Wi-Fi', () => {
    expect([wifiPrefixOf(0.4e-6, 312.5e3), wifiPrefixOf(0.8e-6, 312.5e3), wifiPrefixOf(0.8e-6, 78.125e3), wifiPrefixOf(3.2e-6, 78.125e3), wifiPrefixOf(1.6e-6, 156.25e3), wifiPrefixOf(0.4e-6, null)])
      .toEqual(['short', 'normal', 'normal', 'quadruple', 'normal', 'short']);
    expect(wifiPrefixS('short', 312.5e3)).toBe(0.4e-6);
  });
});

// ETSI TS 103 859 clause 7.5: octets seen in published radio-unit configurations.
it.each([[0xb1, 2048, 30e3], [0xc1, 4096, 30e3], [0xb0, 2048, 15e3], [0xa0, 1024, 15e3], [0xc3, 4096, 120e3], [0xa1, 1024, 30e3]])('frame structure %i is %i points at %i Hz', (octet, size, spacing) => {
  expect([transformOfFrameStructure(octet), spacingOfFrameStructure(octet)]).toEqual([size, spacing]);
});

it.each([['3489.42', 6, 3489420000], ['30.72', 6, 30720000], ['5e-06', 0, 5e-6], ['0.1', 6, 100000], ['1_000', 3, 1000000], ['x', 0, Number.NaN]])('scales %s by ten to the %i without rounding twice', (text, exponent, value) => {
  expect(scaleDecimal(text, exponent)).toBe(value);
});
