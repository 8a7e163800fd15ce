import { describe, expect, it } from 'vitest';
import { frequencyRange, gscnToHz, hzToGscn, hzToNrArfcn, hzToNrArfcnFraction, nrArfcnToHz } from '#backend/snapshots/standards/nrRaster';
import { arfcnSpan, nrBand, onChannelRaster, onSsbRaster } from '#backend/snapshots/standards/nrBands';
import { earfcnToHz, lteBand } from '#backend/snapshots/standards/lteBands';
import { wifiChannelHz } from '#backend/snapshots/standards/wifi';

// Worked examples of TS 38.104 table 5.4.2.1-1, equal to what the open nrarfcn package gives (MHz).
const ARFCN: [number, number][] = [
  [422000, 2110], [422410, 2112.05], [501390, 2506.95], [599999, 2999.995], [600000, 3000], [620000, 3300], [627264, 3408.96], [632628, 3489.42],
  [636667, 3550.005], [641280, 3619.2], [646666, 3699.99], [653333, 3799.995], [663360, 3950.4], [680000, 4200], [693334, 4400.01], [2016667, 24250.08],
  [2054166, 26500.02], [2070833, 27500.04], [2229166, 37000.02], [2279165, 39999.96], [3279165, 99999.96],
];
// TS 38.104 table 5.4.3.1-1, with the NR-ARFCN of the same frequency; equal to the nrarfcn package.
const GSCN: [number, number, number][] = [
  [5279, 2112.05, 422410], [2183, 873.65, 174730], [6252, 2500.95, 500190], [5032, 2012.65, 402530], [7498, 2999.05, 599810], [7711, 3305.28, 620352],
  [7884, 3554.4, 636960], [8051, 3794.88, 652992], [8480, 4412.64, 694176], [22257, 24267.36, 2016955], [22388, 26531.04, 2054683], [22446, 27533.28, 2071387],
  [22995, 37020, 2229499], [26639, 99988.32, 3278971],
];
// TS 36.104 clause 5.7.3, worked by hand from table 5.7.3-1.
const EARFCN: [number, number][] = [
  [300, 2140], [1575, 1842.5], [3100, 2655], [6300, 806], [9435, 780.5], [38000, 2595], [39150, 2350], [40620, 2593], [66886, 2155], [68761, 634.5],
  [18300, 1950], [19575, 1747.5], [132322, 1745],
];

describe('NR channel numbers', () => {
  it.each(ARFCN)('%i is %f MHz, and back', (arfcn, mhz) => {
    expect(nrArfcnToHz(arfcn)).toBeCloseTo(mhz * 1e6, 2);
    expect(hzToNrArfcn(mhz * 1e6)).toBe(arfcn);
  });
  it('ends at 3279165 and knows no fractions', () => {
    expect([nrArfcnToHz(3279166), nrArfcnToHz(-1), nrArfcnToHz(1.5), hzToNrArfcn(3489.421e6), hzToNrArfcn(101e9)]).toEqual([null, null, null, null, null]);
    expect(hzToNrArfcnFraction(3000.0075e6)).toBeCloseTo(600000.5, 9);
  });
  // TS 38.104 table 5.1-1.
  it('tells the frequency ranges', () => {
    expect([410e6, 7125e6, 24250e6, 52600e6, 60e9, 10e9, 5e6].map(frequencyRange)).toEqual(['FR1', 'FR1', 'FR2-1', 'FR2-1', 'FR2-2', null, null]);
  });
});

describe('synchronisation channel numbers', () => {
  it.each(GSCN)('%i is %f MHz and NR-ARFCN %i', (gscn, mhz, arfcn) => {
    expect(gscnToHz(gscn)).toBeCloseTo(mhz * 1e6, 2);
    expect(hzToGscn(mhz * 1e6)).toBe(gscn);
    expect(nrArfcnToHz(arfcn)).toBeCloseTo(mhz * 1e6, 2);
  });
  it('gives every number back, and refuses what is off the raster', () => {
    for (const gscn of [2, 3, 4, 5, 100, 101, 102, 7497, 7498, 7499, 7500, 22255, 22256, 22257, 26639]) expect(hzToGscn(gscnToHz(gscn) ?? 0)).toBe(gscn);
    expect([gscnToHz(1), gscnToHz(26640), hzToGscn(3305.295e6), hzToGscn(2112.1e6)]).toEqual([null, null, null, null]);
  });
  // TS 38.508-1 test frequencies, bands n1 and n48: point A, block offset and k_SSB lead to the block's frequency.
  it.each([
    [636688, 2, 8, 30, 7884], [640130, 107, 10, 30, 7933], [422050, 0, 0, 15, 5279], [422064, 0, 2, 15, 5280], [423878, 103, 8, 15, 5350],
  ])('point A %i, %i blocks and k_SSB %i at %i kHz give GSCN %i', (pointA, blocks, kSsb, spacingKhz, gscn) => {
    const hz = (nrArfcnToHz(pointA) ?? 0) + blocks * 180e3 + kSsb * 15e3 + 120 * spacingKhz * 1e3;
    expect(hzToGscn(hz)).toBe(gscn);
  });
});

describe('bands', () => {
  // TS 38.104 tables 5.4.2.3-1, -2: first and last NR-ARFCN, read from the published rows.
  it.each([
    [1, 422000, 434000], [5, 173800, 178800], [28, 151600, 160600], [41, 499200, 538000], [48, 636667, 646666], [77, 620000, 680000], [78, 620000, 653333],
    [79, 693334, 733333], [257, 2054166, 2104165], [258, 2016667, 2070832], [260, 2229166, 2279165], [262, 2399166, 2415832],
  ])('n%i spans %i to %i', (band, first, last) => {
    const span = nrBand(band)?.downlinkHz;
    expect(span && arfcnSpan(span)).toEqual([first, last]);
  });
  it('keeps to the raster of each band', () => {
    const on = (band: number, arfcn: number): boolean => onChannelRaster(nrBand(band)!, arfcn);
    expect([on(1, 422020), on(1, 422010), on(41, 499203), on(41, 499204), on(78, 632628), on(78, 632629), on(78, 653334), on(28, 155608), on(3, 342000)])
      .toEqual([true, false, true, false, true, true, false, true, true]);
  });
  it('keeps to the synchronisation raster of each band', () => {
    const on = (band: number, gscn: number): boolean => nrBand(band)!.ssb.some((r) => onSsbRaster(r, gscn));
    expect([on(78, 7711), on(78, 8051), on(78, 8052), on(34, 5032), on(34, 5033), on(41, 6252), on(41, 6253), on(257, 22388)])
      .toEqual([true, true, false, true, false, true, false, true]);
  });
});

describe('LTE channel numbers', () => {
  it.each(EARFCN)('%i is %f MHz', (earfcn, mhz) => expect(earfcnToHz(earfcn)).toBe(mhz * 1e6));
  it('is null where no band is', () => expect([earfcnToHz(5000), earfcnToHz(1.5), earfcnToHz(200000)]).toEqual([null, null, null]));
  // Uplink ranges of table 5.7.3-1 that are narrower than the downlink's.
  it.each([[66, 132671], [70, 133121], [1, 18599], [71, 133471]])('the uplink of band %i ends at %i', (band, last) => expect(lteBand(band)?.uplink?.[1]).toBe(last));
});

// IEEE 802.11 annex E: channel centres as every regulatory table lists them.
describe('Wi-Fi channels', () => {
  it.each([[1, null, 2412], [13, null, 2472], [14, null, 2484], [36, null, 5180], [60, null, 5300], [42, null, 5210], [165, null, 5825], [1, '6GHz', 5955], [5, '6 GHz', 5975]] as [number, string | null, number][])(
    'channel %i (%s) is %i MHz', (channel, band, mhz) => expect(wifiChannelHz(channel, band)).toBe(mhz * 1e6));
});
