import { describe, expect, it } from 'vitest';
import { compareTexts, servingCell } from './support.js';

const NR = 'technology: nr\n';
const tdd = (period: number, down: number, downSymbols: number, up: number, upSymbols: number, mu = 1): string =>
  `${NR}numerology: ${mu}\ntdd_periodicity_ms: ${period}\ntdd_downlink_slots: ${down}\ntdd_downlink_symbols: ${downSymbols}\ntdd_uplink_slots: ${up}\ntdd_uplink_symbols: ${upSymbols}\n`;

/** One snapshot each, the row under which the standard forbids it, and where. */
const FORBIDDEN: [string, string, string, string][] = [
  ['extended prefix at 30 kHz', `${NR}numerology: 1\ncyclic_prefix: extended\n`, 'cyclicPrefix', 'TS 38.211, table 4.2-1'],
  ['extended prefix at 15 kHz, TS 38.331', servingCell({ spacing: 'kHz15', blocks: 106, prefix: 'extended', ssb: 630048 }), 'cyclicPrefix', 'TS 38.211, table 4.2-1'],
  ['extended prefix in the uplink at 15 kHz', servingCell({ extra: { uplinkConfigCommon: { initialUplinkBWP: { genericParameters: { subcarrierSpacing: 'kHz15', cyclicPrefix: 'extended' } } } } }), 'uplinkCyclicPrefix', 'TS 38.211, table 4.2-1'],
  ['a Wi-Fi prefix on NR', `${NR}numerology: 1\ncyclic_prefix: short\n`, 'cyclicPrefix', 'TS 38.211, table 4.2-1'],
  ['120 kHz in FR1', `${NR}numerology: 3\ncarrier_frequency_mhz: 3500.01\n`, 'subcarrierSpacing', 'TS 38.104, table 5.3.5-1'],
  ['30 kHz in FR2', `${NR}numerology: 1\ncarrier_frequency_ghz: 27.00012\n`, 'subcarrierSpacing', 'TS 38.104, table 5.3.5-1'],
  ['15 kHz in band n258', `${NR}subcarrier_spacing_khz: 15\nband: n258\n`, 'subcarrierSpacing', 'TS 38.104, table 5.3.5-1'],
  ['240 kHz for data', `${NR}subcarrier_spacing_khz: 240\n`, 'subcarrierSpacing', 'TS 38.104, table 5.3.5-1'],
  ['45 kHz on NR', `${NR}subcarrier_spacing_khz: 45\n`, 'subcarrierSpacing', 'TS 38.211, table 4.2-1'],
  ['60 kHz in band n28', `${NR}subcarrier_spacing_khz: 60\nband: 28\n`, 'subcarrierSpacing', 'TS 38.104, table 5.3.5-1'],
  ['30 kHz on LTE', 'technology: lte\nsubcarrier_spacing_khz: 30\n', 'subcarrierSpacing', 'TS 36.211, clause 6.12'],
  ['too many blocks', `${NR}numerology: 1\nchannel_bandwidth_mhz: 20\nresource_blocks: 52\n`, 'resourceBlocks', 'TS 38.104, table 5.3.2-1'],
  ['too many blocks, 15 kHz', `${NR}numerology: 0\nchannel_bandwidth_mhz: 5\nresource_blocks: 26\n`, 'resourceBlocks', 'TS 38.104, table 5.3.2-1'],
  ['too many blocks in FR2', `${NR}numerology: 3\nchannel_bandwidth_mhz: 100\nresource_blocks: 67\ncarrier_frequency_ghz: 27.00012\n`, 'resourceBlocks', 'TS 38.104, table 5.3.2-2'],
  ['a channel that the spacing lacks', `${NR}numerology: 2\nchannel_bandwidth_mhz: 5\n`, 'channelBandwidth', 'TS 38.104, table 5.3.2-1'],
  ['a channel that NR lacks', `${NR}numerology: 1\nchannel_bandwidth_mhz: 12\n`, 'channelBandwidth', 'TS 38.104, table 5.3.2-1'],
  ['more than 275 blocks', `${NR}numerology: 1\nresource_blocks: 276\n`, 'resourceBlocks', 'TS 38.211, clause 4.4.2'],
  ['LTE of 7 MHz', 'technology: lte\nchannel_bandwidth_mhz: 7\n', 'channelBandwidth', 'TS 36.104, table 5.6-1'],
  ['LTE of 40 blocks', 'technology: lte\nresource_blocks: 40\n', 'resourceBlocks', 'TS 36.104, table 5.6-1'],
  ['LTE of 50 blocks in 5 MHz', 'technology: lte\nchannel_bandwidth_mhz: 5\nresource_blocks: 50\n', 'resourceBlocks', 'TS 36.104, table 5.6-1'],
  ['a number off the 100 kHz raster', `${NR}band: 1\nnr_arfcn: 422005\n`, 'carrierFrequency', 'TS 38.104, table 5.4.2.3-1'],
  ['a number off the raster of n41', `${NR}band: 41\nnr_arfcn: 501391\n`, 'carrierFrequency', 'TS 38.104, table 5.4.2.3-1'],
  ['a number outside its band', `${NR}band: 78\nnr_arfcn: 660000\n`, 'carrierFrequency', 'TS 38.104, table 5.4.2.3-1'],
  ['a frequency outside its band', `${NR}band: 78\ncarrier_frequency_mhz: 2125.1\n`, 'carrierFrequency', 'TS 38.104, table 5.2-1'],
  ['an NR number that does not exist', `${NR}nr_arfcn: 3279166\n`, 'nrArfcn', 'TS 38.104, table 5.4.2.1-1'],
  ['an LTE number outside its band', 'technology: lte\nband: 3\nearfcn: 300\n', 'carrierFrequency', 'TS 36.104, table 5.7.3-1'],
  ['a GSCN outside its band', `${NR}band: 78\ngscn: 8052\n`, 'ssbFrequency', 'TS 38.104, table 5.4.3.3-1'],
  ['a GSCN off the list of its band', `${NR}band: 34\ngscn: 5033\nssb_subcarrier_spacing_khz: 15\n`, 'ssbFrequency', 'TS 38.104, table 5.4.3.3-1'],
  ['a GSCN that does not exist', `${NR}gscn: 1\n`, 'gscn', 'TS 38.104, table 5.4.3.1-1'],
  ['a block outside its band', servingCell({ ssb: 660000 }), 'ssbFrequency', 'TS 38.104, table 5.4.3.3-1'],
  ['a block of 60 kHz', `${NR}ssb_subcarrier_spacing_khz: 60\n`, 'ssbSubcarrierSpacing', 'TS 38.211, clause 7.4.3.1'],
  ['a block of 240 kHz in FR1', servingCell({ ssbSpacing: 'kHz240' }), 'ssbSubcarrierSpacing', 'TS 38.211, clause 7.4.3.1'],
  ['a block of 15 kHz in n78', servingCell({ ssbSpacing: 'kHz15' }), 'ssbSubcarrierSpacing', 'TS 38.104, table 5.4.3.3-1'],
  ['FDD in a TDD band', `${NR}band: 78\nduplex_mode: fdd\n`, 'duplexMode', 'TS 38.104, table 5.2-1'],
  ['more slots than the period has', tdd(5, 8, 0, 3, 0), 'tddDownlinkSlots', 'TS 38.213, clause 11.1'],
  ['more symbols than the period has', tdd(5, 7, 10, 2, 6), 'tddDownlinkSlots', 'TS 38.213, clause 11.1'],
  ['14 symbols in a partial slot', tdd(5, 7, 14, 1, 0), 'tddDownlinkSymbols', 'TS 38.213, clause 11.1'],
  ['a period of 6 ms', tdd(6, 7, 0, 2, 0), 'tddPeriodicity', 'TS 38.213, clause 11.1'],
  ['0.625 ms at 30 kHz', tdd(0.625, 0, 0, 0, 0), 'tddPeriodicity', 'TS 38.213, clause 11.1'],
  ['identity 1008', `${NR}physical_cell_id: 1008\n`, 'physicalCellId', 'TS 38.211, clause 7.4.2.1'],
  ['identity 504 on LTE', 'technology: lte\nphysical_cell_id: 504\n', 'physicalCellId', 'TS 36.211, clause 6.11'],
  ['k_SSB 32', `${NR}k_ssb: 32\n`, 'kSsb', 'TS 38.211, clause 7.4.3.1'],
  ['a timing offset of 20000', `${NR}n_ta_offset: 20000\n`, 'nTaOffset', 'TS 38.133, table 7.1.2-2'],
  ['a block period of 15 ms', `${NR}ssb_periodicity_ms: 15\n`, 'ssbPeriodicity', 'TS 38.331, ServingCellConfigCommon'],
  ['a Wi-Fi guard interval of 1 us', 'technology: wifi\nguard_interval_us: 1\n', 'guardInterval', 'IEEE 802.11, guard interval of the PHY'],
  ['0.4 us at the spacing of HE', 'technology: wifi\nsubcarrier_spacing_khz: 78.125\nguard_interval_us: 0.4\n', 'guardInterval', 'IEEE 802.11, guard interval of the PHY'],
  ['17 bits', 'iq_bit_width: 17\n', 'iqBitWidth', 'ETSI TS 103 859, clause 8.3.3'],
];

/** Legal settings that look odd: none may be flagged. */
const ALLOWED: [string, string][] = [
  ['60 kHz in FR1', `${NR}numerology: 2\ncarrier_frequency_mhz: 3580.02\nband: 78\nresource_blocks: 18\nchannel_bandwidth_mhz: 15\n`],
  ['extended prefix at 60 kHz', servingCell({ spacing: 'kHz60', blocks: 24, prefix: 'extended' })],
  ['extended prefix on LTE', 'technology: lte\ncyclic_prefix: extended\n'],
  ['extended prefix where the spacing is not stated', `${NR}cyclic_prefix: extended\n`],
  ['fewer blocks than the channel holds', `${NR}numerology: 1\nchannel_bandwidth_mhz: 20\nresource_blocks: 24\n`],
  ['15 blocks in 3 MHz', `${NR}numerology: 0\nchannel_bandwidth_mhz: 3\nresource_blocks: 15\n`],
  ['35 and 45 MHz', `${NR}numerology: 1\nchannel_bandwidth_mhz: 45\nresource_blocks: 119\n`],
  ['60 kHz and 200 MHz in FR2', `${NR}numerology: 2\nchannel_bandwidth_mhz: 200\nresource_blocks: 264\nband: 257\n`],
  ['60 kHz and 200 MHz with nothing else', `${NR}numerology: 2\nchannel_bandwidth_mhz: 200\n`],
  ['480 kHz', `${NR}numerology: 5\nchannel_bandwidth_mhz: 400\ncarrier_frequency_ghz: 60.00012\n`],
  ['a block of 240 kHz in FR2', `${NR}ssb_subcarrier_spacing_khz: 240\nnumerology: 3\nband: 258\n`],
  ['a block of 30 kHz beside data of 15 kHz', `${NR}ssb_subcarrier_spacing_khz: 30\nnumerology: 0\nband: 48\n`],
  ['a block of 30 kHz in a band that lists 15 kHz (case B applies)', `${NR}ssb_subcarrier_spacing_khz: 30\nnumerology: 0\nband: 1\ngscn: 5279\n`],
  ['a block off the synchronisation raster', servingCell({ ssb: 630001 })],
  ['k_SSB 24 and 31: no SIB1 on this block', `${NR}k_ssb: 31\n`],
  ['an uplink frequency of an FDD band', `${NR}band: 1\ncarrier_frequency_mhz: 1950\n`],
  ['the extra raster point of n28', `${NR}band: 28\nnr_arfcn: 155608\n`],
  ['an odd number in n78', `${NR}band: 78\nnr_arfcn: 632629\nnumerology: 1\n`],
  ['any frequency where no band is stated', `${NR}carrier_frequency_mhz: 3489.4217\n`],
  ['a band that the tables do not have', `${NR}band: 256\nnr_arfcn: 436111\n`],
  ['several bands', servingCell().replace('78\n', '78, 77\n')],
  ['the last symbol of the period', tdd(5, 7, 6, 2, 8)],
  ['0.625 ms at 120 kHz', tdd(0.625, 3, 6, 1, 4, 3)],
  ['3 and 4 ms', tdd(3, 4, 0, 2, 0)],
  ['a downlink-only period', tdd(10, 20, 0, 0, 0)],
  ['timing offset of FR2', `${NR}n_ta_offset: 13792\n`],
  ['identity 0 and 1007', `${NR}physical_cell_id: 1007\n`],
  ['identity 503 on LTE', 'technology: lte\nphysical_cell_id: 503\n'],
  ['LTE broadcast at 1.25 kHz', 'technology: lte\nsubcarrier_spacing_khz: 1.25\n'],
  ['Wi-Fi at half clock', 'technology: wifi\nsubcarrier_spacing_khz: 156.25\nguard_interval_us: 1.6\n'],
  ['Wi-Fi at quarter clock or HE', 'technology: wifi\nsubcarrier_spacing_khz: 78.125\nguard_interval_us: 3.2\n'],
  ['any other OFDM may be anything', 'technology: ofdm\nsubcarrier_spacing_khz: 45\ncyclic_prefix: extended\nchannel_bandwidth_mhz: 9\nfft_size: 1000\nphysical_cell_id: 5000\nguard_interval_us: 1\n'],
  ['nothing is known of the technology', 'subcarrier_spacing_khz: 45\ncyclic_prefix: extended\nchannel_bandwidth_mhz: 12\n'],
  ['16 bits as 0', 'iq_bit_width: 0\n'],
];

describe('what a standard forbids', () => {
  it.each(FORBIDDEN)('%s', (_name, text, parameter, clause) => {
    const link = /iq_bit/.test(text) ? 'fronthaul' : 'air';
    const [one, other, both] = [compareTexts(text, null, { link }), compareTexts(null, text, { link }), compareTexts(text, text, { link })];
    expect(one.notPermitted.a.map((f) => [f.parameter, f.clause])).toContainEqual([parameter, clause]);
    expect(other.notPermitted.b.map((f) => [f.parameter, f.clause])).toContainEqual([parameter, clause]);
    for (const { rows } of [one, other, both]) {
      const row = rows.find((r) => r.parameter === parameter);
      expect(row).toMatchObject({ verdict: 'not-permitted', clause });
      expect(row?.note).toMatch(/^side [AB]: \S.{10,}/);
    }
    expect(both.rows.find((r) => r.parameter === parameter)?.note).toContain('side B');
  });
});

describe('what a standard allows is not flagged', () => {
  it.each(ALLOWED)('%s', (_name, text) => {
    expect(compareTexts(text, text).notPermitted).toEqual({ a: [], b: [] });
    expect(compareTexts(text, text).rows.filter((r) => r.verdict !== 'agree')).toEqual([]);
  });
});

describe('off standard and different', () => {
  it('a forbidden combination is said first, and that the sides differ as well', () => {
    const comparison = compareTexts(`${NR}numerology: 1\ncyclic_prefix: extended\n`, `${NR}numerology: 1\ncyclic_prefix: normal\n`);
    expect(comparison.rows.find((r) => r.parameter === 'cyclicPrefix')).toMatchObject({ verdict: 'not-permitted', note: expect.stringContaining('the two sides differ') as string });
    expect(comparison.causes).toMatchObject([{ root: 'cyclicPrefix' }]);
  });
  it.each([
    ['a channel that exists at the other spacing only', `${NR}numerology: 0\nchannel_bandwidth_mhz: 100\n`, `${NR}numerology: 1\nchannel_bandwidth_mhz: 100\n`, 'subcarrier-spacing'],
    ['an extended prefix at the wrong spacing', `${NR}numerology: 1\ncyclic_prefix: extended\n`, `${NR}numerology: 2\ncyclic_prefix: extended\n`, 'subcarrier-spacing'],
    ['blocks in the wrong channel', `${NR}numerology: 1\nresource_blocks: 51\nchannel_bandwidth_mhz: 15\n`, `${NR}numerology: 1\nresource_blocks: 51\nchannel_bandwidth_mhz: 20\n`, 'channel-bandwidth'],
    ['a block of the wrong spacing', servingCell({ ssbSpacing: 'kHz15' }), servingCell(), 'ssb-subcarrier-spacing'],
    ['one slot too many', tdd(5, 8, 6, 2, 4), tdd(5, 7, 6, 2, 4), 'tdd-pattern'],
    ['120 kHz in FR1', `${NR}numerology: 3\nband: 78\n`, `${NR}numerology: 1\nband: 78\n`, 'subcarrier-spacing'],
    ['another technology', `technology: lte\nsubcarrier_spacing_khz: 30\nchannel_bandwidth_mhz: 40\n`, `${NR}subcarrier_spacing_khz: 30\nchannel_bandwidth_mhz: 40\n`, 'technology'],
  ])('a combination is off standard because the sides differ in one of its settings: %s', (_name, a, b, code) => {
    const comparison = compareTexts(a, b);
    expect(comparison.causes.map((c) => c.code)).toEqual([code]);
    expect(comparison.rows.filter((r) => r.verdict === 'not-permitted')).toEqual([]);
    expect(comparison.notPermitted.a.every((f) => f.yieldsToDifference)).toBe(true);
    expect(comparison.notPermitted.a.length).toBeGreaterThan(0);
  });
  it('a number off its raster that differs is a difference, with the raster said', () => {
    const row = compareTexts(`${NR}band: 1\nnr_arfcn: 422005\n`, `${NR}band: 1\nnr_arfcn: 422000\n`).rows.find((r) => r.parameter === 'nrArfcn');
    expect(row).toMatchObject({ verdict: 'differ', note: expect.stringContaining('raster') as string });
  });
});
