import { describe, expect, it } from 'vitest';
import { readSnapshot } from '#backend/snapshots/read';
import { bytes, read, servingCell, values } from './support.js';

const found = (text: string, parameter: string, glossary?: string) => read(text, glossary).values.find((v) => v.parameter === parameter);

describe('syntax is decided by content', () => {
  it.each([
    ['json', '{"radio": {"subcarrierSpacing": 30000}}'],
    ['json', '// exported\n[{"radio": {"subcarrierSpacing": 30000}}]'],
    ['yaml', 'radio:\n  subcarrier_spacing_khz: 30\n'],
    ['yaml', '{ radio: { subcarrier_spacing_khz: 30 } }'],
    ['yaml', '---\n# a comment\nradio: { subcarrier-spacing-khz: 30 }\n'],
    ['xml', '<?xml version="1.0"?>\n<radio><subcarrierSpacing>30000</subcarrierSpacing></radio>'],
    ['xml', '<!-- exported -->\n<c><radio subcarrierSpacingKhz="30"/></c>'],
    ['key-value', '[radio]\nsubcarrier_spacing_khz = 30\n'],
    ['key-value', '; exported\nsubcarrierSpacing=30 kHz\n'],
    ['key-value', 'radio.subcarrier_spacing_khz = 30   # numerology 1\n'],
    ['braces', 'radio = {\n  subcarrier_spacing = 30 kHz;\n};\n'],
    ['braces', 'radio {\n  subcarrier_spacing 30 kHz;\n}\n'],
    ['braces', 'cells = (\n  { subcarrier_spacing_khz = 30; },\n);\n'],
    ['braces', 'radio :\n{\n  subcarrier_spacing = "30 kHz"\n}\n'],
    ['braces', 'radio { subcarrierSpacing 30kHz; }'],
  ])('%s: %j', (syntax, text) => {
    const reading = read(text);
    expect(reading.syntax).toBe(syntax);
    expect(values(reading)['subcarrierSpacing']).toBe(30000);
  });
  it('reads UTF-8 with its mark, UTF-16 of both orders, and all line ends', () => {
    const text = 'technology: nr\r\nsubcarrier_spacing_khz: 30\r\n';
    const le = new Uint8Array([0xff, 0xfe, ...new Uint8Array(new Uint16Array([...text].map((c) => c.charCodeAt(0))).buffer)]);
    const be = new Uint8Array([0xfe, 0xff, ...[...text].flatMap((c) => [0, c.charCodeAt(0)])]);
    const marked = new Uint8Array([0xef, 0xbb, 0xbf, ...bytes(text)]);
    for (const file of [le, be, marked, bytes(text), bytes(text.replace(/\r\n/g, '\r'))]) {
      const reading = readSnapshot(file);
      expect(values(reading)).toEqual({ technology: 'nr', subcarrierSpacing: 30000 });
      expect(reading.values[1].line).toBe(2);
    }
  });
});

describe('every value knows where it stood', () => {
  it('JSON', () => {
    expect(found('{\n "cell": {\n  "physicalCellId":\n    7\n }\n}', 'physicalCellId')).toMatchObject({ path: 'cell.physicalCellId', raw: '7', line: 3 });
  });
  it('YAML, in a list', () => {
    expect(found('cells:\n  - name: x\n    physical_cell_id: 7\n', 'physicalCellId')).toMatchObject({ path: 'cells[0].physical_cell_id', raw: '7', line: 3 });
  });
  it('XML with elements of several lines', () => {
    expect(found('<a>\n <b>\n  <sampleRateMsps>30.72</sampleRateMsps>\n </b>\n</a>', 'sampleRate')).toMatchObject({ path: 'a.b.sampleRateMsps', raw: '30.72', line: 3, value: 30720000 });
  });
  it('key = value', () => {
    expect(found('# x\n[rf]\ncarrier_frequency_mhz = 3489.42 ; centre\n', 'carrierFrequency')).toMatchObject({ path: 'rf.carrier_frequency_mhz', raw: '3489.42', line: 3, value: 3489420000 });
  });
  it('braces', () => {
    expect(found('/* two\n lines */\ncell = {\n  pci = 5; # five\n  rf = { carrier_frequency = 3489.42 MHz; };\n};', 'carrierFrequency')).toMatchObject({ path: 'cell.rf.carrier_frequency', raw: '3489.42 MHz', line: 5, value: 3489420000 });
  });
  it('lists what was not understood, with its line', () => {
    const reading = read('[radio]\nmood = sunny\nsubcarrier_spacing_khz = 30\nthis line says nothing\n');
    expect(reading.notUnderstood).toEqual([{ path: 'radio.mood', line: 2, raw: 'sunny' }, { path: '', line: 4, raw: 'this line says nothing' }]);
  });
  it('says so when nothing at all was understood', () => {
    expect(read('mood: sunny\n').problems[0]).toMatchObject({ code: 'nothing-understood' });
  });
});

describe('plain names', () => {
  it.each([
    ['subcarrierSpacing: 30000', 'subcarrierSpacing', 30000], ['subcarrier_spacing_khz: 30', 'subcarrierSpacing', 30000], ['subcarrier-spacing-khz: 30', 'subcarrierSpacing', 30000],
    ['SUBCARRIER_SPACING_KHZ: 30', 'subcarrierSpacing', 30000], ['sampleRateMsps: 30.72', 'sampleRate', 30720000], ['sample_rate_ksps: 7680', 'sampleRate', 7680000],
    ['sample_rate: 30.72 MS/s', 'sampleRate', 30720000], ['carrier_frequency_mhz: 3489.42', 'carrierFrequency', 3489420000], ['carrierFrequencyGhz: 3.48942', 'carrierFrequency', 3489420000],
    ['carrier_frequency: "3 489.42 MHz"', 'carrierFrequency', undefined], ['carrier_frequency: 3489.42 MHz', 'carrierFrequency', 3489420000], ['guard_interval_ns: 400', 'guardInterval', 4e-7],
    ['guardIntervalUs: 0.8', 'guardInterval', 8e-7], ['guard_interval: 0.0000008', 'guardInterval', 8e-7], ['tdd_periodicity_ms: 2.5', 'tddPeriodicity', 0.0025], ['n_ta_offset: 25600', 'nTaOffset', 25600],
    ['n_ta_offset_us: 13.02', 'nTaOffset', 25600], ['phase_compensation: off', 'phaseCompensation', false], ['phaseCompensation: present', 'phaseCompensation', true], ['spectrum_sense: Inverted', 'spectrumSense', 'inverted'],
    ['dmrs_type_a_position: 2', 'dmrsTypeAPosition', 'pos2'], ['band: n78', 'band', 78], ['duplex_mode: TDD', 'duplexMode', 'tdd'], ['technology: 5G-NR', 'technology', 'nr'], ['technology: 802.11ax', 'technology', 'wifi'],
    ['frame_structure: 0xA1', 'frameStructure', 161], ['eaxc_ids: 0, 1, 2', 'eaxcIds', [0, 1, 2]], ['eaxcIds: [3, 1]', 'eaxcIds', [1, 3]], ['compression_method: block-floating-point', 'compressionMethod', 'bfp'],
    ['t1a-max-up: 345000', 't1a-max-up', 345000], ['t2a_min_cp_dl_us: 125', 't2a-min-cp-dl', 125000], ['ta4Max: 331000', 'ta4-max', 331000], ['numerology: 1', 'numerology', 1], ['numerology: mu1', 'numerology', 1],
    ['cyclic_prefix: NORMAL', 'cyclicPrefix', 'normal'], ['guard_interval: long', 'cyclicPrefix', 'normal'], ['fft_size: 2048', 'fftSize', 2048], ['ssb_periodicity_ms: 20', 'ssbPeriodicity', 0.02],
    ['channel_bandwidth_mhz: 1.4', 'channelBandwidth', 1400000], ['iq_bit_width: 0', 'iqBitWidth', 16], ['subcarrier_spacing: 312.5 kHz', 'subcarrierSpacing', 312500],
  ] as [string, string, unknown][])('%s', (text, parameter, value) => expect(values(read(text))[parameter]).toEqual(value));
  it.each([
    ['ssb:\n  subcarrier_spacing_khz: 30\n  arfcn: 632256\n', { ssbSubcarrierSpacing: 30000, ssbArfcn: 632256 }],
    ['tdd:\n  periodicity_ms: 5\n  downlink:\n    slots: 7\n    symbols: 6\n', { tddPeriodicity: 0.005, tddDownlinkSlots: 7, tddDownlinkSymbols: 6 }],
    ['carrier:\n  frequency_mhz: 2125.1\n', { carrierFrequency: 2125100000 }],
    ['carrier_frequency: { value: 2125.1, unit: MHz }\n', { carrierFrequency: 2125100000 }],
    ['uplink:\n  cyclic_prefix: extended\n', { uplinkCyclicPrefix: 'extended' }],
    ['ul_subcarrier_spacing_khz: 15\ndl_subcarrier_spacing_khz: 30\n', { uplinkSubcarrierSpacing: 15000, subcarrierSpacing: 30000 }],
    ['<p><parameter name="subcarrierSpacing" unit="kHz">30</parameter><parameter name="physicalCellId" value="7"/></p>', { subcarrierSpacing: 30000, physicalCellId: 7 }],
  ] as [string, object][])('with the keys above: %j', (text, expected) => expect(values(read(text))).toEqual(expected));
  it('assumes a customary unit where the stated number is impossible, and says so', () => {
    const reading = read('subcarrier_spacing: 30\ncarrier_frequency: 3489.42\nsample_rate: 30.72\ntdd_periodicity: 5\n');
    expect(values(reading)).toEqual({ subcarrierSpacing: 30000, carrierFrequency: 3489420000, sampleRate: 30720000, tddPeriodicity: 0.005 });
    expect(reading.problems.map((p) => p.code)).toEqual(['unit-assumed', 'unit-assumed', 'unit-assumed', 'unit-assumed']);
  });
  it('leaves out a value that it cannot read, and says why', () => {
    const reading = read('cyclic_prefix: sometimes\nfft_size: 1024.5\nsample_rate_mhz: fast\nphysical_cell_id: 5 MHz\n');
    expect(reading.values).toEqual([]);
    expect(reading.problems.filter((p) => p.code === 'value').map((p) => p.line)).toEqual([1, 2, 3, 4]);
  });
});

describe('names that occur more than once', () => {
  it('parents decide: this cell, not its neighbours, its measurements or its random access', () => {
    const reading = read('cell:\n  physical_cell_id: 1\n  neighbour_cells:\n    - physical_cell_id: 2\n  prach:\n    subcarrier_spacing_khz: 1.25\n  subcarrier_spacing_khz: 30\n');
    expect(values(reading)).toEqual({ physicalCellId: 1, subcarrierSpacing: 30000 });
  });
  it('reports a key that stands twice, and takes the last', () => {
    const reading = read('{"a": {"physicalCellId": 1,\n"physicalCellId": 2}}');
    expect(values(reading)['physicalCellId']).toBe(2);
    expect(reading.problems[0]).toMatchObject({ code: 'duplicate-key', line: 2, path: 'a.physicalCellId' });
  });
  it('reports several cells, and takes the first', () => {
    const reading = read('cells:\n  - physical_cell_id: 1\n  - physical_cell_id: 2\n');
    expect(values(reading)['physicalCellId']).toBe(1);
    expect(reading.problems[0]).toMatchObject({ code: 'several-values', line: 3 });
  });
});

describe('the words of TS 38.331', () => {
  it('reads a serving cell', () => {
    const tdd = { referenceSubcarrierSpacing: 'kHz30', pattern1: { 'dl-UL-TransmissionPeriodicity': 'ms2p5', nrofDownlinkSlots: 3, nrofDownlinkSymbols: 6, nrofUplinkSlots: 1, nrofUplinkSymbols: 4 } };
    const reading = read(servingCell({ extra: { 'tdd-UL-DL-ConfigurationCommon': tdd, 'n-TimingAdvanceOffset': 'n25600', 'dmrs-TypeA-Position': 'pos3', 'ssb-periodicityServingCell': 'ms20' } }));
    expect(values(reading)).toMatchObject({
      technology: 'nr', physicalCellId: 233, ssbArfcn: 630048, band: 78, pointAArfcn: 629468, offsetToCarrier: 0, resourceBlocks: 51, subcarrierSpacing: 30000, cyclicPrefix: 'normal',
      ssbSubcarrierSpacing: 30000, tddPeriodicity: 0.0025, tddDownlinkSlots: 3, tddDownlinkSymbols: 6, tddUplinkSlots: 1, tddUplinkSymbols: 4, tddReferenceSpacing: 30000, nTaOffset: 25600,
      dmrsTypeAPosition: 'pos3', ssbPeriodicity: 0.02, duplexMode: 'tdd',
    });
    expect(reading.values.find((v) => v.parameter === 'cyclicPrefix')).toMatchObject({ implied: true, raw: null, vocabulary: 'rrc' });
  });
  it('reads XER: empty elements as words, a present flag as true', () => {
    const reading = read(`<ServingCellConfigCommon><downlinkConfigCommon><initialDownlinkBWP><genericParameters><locationAndBandwidth>275</locationAndBandwidth>
      <subcarrierSpacing><kHz60/></subcarrierSpacing><cyclicPrefix><extended/></cyclicPrefix></genericParameters></initialDownlinkBWP></downlinkConfigCommon>
      <uplinkConfigCommon><frequencyInfoUL><frequencyShift7p5khz><true/></frequencyShift7p5khz></frequencyInfoUL></uplinkConfigCommon>
      <ssb-SubcarrierOffset>5</ssb-SubcarrierOffset></ServingCellConfigCommon>`);
    expect(values(reading)).toMatchObject({ subcarrierSpacing: 60000, cyclicPrefix: 'extended', halfSubcarrierShift: true, kSsb: 5 });
    expect(reading.values.find((v) => v.parameter === 'kSsb')?.lowBitsOnly).toBe(true);
  });
  it('keeps the uplink apart', () => {
    const uplinkConfigCommon = { frequencyInfoUL: { absoluteFrequencyPointA: 346524, 'scs-SpecificCarrierList': [{ offsetToCarrier: 0, subcarrierSpacing: 'kHz15', carrierBandwidth: 25 }] }, initialUplinkBWP: { genericParameters: { subcarrierSpacing: 'kHz15', cyclicPrefix: 'extended' } } };
    expect(values(read(servingCell({ extra: { uplinkConfigCommon } })))).toMatchObject({
      subcarrierSpacing: 30000, resourceBlocks: 51, cyclicPrefix: 'normal', uplinkSubcarrierSpacing: 15000, uplinkResourceBlocks: 25, uplinkCyclicPrefix: 'extended', uplinkPointAArfcn: 346524, halfSubcarrierShift: false,
    });
  });
  it('takes the carrier whose spacing is the bandwidth part\'s', () => {
    const list = [{ offsetToCarrier: 10, subcarrierSpacing: 'kHz15', carrierBandwidth: 106 }, { offsetToCarrier: 5, subcarrierSpacing: 'kHz30', carrierBandwidth: 51 }];
    const downlinkConfigCommon = { frequencyInfoDL: { absoluteFrequencyPointA: 629468, 'scs-SpecificCarrierList': list }, initialDownlinkBWP: { genericParameters: { subcarrierSpacing: 'kHz30' } } };
    expect(values(read(JSON.stringify({ ServingCellConfigCommon: { downlinkConfigCommon } })))).toMatchObject({ subcarrierSpacing: 30000, resourceBlocks: 51, offsetToCarrier: 5 });
  });
  it('prefers the initial bandwidth part to the dedicated ones', () => {
    const dedicated = { 'downlinkBWP-ToAddModList': [{ 'bwp-Id': 1, 'bwp-Common': { genericParameters: { locationAndBandwidth: 1, subcarrierSpacing: 'kHz15', cyclicPrefix: 'normal' } } }] };
    const cell = JSON.parse(servingCell({ spacing: 'kHz60', prefix: 'extended' })) as object;
    expect(values(read(JSON.stringify({ spCellConfigDedicated: dedicated, ...cell })))).toMatchObject({ subcarrierSpacing: 60000, cyclicPrefix: 'extended' });
  });
  it('reads flattened names and places in an enumeration, but guesses at none', () => {
    const reading = read('cell = {\n dl_absoluteFrequencyPointA = 640008;\n dl_carrierBandwidth = 106;\n ul_carrierBandwidth = 51;\n subcarrierSpacing = 1;\n dl_UL_TransmissionPeriodicity = 6;\n ssb_periodicityServingCell = 2;\n dmrs_TypeA_Position = 0;\n};\n');
    expect(values(reading)).toMatchObject({ pointAArfcn: 640008, resourceBlocks: 106, uplinkResourceBlocks: 51, subcarrierSpacing: 30000, tddPeriodicity: 0.005, ssbPeriodicity: 0.02, dmrsTypeAPosition: 'pos2' });
    const open = read('dl-UL-TransmissionPeriodicity: 5\n');
    expect(values(open)).toEqual({});
    expect(open.problems[0].message).toContain('5 ms or the enumeration');
  });
  it('lets the extended period override the one of the first release', () => {
    const pattern1 = { 'dl-UL-TransmissionPeriodicity': 'ms5', 'dl-UL-TransmissionPeriodicity-v1530': 'ms3', nrofDownlinkSlots: 3, nrofDownlinkSymbols: 0, nrofUplinkSlots: 2, nrofUplinkSymbols: 0 };
    expect(values(read(servingCell({ extra: { 'tdd-UL-DL-ConfigurationCommon': { referenceSubcarrierSpacing: 'kHz30', pattern1 } } })))['tddPeriodicity']).toBe(0.003);
  });
});

it('reads the words of TS 36.331; the uplink prefix is an uplink parameter', () => {
  const reading = read('radioResourceConfigCommon:\n  ul-CyclicPrefixLength: len2\ncarrier:\n  dl-Bandwidth: n50\n  ul-Bandwidth: n25\nphysCellId: 12\n');
  expect(values(reading)).toEqual({ technology: 'lte', uplinkCyclicPrefix: 'extended', resourceBlocks: 50, uplinkResourceBlocks: 25, physicalCellId: 12 });
});

describe('fronthaul management', () => {
  const endpoint = (kind: 'tx' | 'rx', id: number, width: number): string => `<low-level-${kind}-endpoints><name>e${id}</name><compression><iq-bitwidth>${width}</iq-bitwidth>
    <compression-method>BLOCK_FLOATING_POINT</compression-method></compression><frame-structure>177</frame-structure><cp-type>NORMAL</cp-type><cp-length>88</cp-length><cp-length-other>72</cp-length-other>
    <number-of-prb-per-scs><scs>KHZ_30</scs><number-of-prb>106</number-of-prb></number-of-prb-per-scs><e-axcid><o-du-port-bitmask>61440</o-du-port-bitmask><eaxc-id>${id}</eaxc-id></e-axcid></low-level-${kind}-endpoints>`;
  it('reads NETCONF XML with prefixes, the receive side as uplink', () => {
    const reading = read(`<nc:data xmlns:nc="urn:ietf:params:xml:ns:netconf:base:1.0"><up:user-plane-configuration xmlns:up="urn:o-ran:uplane-conf:1.0">${endpoint('tx', 0, 9)}${endpoint('tx', 1, 9)}${endpoint('rx', 4, 14)}
      <tx-array-carriers><absolute-frequency-center>641280</absolute-frequency-center><center-of-channel-bandwidth>3619200000</center-of-channel-bandwidth><channel-bandwidth>40000000</channel-bandwidth><rw-type>NR</rw-type><rw-duplex-scheme>TDD</rw-duplex-scheme></tx-array-carriers>
      <rx-array-carriers><absolute-frequency-center>641280</absolute-frequency-center><n-ta-offset>25600</n-ta-offset></rx-array-carriers></up:user-plane-configuration></nc:data>`);
    expect(values(reading)).toMatchObject({
      technology: 'nr', duplexMode: 'tdd', iqBitWidth: 9, compressionMethod: 'bfp', frameStructure: 177, cyclicPrefix: 'normal', cpLength: 88, cpLengthOther: 72, subcarrierSpacing: 30000, resourceBlocks: 106,
      eaxcIds: [0, 1], uplinkEaxcIds: [4], uplinkIqBitWidth: 14, nrArfcn: 641280, carrierFrequency: 3619200000, channelBandwidth: 40000000, nTaOffset: 25600,
    });
    expect(reading.values.every((v) => v.vocabulary === 'm-plane')).toBe(true);
  });
  it('reads the same model as JSON, with module names', () => {
    const reading = read(JSON.stringify({ 'o-ran-uplane-conf:user-plane-configuration': { 'low-level-tx-endpoints': [{ name: 'e', compression: { 'iq-bitwidth': 14, 'compression-method': 'NO_COMPRESSION' }, 'frame-structure': 193, 'e-axcid': { 'eaxc-id': 7 } }] } }));
    expect(values(reading)).toEqual({ iqBitWidth: 14, compressionMethod: 'none', frameStructure: 193, eaxcIds: [7] });
  });
  it('reads the delay model; the row\'s bandwidth and spacing are its keys, not the carrier\'s', () => {
    const reading = read('<delay-management><bandwidth-scs-delay-state><bandwidth>100000</bandwidth><subcarrier-spacing>30000</subcarrier-spacing><ru-delay-profile><t2a-min-up>134000</t2a-min-up><t2a-max-up>438000</t2a-max-up><ta3-max>164000</ta3-max></ru-delay-profile></bandwidth-scs-delay-state></delay-management>');
    expect(values(reading)).toEqual({ 't2a-min-up': 134000, 't2a-max-up': 438000, 'ta3-max': 164000 });
  });
});
