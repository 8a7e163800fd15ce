import { describe, expect, it } from 'vitest';
import { compareTexts, servingCell } from './support.js';

const NR = 'technology: nr\nsubcarrier_spacing_khz: 30\nchannel_bandwidth_mhz: 20\nresource_blocks: 51\nfft_size: 1024\nsample_rate_msps: 30.72\ncarrier_frequency_mhz: 3489.42\n';
const NR15 = 'technology: nr\nsubcarrier_spacing_khz: 15\nchannel_bandwidth_mhz: 20\nresource_blocks: 106\nfft_size: 2048\nsample_rate_msps: 30.72\ncarrier_frequency_mhz: 3489.42\n';

type Expected = { root: string; code: string; consequences: string[] };
const cause = (root: string, code: string, ...consequences: string[]): Expected => ({ root, code, consequences });

/** Two snapshots and the causes under which all their differences stand. */
const CASES: [string, string, string, Expected[], ('air' | 'fronthaul')?][] = [
  ['a wrong numerology also changes transform and blocks', NR15, NR, [cause('subcarrierSpacing', 'subcarrier-spacing', 'fftSize', 'resourceBlocks')]],
  ['numerology against spacing', 'technology: nr\nnumerology: 0\n', 'technology: nr\nsubcarrier_spacing_khz: 30\n', [cause('subcarrierSpacing', 'subcarrier-spacing')]],
  ['both by numerology', 'numerology: 0\n', 'numerology: 1\n', [cause('subcarrierSpacing', 'subcarrier-spacing', 'numerology')]],
  ['a serving cell of another spacing', servingCell({ spacing: 'kHz15', blocks: 106 }), servingCell(), [cause('subcarrierSpacing', 'subcarrier-spacing', 'carrierFrequency', 'resourceBlocks', 'initialBwpLocation')]],
  ['a wrong spacing and another channel are two', 'technology: nr\nnumerology: 0\nresource_blocks: 52\n', 'technology: nr\nnumerology: 1\nresource_blocks: 51\n', [cause('subcarrierSpacing', 'subcarrier-spacing'), cause('resourceBlocks', 'channel-bandwidth')]],
  ['prefix', 'technology: nr\nnumerology: 2\ncyclic_prefix: extended\n', 'technology: nr\nnumerology: 2\n cyclic_prefix: normal\n'.replace('\n ', '\n'), [cause('cyclicPrefix', 'cyclic-prefix')]],
  ['an absent prefix means normal', servingCell({ spacing: 'kHz60', blocks: 24, prefix: 'extended' }), servingCell({ spacing: 'kHz60', blocks: 24 }), [cause('cyclicPrefix', 'cyclic-prefix')]],
  ['guard intervals', 'technology: wifi\nguard_interval_ns: 400\n', 'technology: wifi\nguardIntervalNs: 800\n', [cause('guardInterval', 'cyclic-prefix')]],
  ['a word against a duration', 'technology: wifi\ncyclic_prefix: normal\n', 'technology: wifi\nguard_interval_ns: 400\n', [cause('cyclicPrefix', 'cyclic-prefix')]],
  ['transform size', 'technology: ofdm\nfft_size: 512\nsample_rate_msps: 12.8\n', 'technology: ofdm\nfft_size: 1024\nsample_rate_msps: 12.8\n', [cause('fftSize', 'fft-size', 'subcarrierSpacing')].map((c) => ({ ...c, consequences: [] }))],
  ['transform size against a stated spacing', 'numerology: 1\nfft_size: 2048\nsample_rate_msps: 30.72\n', 'numerology: 1\nfft_size: 1024\nsample_rate_msps: 30.72\n', [cause('fftSize', 'fft-size')]],
  ['a three-quarter-rate clock', 'numerology: 1\nfft_size: 1024\nsample_rate_msps: 23.04\n', 'numerology: 1\nfft_size: 1024\nsample_rate_msps: 30.72\n', [cause('sampleRate', 'sample-rate')]],
  ['three-quarter rate at another size', 'numerology: 1\nfft_size: 2048\nsample_rate_msps: 46.08\n', 'numerology: 1\nfft_size: 1024\nsample_rate_msps: 30.72\n', [cause('sampleRate', 'sample-rate')]],
  ['carrier', NR, NR.replace('3489.42', '3489.45'), [cause('carrierFrequency', 'carrier-frequency')]],
  ['carrier by channel number', 'nr_arfcn: 632628\n', 'nr_arfcn: 632630\n', [cause('carrierFrequency', 'carrier-frequency', 'nrArfcn')]],
  ['carrier by point A', servingCell({ pointA: 629470 }), servingCell(), [cause('carrierFrequency', 'carrier-frequency', 'pointAArfcn')]],
  ['carrier by its offset', servingCell({ offset: 1 }), servingCell(), [cause('carrierFrequency', 'carrier-frequency', 'offsetToCarrier')]],
  ['point A under the same carrier moves the grid only', servingCell({ pointA: 629468 - 24, offset: 1 }), servingCell(), [cause('pointAArfcn', 'ssb-placement', 'offsetToCarrier')]],
  ['LTE carrier', 'technology: lte\nearfcn: 1575\n', 'technology: lte\nearfcn: 1576\n', [cause('carrierFrequency', 'carrier-frequency', 'earfcn')]],
  ['bandwidth', 'technology: nr\nnumerology: 1\nchannel_bandwidth_mhz: 20\nresource_blocks: 51\n', 'technology: nr\nnumerology: 1\nchannel_bandwidth_mhz: 15\nresource_blocks: 38\n', [cause('channelBandwidth', 'channel-bandwidth', 'resourceBlocks')]],
  ['blocks that do not fit the other channel', 'technology: nr\nnumerology: 1\nchannel_bandwidth_mhz: 15\n', 'technology: nr\nnumerology: 1\nresource_blocks: 50\n', [cause('resourceBlocks', 'channel-bandwidth')]],
  ['blocks that fill another channel', 'technology: nr\nnumerology: 1\nchannel_bandwidth_mhz: 20\n', 'technology: nr\nnumerology: 1\nresource_blocks: 38\n', [cause('channelBandwidth', 'channel-bandwidth')]],
  ['blocks of a serving cell', servingCell({ blocks: 38 }), servingCell(), [cause('resourceBlocks', 'channel-bandwidth', 'carrierFrequency', 'initialBwpLocation')]],
  ['block by channel number and GSCN', 'ssb_arfcn: 636960\n', 'gscn: 7885\n', [cause('ssbFrequency', 'ssb-placement')]],
  ['the block of a serving cell', servingCell({ ssb: 630144 }), servingCell(), [cause('ssbFrequency', 'ssb-placement', 'ssbArfcn')]],
  ['k_SSB', 'technology: nr\nk_ssb: 20\n', 'MIB: { ssb-SubcarrierOffset: 5 }\n', [cause('kSsb', 'ssb-placement')]],
  ['spacing of the block', 'ssb_subcarrier_spacing_khz: 15\n', 'ssb_subcarrier_spacing_khz: 30\n', [cause('ssbSubcarrierSpacing', 'ssb-subcarrier-spacing')]],
  ['identity', servingCell({ pci: 234 }), servingCell(), [cause('physicalCellId', 'physical-cell-id')]],
  ['pattern, said once', 'numerology: 1\ntdd_periodicity_ms: 5\ntdd_downlink_slots: 7\ntdd_uplink_slots: 2\n', 'numerology: 1\ntdd_periodicity_ms: 5\ntdd_downlink_slots: 6\ntdd_uplink_slots: 3\n', [cause('tddDownlinkSlots', 'tdd-pattern', 'tddUplinkSlots')]],
  ['a pattern counted in a wrong numerology\'s slots', 'numerology: 0\ntdd_periodicity_ms: 5\ntdd_downlink_slots: 3\ntdd_uplink_slots: 2\n', 'numerology: 1\ntdd_periodicity_ms: 5\ntdd_downlink_slots: 6\ntdd_uplink_slots: 4\n', [cause('subcarrierSpacing', 'subcarrier-spacing', 'numerology', 'tddDownlinkSlots', 'tddUplinkSlots')]],
  ['sense', 'spectrum_sense: upright\n', 'spectrum_sense: inverted\n', [cause('spectrumSense', 'spectrum-inversion')]],
  ['phase compensation on the air', 'phase_compensation: true\n', 'phase_compensation: false\n', [cause('phaseCompensation', 'phase-compensation')]],
  ['phase compensation by both units', 'phase_compensation: true\n', 'phase_compensation: true\n', [cause('phaseCompensation', 'phase-compensation')], 'fronthaul'],
  ['phase compensation by neither unit', 'phase_compensation: false\n', 'phase_compensation: false\n', [cause('phaseCompensation', 'phase-compensation')], 'fronthaul'],
  ['half-subcarrier shift', 'half_subcarrier_shift: true\n', 'uplinkConfigCommon:\n  frequencyInfoUL:\n    absoluteFrequencyPointA: 346524\n', [cause('halfSubcarrierShift', 'half-subcarrier-shift')]],
  ['shift by both units', 'technology: lte\nhalf_subcarrier_shift: true\n', 'technology: lte\nhalf_subcarrier_shift: true\n', [cause('halfSubcarrierShift', 'half-subcarrier-shift')], 'fronthaul'],
  ['timing offset', 'n_ta_offset: 25600\n', 'n_ta_offset: 39936\n', [cause('nTaOffset', 'timing-offset')]],
  ['DM-RS position', 'dmrs_type_a_position: pos2\n', 'dmrs-TypeA-Position: pos3\n', [cause('dmrsTypeAPosition', 'configuration')]],
  ['technology and what follows', 'technology: lte\nchannel_bandwidth_mhz: 10\nresource_blocks: 50\n', 'technology: nr\nsubcarrier_spacing_khz: 30\nchannel_bandwidth_mhz: 10\nresource_blocks: 24\n', [cause('technology', 'technology', 'subcarrierSpacing', 'resourceBlocks')]],
  ['bit width', 'compression_method: bfp\niq_bit_width: 9\n', 'compression_method: bfp\niq_bit_width: 14\n', [cause('iqBitWidth', 'iq-bit-width')], 'fronthaul'],
  ['compression', 'compression_method: none\niq_bit_width: 16\n', 'compression_method: bfp\niq_bit_width: 9\n', [cause('compressionMethod', 'iq-compression', 'iqBitWidth')], 'fronthaul'],
  ['frame structure', 'numerology: 1\nframe_structure: 0xB1\n', 'numerology: 1\nframe_structure: 0xC1\n', [cause('frameStructure', 'frame-structure')], 'fronthaul'],
  ['prefix length, the same in other units', 'cp_length: 88\n', 'cp_length: 352\n', [cause('cpLength', 'fronthaul-cp-length')], 'fronthaul'],
  ['antenna carriers', 'eaxc_ids: [0, 1]\n', 'eaxc_ids: [0, 2]\n', [cause('eaxcIds', 'eaxc-mapping')], 'fronthaul'],
  ['blocks on the fronthaul', 'numerology: 1\nresource_blocks: 106\n', 'numerology: 1\nresource_blocks: 51\n', [cause('resourceBlocks', 'prb-allocation')], 'fronthaul'],
  ['windows: sent too late', 't1a-min-up: 100000\n', 't2a-min-up: 125000\n', [cause('t1a-min-up', 'timing-window')], 'fronthaul'],
  ['windows: wider than what is received', 't1a-max-up: 500000\nt1a-min-up: 200000\n', 't2a-max-up: 345000\nt2a-min-up: 125000\n', [cause('t1a-max-up', 'timing-window')], 'fronthaul'],
  ['windows: received too late', 'ta4-max: 100000\n', 'ta3-max: 160000\n', [cause('ta4-max', 'timing-window')], 'fronthaul'],
  ['an uplink spacing', servingCell({ extra: { uplinkConfigCommon: { initialUplinkBWP: { genericParameters: { subcarrierSpacing: 'kHz15' } } } } }), servingCell({ extra: { uplinkConfigCommon: { initialUplinkBWP: { genericParameters: { subcarrierSpacing: 'kHz30' } } } } }), [cause('uplinkSubcarrierSpacing', 'subcarrier-spacing')]],
];

describe('differences stand under their cause', () => {
  it.each(CASES)('%s', (_name, a, b, expected, link = 'air') => {
    for (const comparison of [compareTexts(a, b, { link }), compareTexts(b, a, { link })]) {
      expect(comparison.causes.map(({ root, code }) => ({ root, code }))).toEqual(expected.map(({ root, code }) => ({ root, code })));
      const said = new Set(comparison.causes.flatMap((c) => [c.root, ...c.consequences]));
      // Every row at odds is a cause or a consequence, and nothing else is.
      expect(new Set(comparison.rows.filter((r) => r.verdict === 'differ').map((r) => r.parameter))).toEqual(said);
      for (const { root, consequences } of expected.filter((e) => e.consequences.length > 0)) expect([...comparison.causes.find((c) => c.root === root)!.consequences].sort()).toEqual([...consequences].sort());
    }
  });
  it('names the unit, not the prefix, where the numbers differ by two or four', () => {
    expect(compareTexts('cp_length: 88\n', 'cp_length: 176\n', { link: 'fronthaul' }).rows[0].note).toContain('differ by exactly 2');
    expect(compareTexts('cp_length: 88\n', 'cp_length: 72\n', { link: 'fronthaul' }).rows[0].note).toBeNull();
  });
});

describe('what one snapshot states twice and differently', () => {
  it.each([
    ['numerology and spacing', 'numerology: 1\nsubcarrier_spacing_khz: 15\n', 'subcarrier-spacing'],
    ['rate, size and spacing', 'numerology: 1\nfft_size: 1024\nsample_rate_msps: 23.04\n', 'sample-rate'],
    ['size, rate and spacing', 'numerology: 1\nfft_size: 2048\nsample_rate_msps: 30.72\n', 'fft-size'],
    ['channel number and frequency', 'nr_arfcn: 641280\ncarrier_frequency_mhz: 3700.02\n', 'carrier-frequency'],
    ['block and GSCN', 'gscn: 7884\nssb_arfcn: 636000\n', 'ssb-placement'],
    ['prefix and guard interval', 'technology: nr\nnumerology: 1\ncyclic_prefix: normal\nguard_interval_us: 4.69\n', 'cyclic-prefix'],
    ['too small a transform', 'fft_size: 512\nresource_blocks: 51\n', 'fft-size'],
    // TS 38.508-1, n48: point A 636688, block at 636960 with 30 kHz has k_SSB 8, not 9.
    ['a block off its k_SSB', 'technology: nr\npoint_a_arfcn: 636688\noffset_to_carrier: 0\nresource_blocks: 52\nsubcarrier_spacing_khz: 15\nssb_arfcn: 636960\nssb_subcarrier_spacing_khz: 30\nk_ssb: 9\n', 'ssb-placement'],
  ])('%s', (_name, text, code) => {
    expect(compareTexts(text, null).contradictions).toMatchObject([{ side: 'a', code }]);
    expect(compareTexts(null, text).contradictions).toMatchObject([{ side: 'b', code }]);
  });
  it('leaves the right k_SSB alone, whole or by its low bits', () => {
    const cell = 'technology: nr\npoint_a_arfcn: 636688\noffset_to_carrier: 0\nresource_blocks: 52\nsubcarrier_spacing_khz: 15\nssb_arfcn: 636960\nssb_subcarrier_spacing_khz: 30\n';
    expect(compareTexts(`${cell}k_ssb: 8\n`, `${cell}k_ssb: 20\n`).contradictions).toEqual([]);
    expect(compareTexts(`${cell}ssb-SubcarrierOffset: 4\n`, null).contradictions).toEqual([]);
  });
});

describe('the column of what is measured', () => {
  const air = {
    subcarrierSpacingHz: { value: 30000 }, carrierOffsetHz: { value: 1000, method: 'synchronisation block' }, kSsb: { value: 20 }, spectrumInverted: { value: true }, phaseCompensation: { value: 'present' },
    ssbFrequencyHz: { value: 3554400310 }, tddPattern: { value: { periodS: 0.005, downlinkSlots: 7, downlinkSymbols: 6, uplinkSlots: 2, uplinkSymbols: 4 } }, mib: { value: { dmrsTypeAPosition: 'pos2', dlBandwidth: 'n50' } },
  };
  const text = 'numerology: 1\ncarrier_frequency_mhz: 3489.42\nssb-SubcarrierOffset: 4\nspectrum_sense: upright\nphase_compensation: true\ngscn: 7884\ntdd_downlink_slots: 7\ndmrs_type_a_position: pos3\nresource_blocks: 50\n';
  it('has the common units', () => {
    const rows = Object.fromEntries(compareTexts(text, text, { link: 'air', air, centreFrequencyHz: 3489.42e6 }).rows.map((r) => [r.parameter, r]));
    expect(Object.fromEntries(Object.entries(rows).map(([n, r]) => [n, r.air]))).toMatchObject({
      subcarrierSpacing: 30000, numerology: 1, carrierFrequency: 3489421000, kSsb: 20, spectrumSense: 'inverted', phaseCompensation: true, gscn: 7884, ssbFrequency: 3554400310, tddDownlinkSlots: 7,
    });
    expect([rows['dmrsTypeAPosition'].announced, rows['resourceBlocks'].announced]).toEqual(['pos2', 50]);
    // The low four bits of 20 are what the file states.
    expect(rows['kSsb'].a?.value).toBe(20);
  });
  it('claims no carrier from an offset known modulo the spacing, and nothing for the other direction', () => {
    const fractional = { ...air, carrierOffsetHz: { value: 1000, method: 'fractional: prefix phase' } };
    expect(compareTexts(text, null, { link: 'air', air: fractional, centreFrequencyHz: 3489.42e6 }).rows.find((r) => r.parameter === 'carrierFrequency')?.air).toBeNull();
    expect(compareTexts('uplink: { numerology: 0 }\n', null, { link: 'air', air }).rows[0].air).toBeNull();
    expect(compareTexts('uplink: { numerology: 0 }\n', null, { link: 'air', air, direction: 'uplink' }).rows[0].air).toBe(30000);
  });
});
