import { describe, expect, it } from 'vitest';
import { compareTexts, servingCell } from './support.js';

/** Two ways to say the same; every pair is legal and equal. Frequencies worked by hand from TS 38.104 clause 5.4.2 and TS 36.104 clause 5.7.3. */
const PAIRS: [string, string, string, ('air' | 'fronthaul')?][] = [
  ['numerology and spacing', 'technology: nr\nnumerology: 1\n', 'technology: nr\nsubcarrier_spacing_khz: 30\n'],
  ['spacing in Hz, kHz and an enumeration', 'subcarrierSpacing: 60000\n', 'subcarrier_spacing: kHz60\n'],
  ['channel number and MHz', 'technology: nr\nnr_arfcn: 632628\n', 'technology: nr\ncarrier_frequency_mhz: 3489.42\n'],
  ['LTE channel number and MHz', 'technology: lte\nearfcn: 1575\n', 'technology: lte\ncarrier_frequency_ghz: 1.8425\n'],
  ['Wi-Fi channel and MHz', 'technology: wifi\nwifi_channel: 60\n', 'technology: wifi\ncarrier_frequency_mhz: 5300\n'],
  ['point A, offset and blocks, and the centre', servingCell(), 'technology: nr\nsubcarrier_spacing_khz: 30\ncarrier_frequency_mhz: 3451.2\nresource_blocks: 51\n'],
  ['point A with an offset', servingCell({ pointA: 629468 - 2 * 12 * 2, offset: 2 }), 'technology: nr\nnumerology: 1\nnr_arfcn: 630080\n'],
  ['point A in plain words', 'technology: nr\npoint_a_arfcn: 629468\noffset_to_carrier: 0\nresource_blocks: 51\nsubcarrier_spacing_khz: 30\n', 'technology: nr\ncarrier_frequency_hz: 3451200000\n'],
  ['point A with the channel bandwidth for the blocks', 'technology: nr\npoint_a_arfcn: 629468\noffset_to_carrier: 0\nchannel_bandwidth_mhz: 20\nsubcarrier_spacing_khz: 30\n', 'technology: nr\ncarrier_frequency_mhz: 3451.2\n'],
  ['an odd number of blocks', servingCell({ pointA: 422050, spacing: 'kHz15', blocks: 25, band: 1, ssb: 422410, ssbSpacing: 'kHz15' }), 'technology: nr\nnr_arfcn: 422500\nnumerology: 0\n'],
  ['blocks and the channel that they fill', 'technology: nr\nnumerology: 1\nresource_blocks: 51\n', 'technology: nr\nnumerology: 1\nchannel_bandwidth_mhz: 20\n'],
  ['fewer blocks than the channel holds', 'technology: nr\nnumerology: 1\nresource_blocks: 48\n', 'technology: nr\nnumerology: 1\nchannel_bandwidth_mhz: 20\n'],
  ['fewer blocks on both sides', 'technology: nr\nnumerology: 1\nresource_blocks: 24\nchannel_bandwidth_mhz: 20\n', 'technology: nr\nnumerology: 1\nresource_blocks: 24\n'],
  ['LTE blocks and bandwidth', 'technology: lte\nresource_blocks: 50\n', 'technology: lte\nchannel_bandwidth_mhz: 10\n'],
  ['LTE blocks by enumeration', 'dl-Bandwidth: n25\n', 'technology: lte\nresource_blocks: 25\n'],
  ['blocks in FR2', 'technology: nr\nnumerology: 3\nresource_blocks: 66\ncarrier_frequency_ghz: 27\n', 'technology: nr\nnumerology: 3\nchannel_bandwidth_mhz: 100\ncarrier_frequency_mhz: 27000\n'],
  ['transform and rate at the same spacing', 'technology: nr\nnumerology: 1\nfft_size: 1024\nsample_rate_msps: 30.72\n', 'technology: nr\nnumerology: 1\nfft_size: 1536\nsample_rate_msps: 46.08\n'],
  ['a spacing stated and a spacing implied', 'subcarrier_spacing_khz: 25\n', 'fft_size: 512\nsample_rate_msps: 12.8\n'],
  ['transform sizes without a rate', 'numerology: 1\nfft_size: 2048\n', 'numerology: 1\nfft_size: 4096\n'],
  ['sample rates without a size', 'numerology: 1\nsample_rate_msps: 61.44\n', 'numerology: 1\nsample_rate_msps: 30.72\n'],
  ['NR prefix and guard interval', 'technology: nr\nnumerology: 1\ncyclic_prefix: normal\n', 'technology: nr\nnumerology: 1\nguard_interval_us: 2.34\n'],
  ['the long prefix of the half subframe', 'technology: lte\ncyclic_prefix: normal\n', 'technology: lte\nguard_interval_us: 5.2\n'],
  ['extended prefix and duration', 'technology: nr\nnumerology: 2\ncyclic_prefix: extended\n', 'technology: nr\nnumerology: 2\nguard_interval_ns: 4167\n'],
  ['Wi-Fi guard interval and word', 'technology: wifi\nguard_interval_ns: 400\n', 'technology: wifi\ncyclic_prefix: short\n'],
  ['Wi-Fi HE guard interval', 'technology: wifi\nsubcarrier_spacing_khz: 78.125\nguard_interval_us: 1.6\n', 'technology: wifi\nsubcarrier_spacing_hz: 78125\ncyclic_prefix: double\n'],
  ['a Wi-Fi guard interval in a file that names no technology', 'technology: wifi\nsubcarrier_spacing_khz: 312.5\ncyclic_prefix: normal\n', 'subcarrier_spacing_khz: 312.5\nguard_interval_ns: 800\n'],
  ['a fraction of the symbol', 'technology: ofdm\nsubcarrier_spacing_khz: 25\nguard_interval: 1/8\n', 'technology: ofdm\nsubcarrier_spacing_khz: 25\nguard_interval_us: 5\n'],
  ['an absent cyclicPrefix and the word normal', servingCell(), 'technology: nr\ncyclic_prefix: normal\nsubcarrier_spacing_khz: 30\n'],
  ['block by channel number, GSCN and MHz', 'technology: nr\nssb_arfcn: 636960\n', 'technology: nr\ngscn: 7884\n'],
  ['block by GSCN and MHz', 'technology: nr\ngscn: 5279\n', 'technology: nr\nssb_frequency_mhz: 2112.05\n'],
  ['k_SSB and its low four bits', 'technology: nr\nk_ssb: 20\n', 'MIB: { ssb-SubcarrierOffset: 4 }\n'],
  ['a pattern counted in two spacings', servingCell({ extra: { 'tdd-UL-DL-ConfigurationCommon': { referenceSubcarrierSpacing: 'kHz15', pattern1: { 'dl-UL-TransmissionPeriodicity': 'ms5', nrofDownlinkSlots: 3, nrofDownlinkSymbols: 4, nrofUplinkSlots: 1, nrofUplinkSymbols: 8 } } } }),
    'technology: nr\nsubcarrier_spacing_khz: 30\ntdd_periodicity_ms: 5\ntdd_downlink_slots: 6\ntdd_downlink_symbols: 8\ntdd_uplink_slots: 3\ntdd_uplink_symbols: 2\n'],
  ['timing offset in T_c and us', 'n_ta_offset: 39936\n', 'n-TimingAdvanceOffset: n39936\n'],
  ['timing offset in us', 'n_ta_offset: 25600\n', 'n_ta_offset_us: 13.02\n'],
  ['DM-RS position', 'dmrs_type_a_position: 2\n', 'dmrs-TypeA-Position: pos2\n'],
  ['period of the block', 'ssb_periodicity_ms: 20\n', 'ssb-periodicityServingCell: ms20\n'],
  ['band', 'band: n78\n', 'frequencyBandList: [77, 78]\n'],
  ['compression by name and number', 'compression_method: bfp\niq_bit_width: 16\n', 'compression_method: 1\niq_bit_width: 0\n', 'fronthaul'],
  ['frame structure in two bases', 'frame_structure: 0xB1\n', 'frame_structure: 177\n', 'fronthaul'],
  ['antenna carriers in any order', 'eaxc_ids: 3, 1, 2\n', 'eaxcIds: [1, 2, 3]\n', 'fronthaul'],
  ['one unit compensates the phase', 'phase_compensation: true\n', 'phase_compensation: false\n', 'fronthaul'],
  ['the signal is compensated', 'phase_compensation: true\n', 'phaseCompensation: present\n'],
  ['the fronthaul\'s spacing and the carrier\'s', 'frame_structure: 193\n', 'technology: nr\nnumerology: 1\n', 'fronthaul'],
  ['windows that fit', 't1a-max-up: 300000\nt1a-min-up: 200000\n', 't2a-max-up: 345000\nt2a-min-up: 125000\n', 'fronthaul'],
  ['an uplink prefix and a downlink prefix', 'technology: lte\ncyclic_prefix: normal\n', 'ul-CyclicPrefixLength: len2\n'],
  ['an uplink carrier and a downlink carrier', servingCell({ extra: { uplinkConfigCommon: { frequencyInfoUL: { absoluteFrequencyPointA: 346524, 'scs-SpecificCarrierList': [{ offsetToCarrier: 0, subcarrierSpacing: 'kHz15', carrierBandwidth: 25 }] } } } }), 'technology: nr\nsubcarrier_spacing_khz: 30\nresource_blocks: 51\n'],
];

describe('equal in other words is equal', () => {
  it.each(PAIRS)('%s', (_name, a, b, link = 'air') => {
    for (const comparison of [compareTexts(a, b, { link }), compareTexts(b, a, { link })]) {
      expect(comparison.rows.filter((r) => r.verdict === 'differ' || r.verdict === 'not-permitted')).toEqual([]);
      expect(comparison.causes).toEqual([]);
      expect(comparison.contradictions).toEqual([]);
      expect(comparison.notPermitted).toEqual({ a: [], b: [] });
      expect(comparison.rows.length).toBeGreaterThan(0);
    }
  });
  // All but the pairs whose point is that nothing is held against each other.
  it.each(PAIRS.filter(([name]) => !/^(windows|an uplink prefix)/.test(name)))('and shown on both sides: %s', (_name, a, b, link = 'air') => {
    expect(compareTexts(a, b, { link }).rows.some((r) => r.verdict === 'agree' && r.a !== null && r.b !== null)).toBe(true);
  });
});
