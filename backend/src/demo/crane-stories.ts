import { crane, craneRadio } from './signals.js';
import { plainConf, plainJson, plainYaml, standardJson, standardYaml, type Story } from './story.js';

const cell = (seed: number, change: Omit<Parameters<typeof craneRadio>[0], 'seed'> = {}) => craneRadio({ ...change, seed });

const sixty = cell(11, { spacingHz: 60_000 });
const thirty = cell(12);
const turning = cell(13, { phaseCompensation: false });
const identity = cell(14, { cellId: 611 });
const shifted = cell(15);
const healthy = cell(16);
const settled = cell(17, { cellId: 92 });
const mirrored = cell(18);

/** The air link between the crane's radio unit and the terminals: Tarnbeck on side A, Vimmery on side B. */
export const craneStories: readonly Story[] = [
  {
    link: 'crane', title: 'Terminal finds the block, reads the MIB, and never gets SIB1', severity: 'critical',
    description: 'The terminal camps for a moment and leaves again. MIB is read each time, with a passing check; nothing after it. The same cell carries traffic with the radio unit\'s own bench terminal.',
    raised: { day: -8.2, by: 'mara-oyelaran' }, builds: ['4.2.1', '22.3.0'], downlink: 'MIB', uplink: null, path: 'cabled', attenuationDb: 40, levelDbm: -52, clock: 'GNSS, both units', transmitter: 'a',
    baseline: '4.2.0 with 22.1.4 carried traffic on 11 November.', ask: { party: 'tarnbeck', what: 'take the issue up and send the running configuration' },
    decode: {
      capture: crane(sixty.spec), captureName: 'harbour-crane-2.sigmf', transmitter: 'a',
      a: { declared: sixty.declared, style: standardYaml, name: 'cell.yaml', reach: 'compare-only' },
      b: { declared: { ...pick(sixty.declared, ['technology', 'subcarrierSpacing', 'carrierFrequency', 'resourceBlocks', 'physicalCellId']), cyclicPrefix: 'extended' }, style: plainConf, name: 'ue.conf', reach: 'compare-only' },
    },
    steps: [
      { day: -7.9, by: 'ines-torvald', stage: 'taken-up', ask: { party: 'harrowmere', what: 'repeat the capture with 40 dB in line' } },
      { day: -7.4, by: 'ines-torvald', say: 'Same cell works with our bench terminal on 4.2.1. Capture taken cabled, 40 dB in line.' },
      { day: -6.9, by: 'rao-lindqvist', say: 'Our file was written for the 60 kHz trial with long prefix. Checking what is really running.' },
      { day: -6.2, by: 'mara-oyelaran', say: 'Rig 2 is free until Friday noon. Retest slot kept.', onlyMyParty: true },
      { day: -5.8, by: 'rao-lindqvist', stage: 'cause-agreed', why: 'the terminal was started with the prefix of the trial', ask: { party: 'vimmery', what: 'confirm the prefix in the running configuration', dueInDays: 2 } },
    ],
  },
  {
    link: 'crane', title: 'No block found at all since the spring configuration', severity: 'critical',
    description: 'Energy is there on the analyser, 15 MHz wide, and the terminal reports no cell. Nothing else was changed that day.',
    raised: { day: -1.3, by: 'mara-oyelaran' }, builds: ['4.2.1', '22.3.0'], downlink: null, uplink: null, path: 'cabled', attenuationDb: 40, levelDbm: -50, clock: 'GNSS, both units', transmitter: 'a',
    ask: { party: 'vimmery', what: 'say which spacing the terminal searches', dueInDays: 3 },
    decode: {
      capture: crane(thirty.spec), captureName: 'harbour-crane-5.sigmf', transmitter: 'a',
      a: { declared: thirty.declared, style: standardJson, name: 'cell-spring.json', reach: 'compare-only' },
      b: { declared: { technology: 'nr', subcarrierSpacing: 15_000, cyclicPrefix: 'normal', carrierFrequency: thirty.declared.carrierFrequency, physicalCellId: 418 }, style: plainYaml, name: 'terminal.yaml', reach: 'compare-only' },
    },
    steps: [{ day: -1.1, by: 'edda-quillfeather', say: 'This one blocks the crane trial of the 9th. Please treat it first.' }],
  },
  {
    link: 'crane', title: 'Constellation turns by a step each symbol', severity: 'major',
    description: 'Every symbol is clean by itself and rotated against the one before. Channel estimates across symbols are useless.',
    raised: { day: -4.6, by: 'mara-oyelaran' }, builds: ['4.2.1', '22.3.0'], downlink: 'SIB1', uplink: null, path: 'cabled', attenuationDb: 40, levelDbm: -51, clock: 'GNSS, both units', transmitter: 'a',
    ask: { party: 'tarnbeck', what: 'say whether the per-symbol phase compensation is switched on in 4.2.1' },
    decode: {
      capture: crane(turning.spec), captureName: 'crane-phase.sigmf', transmitter: 'a',
      a: { declared: { ...turning.declared, phaseCompensation: true }, style: plainYaml, name: 'radio.yaml', reach: 'everyone' },
      b: { declared: pick({ ...turning.declared, phaseCompensation: true }, ['technology', 'subcarrierSpacing', 'carrierFrequency', 'phaseCompensation', 'physicalCellId']), style: plainJson, name: 'terminal.json', reach: 'compare-only' },
    },
    steps: [
      { day: -4.1, by: 'ines-torvald', stage: 'taken-up', ask: { party: 'tarnbeck', what: 'check the up-converter of 4.2.1 against clause 5.4', dueInDays: 3 } },
      { day: -3.2, by: 'ines-torvald', say: 'The compensation table is loaded with the carrier of the bench, not of the crane. Looking for when that changed.\n\n| build | table |\n| --- | --- |\n| 4.2.0 | per carrier |\n| 4.2.1 | fixed |' },
      { day: -3.0, by: 'rao-lindqvist', say: 'For what it is worth: our receiver tolerates the absence, but not a wrong table.', onlyMyParty: true },
    ],
  },
  {
    link: 'crane', title: 'Terminal rejects the cell: identity not in its list', severity: 'major',
    description: 'The neighbour list of the terminal names another identity than the one on the air.',
    raised: { day: -16.3, by: 'mara-oyelaran' }, builds: ['4.2.1', '22.2.7'], downlink: 'synchronisation block', uplink: null, path: 'shielded chamber', attenuationDb: 20, levelDbm: -60, clock: 'GNSS, both units', transmitter: 'a',
    ask: { party: 'vimmery', what: 'compare the planned identity with the list' },
    decode: {
      capture: crane(identity.spec, { impairments: { snrDb: 15 } }), captureName: 'crane-identity.sigmf', transmitter: 'a',
      a: { declared: identity.declared, style: standardJson, name: 'cell.json', reach: 'compare-only' },
      b: { declared: { ...pick(identity.declared, ['technology', 'subcarrierSpacing', 'carrierFrequency', 'resourceBlocks']), physicalCellId: 610 }, style: plainConf, name: 'plan.conf', reach: 'everyone' },
    },
    steps: [
      { day: -15.8, by: 'rao-lindqvist', stage: 'taken-up', ask: { party: 'vimmery', what: 'find where the list came from' } },
      { day: -13.9, by: 'rao-lindqvist', say: 'The list was generated from the plan of the first site survey. It is off by one from row 40 on.' },
      { day: -12.2, by: 'rao-lindqvist', stage: 'cause-agreed', why: 'the terminal\'s plan is off by one', ask: { party: 'vimmery', what: 'offer a build with the corrected plan' } },
      { day: -3.4, by: 'rao-lindqvist', stage: 'change-offered', build: '22.3.1', why: 'the plan is read from the site file', ask: { party: 'harrowmere', what: 'retest with 22.3.1', dueInDays: 1, cause: 'lab' } },
    ],
  },
  {
    link: 'crane', title: 'Cell found one time in five, always 100 kHz off', severity: 'major',
    description: 'The terminal finds the cell only when its own oscillator happens to be far off.',
    raised: { day: -20.5, by: 'mara-oyelaran' }, builds: ['4.2.0', '22.2.7'], downlink: 'synchronisation block', uplink: null, path: 'cabled', attenuationDb: 40, levelDbm: -48, clock: 'terminal free-running', transmitter: 'a',
    ask: { party: 'vimmery', what: 'check the channel number that the terminal tunes to' },
    decode: {
      capture: crane(shifted.spec, { offsetHz: 1_500_000, rateHz: 20e6 }), captureName: 'crane-centre.sigmf', transmitter: 'a',
      a: { declared: shifted.declared, style: plainYaml, name: 'cell.yaml', reach: 'compare-only' },
      b: { declared: { ...pick(shifted.declared, ['technology', 'subcarrierSpacing', 'cyclicPrefix', 'resourceBlocks']), carrierFrequency: 3_489_510_000 }, style: plainJson, name: 'tuning.json', reach: 'compare-only' },
    },
    steps: [
      { day: -19.9, by: 'rao-lindqvist', stage: 'taken-up' },
      { day: -17.1, by: 'rao-lindqvist', stage: 'cause-agreed', why: 'the terminal tunes three raster steps high', ask: { party: 'vimmery', what: 'offer a build' } },
      { day: -9.6, by: 'rao-lindqvist', stage: 'change-offered', build: '22.3.0', ask: { party: 'harrowmere', what: 'retest with 22.3.0', cause: 'lab' } },
      { day: -6.4, by: 'mara-oyelaran', ask: { party: 'harrowmere', what: 'wait for the rig: it is at the crane until Thursday', dueInDays: -1, cause: 'rig-away' } },
      { day: -2.3, by: 'mara-oyelaran', stage: 'under-retest', ask: { party: 'harrowmere', what: 'finish the retest', dueInDays: 2, cause: 'lab' } },
      { day: -2.0, by: 'mara-oyelaran', say: 'Transmitting only into the attenuated set-up; level checked before the analyser was connected.' },
    ],
  },
  {
    link: 'crane', title: 'Same settings, still no random-access response', severity: 'minor',
    description: 'Preambles go out, nothing comes back. Both configurations look the same to us.',
    raised: { day: -5.1, by: 'rao-lindqvist' }, builds: ['4.2.1', '22.3.0'], downlink: 'SIB1', uplink: 'PRACH', path: 'cabled', attenuationDb: 40, levelDbm: -50, clock: 'GNSS, both units', transmitter: 'a',
    ask: { party: 'tarnbeck', what: 'look at the host timing and the late counters of the radio unit', dueInDays: 4 },
    decode: {
      capture: crane(healthy.spec, { impairments: { snrDb: 20, channel: { profile: 'indoor', dopplerHz: 5 } } }), captureName: 'crane-quiet.sigmf', transmitter: 'a',
      a: { declared: healthy.declared, style: standardJson, name: 'cell.json', reach: 'compare-only' },
      b: { declared: healthy.declared, style: plainYaml, name: 'ue.yaml', reach: 'compare-only' },
    },
    steps: [{ day: -4.4, by: 'ines-torvald', stage: 'taken-up' }, { day: -3.9, by: 'ines-torvald', say: 'No mismatch on the air. We will read the late counters of the fronthaul side next.' }],
  },
  {
    link: 'crane', title: 'Wrong identity after the cell was renamed', severity: 'major',
    description: 'The cell announced its old identity after the rename.', raised: { day: -34.4, by: 'mara-oyelaran' }, builds: ['4.2.1', '22.2.7'], downlink: 'traffic', uplink: 'traffic', path: 'cabled', attenuationDb: 40, levelDbm: -50, clock: 'GNSS, both units', transmitter: 'a',
    ask: { party: 'tarnbeck', what: 'apply the new identity' },
    decode: {
      capture: crane(settled.spec), captureName: 'rename-before.sigmf', transmitter: 'a',
      a: { declared: { ...settled.declared, physicalCellId: 93 }, style: standardJson, name: 'cell.json', reach: 'compare-only' },
      b: { declared: { ...pick(settled.declared, ['technology', 'subcarrierSpacing', 'carrierFrequency']), physicalCellId: 93 }, style: plainYaml, name: 'ue.yaml', reach: 'everyone' },
    },
    steps: [
      { day: -33.8, by: 'ines-torvald', stage: 'taken-up' },
      { day: -32.5, by: 'ines-torvald', stage: 'cause-agreed', why: 'the rename was not applied to the running cell', ask: { party: 'tarnbeck', what: 'offer a build' } },
      { day: -27.2, by: 'ines-torvald', stage: 'change-offered', build: '4.2.1', ask: { party: 'harrowmere', what: 'retest', cause: 'lab' } },
      { day: -25.1, by: 'mara-oyelaran', stage: 'under-retest', ask: { party: 'harrowmere', what: 'retest', cause: 'lab' } },
      { day: -25.0, by: 'mara-oyelaran', decode: { capture: crane(cell(19, { cellId: 93 }).spec), captureName: 'rename-after.sigmf', transmitter: 'a', a: { declared: cell(19, { cellId: 93 }).declared, style: standardJson, name: 'cell-after.json', reach: 'compare-only' }, b: { declared: { technology: 'nr', subcarrierSpacing: 30_000, physicalCellId: 93 }, style: plainYaml, name: 'ue.yaml', reach: 'everyone' } } },
      { day: -24.9, by: 'mara-oyelaran', retest: 'clean', note: 'attached five times out of five', builds: ['4.2.1', '22.2.7'], downlink: 'traffic', uplink: 'traffic' },
      { day: -24.8, by: 'mara-oyelaran', stage: 'settled' },
    ],
  },
  {
    link: 'crane', title: 'Spectrum looks mirrored in the crane recordings', severity: 'minor',
    description: 'The block stands on the wrong side of the carrier in every recording of the week.', raised: { day: -2.4, by: 'ines-torvald' }, builds: ['4.2.1', null], downlink: null, uplink: null, path: 'cabled', attenuationDb: 50, levelDbm: -55, clock: 'recorder free-running', transmitter: 'a',
    ask: { party: 'harrowmere', what: 'check the wiring of I and Q at the recorder', dueInDays: 5, cause: 'lab' },
    decode: {
      capture: crane(mirrored.spec, { impairments: { sense: 'exchanged' } }), captureName: 'crane-monday.sigmf', transmitter: 'a',
      a: { declared: pick(mirrored.declared, ['technology', 'subcarrierSpacing', 'cyclicPrefix', 'carrierFrequency', 'resourceBlocks', 'physicalCellId']), style: plainYaml, name: 'cell.yaml', reach: 'compare-only' }, b: null,
    },
    steps: [],
  },
];

function pick<T extends object, K extends keyof T>(from: T, names: readonly K[]): Pick<T, K> {
  return Object.fromEntries(names.filter((name) => name in from).map((name) => [name, from[name]])) as Pick<T, K>;
}
