import { quay, quayRadio, yard, yardRadio } from './signals.js';
import { plainConf, plainJson, plainYaml, standardYaml, type Story } from './story.js';

const yardCell = yardRadio({ seed: 31 });
const yardWide = yardRadio({ seed: 32, resourceBlocks: 25 });
const short = quayRadio({ seed: 41 });
const long = quayRadio({ seed: 42, guardUs: 0.8 });
const split = { declared: {}, style: plainJson } as const;

const FRONTHAUL_A = `{\n  "compression": { "iqBitWidth": 9, "compressionMethod": "bfp" },\n  "carrier": { "frameStructure": 161, "cpLength": 88, "resourceBlocks": 38 },\n  "ports": { "eaxcIds": [0, 1, 2, 3] }\n}\n`;
const FRONTHAUL_B = `[compression]\niq_bit_width = 14\ncompression_method = bfp\n\n[carrier]\nframe_structure = 161\ncp_length = 88\nresource_blocks = 38\n\n[ports]\neaxc_ids = 0, 1, 2, 3\n`;
const WINDOWS_A = '[windows]\nt1a-max-up = 345000\nt1a-min-up = 250000\n\n[ports]\neaxc_ids = 0, 1, 2, 3\n';
const WINDOWS_B = '{ "ports": { "eaxcIds": [16, 17, 18, 19] }, "windows": { "t2a-max-up": 320000, "t2a-min-up": 60000 } }\n';

/** Fronthaul (Ostrel, Tarnbeck), the yard's LTE (Tarnbeck, Vimmery) and the quay's Wi-Fi backhaul (Pellfold). */
export const otherStories: readonly Story[] = [
  {
    link: 'mast', title: 'Uplink is noise on all four ports', severity: 'critical', description: 'U-plane packets arrive and decompress into noise. C-plane is accepted.',
    raised: { day: -6.7, by: 'mara-oyelaran' }, builds: ['9.0.2', '4.2.1'], downlink: 'downlink U-plane', uplink: 'C-plane accepted', clock: 'PTP, boundary clock',
    ask: { party: 'ostrel', what: 'say which mantissa width the distributed unit expects' },
    decode: { capture: null, a: { ...split, name: 'du.json', text: FRONTHAUL_A, reach: 'compare-only' }, b: { ...split, name: 'ru.conf', text: FRONTHAUL_B, reach: 'compare-only' } },
    steps: [
      { day: -6.1, by: 'jory-haldane', stage: 'taken-up' },
      { day: -5.5, by: 'jory-haldane', say: 'We run 9 bit on every port, by our template. A packet capture would show what the radio unit really sends.' },
      { day: -4.9, by: 'ines-torvald', stage: 'cause-agreed', why: 'nine bits against fourteen', ask: { party: 'ostrel', what: 'offer a template with the width of the radio unit', dueInDays: -2 } },
    ],
  },
  {
    link: 'mast', title: 'Port identifiers differ by sixteen', severity: 'minor', description: 'The two units name the antenna carriers differently; a mapping file bridges it.',
    raised: { day: -41.2, by: 'jory-haldane' }, builds: ['9.0.1', '4.2.0'], downlink: 'C-plane accepted', uplink: null, clock: 'PTP, boundary clock',
    ask: { party: 'tarnbeck', what: 'agree on one numbering' },
    decode: { capture: null, a: { ...split, name: 'du-windows.conf', text: WINDOWS_A, reach: 'everyone' }, b: { ...split, name: 'ru.json', text: WINDOWS_B, reach: 'compare-only' } },
    steps: [
      { day: -40.0, by: 'ines-torvald', stage: 'taken-up' },
      { day: -38.3, by: 'ines-torvald', stage: 'cause-agreed', why: 'both numberings are allowed; one of us must map', ask: { party: 'ostrel', what: 'decide who maps' } },
      { day: -36.0, by: 'jory-haldane', waive: 'the mapping file is good enough until the common numbering of the spring', endsInDays: 90, signedBy: ['jory-haldane', 'ines-torvald'] },
    ],
  },
  {
    link: 'mast', title: 'No carrier after the mast was rewired', severity: 'major', description: 'Nothing on the fronthaul since Monday.',
    raised: { day: -12.4, by: 'jory-haldane' }, builds: ['9.0.2', '4.2.1'], downlink: null, uplink: null, ask: { party: 'harrowmere', what: 'look at the patch panel', cause: 'lab' },
    steps: [{ day: -11.9, by: 'mara-oyelaran', say: 'Fibre pair crossed at the panel. Nothing to do with either unit.' }, { day: -11.8, by: 'mara-oyelaran', stage: 'withdrawn', why: 'a crossed fibre at the lab\'s panel' }],
  },
  {
    link: 'yard', title: 'Meters lose the cell after each restart', severity: 'major', description: 'After a restart the meters search for an hour. Once they are on, they stay.',
    raised: { day: -9.3, by: 'mara-oyelaran' }, builds: ['3.7', '11.0'], downlink: 'synchronisation block', uplink: null, path: 'radiated', attenuationDb: 0, levelDbm: -78, clock: 'GNSS at the radio unit', transmitter: 'a', baseline: '3.6 with 10.4, on 2 October.',
    ask: { party: 'vimmery', what: 'say which prefix the meters search first' },
    decode: {
      capture: yard(yardCell.spec, { impairments: { snrDb: 12 } }), captureName: 'yard-morning.sigmf', transmitter: 'a',
      a: { declared: yardCell.declared, style: plainJson, name: 'enb.json', reach: 'compare-only' },
      b: { declared: { ...yardCell.declared, cyclicPrefix: 'extended', fftSize: undefined, sampleRate: undefined }, style: plainYaml, name: 'meter.yaml', reach: 'compare-only' },
    },
    steps: [{ day: -8.8, by: 'rao-lindqvist', stage: 'taken-up', ask: { party: 'vimmery', what: 'read the prefix out of a meter in the yard', dueInDays: 0 } }, { day: -8.0, by: 'rao-lindqvist', say: 'Two meters answered: both start with the extended prefix. Licensed test band, power as on the licence.' }],
  },
  {
    link: 'yard', title: 'Half of the resource blocks are never used', severity: 'minor', description: 'Throughput is half of what the plan says.',
    raised: { day: -3.6, by: 'rao-lindqvist' }, builds: ['3.7', '11.0'], downlink: 'traffic', uplink: 'traffic', path: 'cabled', attenuationDb: 60, levelDbm: -60, clock: 'GNSS at the radio unit', transmitter: 'a',
    ask: { party: 'tarnbeck', what: 'compare the planned bandwidth with the running one', dueInDays: 6 },
    decode: {
      capture: yard(yardWide.spec), captureName: 'yard-lab.sigmf', transmitter: 'a',
      a: { declared: { technology: 'lte', cyclicPrefix: 'normal', earfcn: 9435, resourceBlocks: 25, physicalCellId: 274 }, style: standardYaml, name: 'enb.yaml', reach: 'everyone' },
      b: { declared: { technology: 'lte', carrierFrequency: 780_500_000, resourceBlocks: 50, physicalCellId: 274 }, style: plainConf, name: 'plan.conf', reach: 'compare-only' },
    },
    steps: [],
  },
  {
    link: 'quay', title: 'Backhaul falls to 6 Mb/s when the short guard interval is on', severity: 'major', description: 'With the short guard interval the far end acknowledges nothing above the lowest rate.',
    raised: { day: -10.8, by: 'mara-oyelaran' }, builds: ['5.1', '5.0'], downlink: 'traffic', uplink: 'traffic', path: 'cabled', attenuationDb: 50, levelDbm: -45, clock: 'free-running', transmitter: 'a',
    ask: { party: 'pellfold', what: 'say what the far end expects' },
    decode: {
      capture: quay(short.spec), captureName: 'quay-short.sigmf', transmitter: 'a',
      a: { declared: short.declared, style: plainYaml, name: 'near.yaml', reach: 'everyone' }, b: { declared: { ...short.declared, guardInterval: 0.8e-6 }, style: plainJson, name: 'far.json', reach: 'everyone' },
    },
    steps: [
      { day: -10.2, by: 'petra-wynnlow', stage: 'taken-up' },
      { day: -9.1, by: 'petra-wynnlow', stage: 'cause-agreed', why: 'the far end ignores the announced guard interval' },
      { day: -4.2, by: 'petra-wynnlow', stage: 'change-offered', build: '5.2', ask: { party: 'harrowmere', what: 'retest with 5.2 at the far end', dueInDays: -1, cause: 'lab' } },
    ],
  },
  {
    link: 'quay', title: 'Far end does not associate on channel 60', severity: 'minor', description: 'Association times out on this channel alone.',
    raised: { day: -28.9, by: 'petra-wynnlow' }, builds: ['5.0', '5.0'], downlink: 'traffic', uplink: 'traffic', path: 'cabled', attenuationDb: 50, levelDbm: -45, clock: 'free-running', transmitter: 'a',
    ask: { party: 'pellfold', what: 'look at the channel list of the far end' },
    decode: { capture: quay(long.spec), captureName: 'quay-60.sigmf', transmitter: 'a', a: { declared: long.declared, style: plainYaml, name: 'near.yaml', reach: 'everyone' }, b: { declared: { ...long.declared, carrierFrequency: 5_320_000_000 }, style: plainJson, name: 'far.json', reach: 'everyone' } },
    steps: [
      { day: -28.0, by: 'petra-wynnlow', stage: 'taken-up' },
      { day: -27.5, by: 'petra-wynnlow', stage: 'cause-agreed', why: 'the far end\'s list has channel 64 in the place of 60' },
      { day: -22.0, by: 'petra-wynnlow', stage: 'change-offered', build: '5.1', ask: { party: 'harrowmere', what: 'retest', cause: 'lab' } },
      { day: -20.2, by: 'mara-oyelaran', stage: 'under-retest', ask: { party: 'harrowmere', what: 'retest', cause: 'lab' } },
      { day: -20.1, by: 'mara-oyelaran', retest: 'failed', note: 'associates, then drops after a minute', builds: ['5.1', '5.0'], downlink: 'association', uplink: 'association' },
      { day: -20.0, by: 'mara-oyelaran', stage: 'change-offered', ask: { party: 'pellfold', what: 'bring the far end to the same build' } },
      { day: -18.2, by: 'petra-wynnlow', say: 'Far end is on 5.1 as well now.' },
      { day: -17.5, by: 'mara-oyelaran', stage: 'under-retest', ask: { party: 'harrowmere', what: 'retest', cause: 'lab' } },
      { day: -17.4, by: 'mara-oyelaran', decode: { capture: quay(quayRadio({ seed: 43, guardUs: 0.8 }).spec), captureName: 'quay-60-after.sigmf', transmitter: 'a', a: { declared: long.declared, style: plainYaml, name: 'near.yaml', reach: 'everyone' }, b: { declared: long.declared, style: plainJson, name: 'far-after.json', reach: 'everyone' } } },
      { day: -17.3, by: 'mara-oyelaran', retest: 'clean', note: 'stayed up overnight', builds: ['5.1', '5.1'], downlink: 'traffic', uplink: 'traffic' },
      { day: -17.2, by: 'mara-oyelaran', stage: 'settled' },
    ],
  },
];
