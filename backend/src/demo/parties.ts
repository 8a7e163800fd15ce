import type { LinkKey, PartyKey, PersonKey } from './story.js';
import type { LinkInterface, Role } from '#shared/vocabulary';
import { CRANE_HZ, QUAY_HZ, YARD_HZ } from './signals.js';

/** The Skerry Harbour private network: all parties, people, units and builds are invented. */
export const PROGRAMME = { code: 'SKH', name: 'Skerry Harbour private network' };

export const PARTIES: Record<PartyKey, { name: string; shortName: string; parts: readonly string[] }> = {
  harrowmere: { name: 'Harrowmere Integration Lab', shortName: 'Harrowmere', parts: ['test lab'] },
  tarnbeck: { name: 'Tarnbeck Radio', shortName: 'Tarnbeck', parts: ['radio unit'] },
  ostrel: { name: 'Ostrel Networks', shortName: 'Ostrel', parts: ['distributed unit'] },
  vimmery: { name: 'Vimmery Devices', shortName: 'Vimmery', parts: ['terminal'] },
  pellfold: { name: 'Pellfold Wireless', shortName: 'Pellfold', parts: ['access point'] },
};

export const PEOPLE: Record<PersonKey, { party: PartyKey; role: Role }> = {
  'mara-oyelaran': { party: 'harrowmere', role: 'integration-engineer' },
  'edda-quillfeather': { party: 'harrowmere', role: 'programme-manager' },
  'tobin-aschero': { party: 'harrowmere', role: 'programme-administrator' },
  'osk-brandreth': { party: 'harrowmere', role: 'observer' },
  'ines-torvald': { party: 'tarnbeck', role: 'vendor-engineer' },
  'jory-haldane': { party: 'ostrel', role: 'vendor-engineer' },
  'rao-lindqvist': { party: 'vimmery', role: 'vendor-engineer' },
  'petra-wynnlow': { party: 'pellfold', role: 'vendor-engineer' },
};

export type UnitKey = 'tr8' | 'tr3' | 'on40' | 'vport' | 'vtag' | 'pw5near' | 'pw5far';
/** Builds oldest first, with the day on which each was added. */
export const UNITS: Record<UnitKey, { party: PartyKey; name: string; part: string; builds: readonly (readonly [string, number, string])[] }> = {
  tr8: { party: 'tarnbeck', name: 'TR-8', part: 'radio unit', builds: [['4.2.0', -60, 'carried traffic with 22.1.4'], ['4.2.1', -36, 'new carrier tables']] },
  tr3: { party: 'tarnbeck', name: 'TR-3', part: 'radio unit', builds: [['3.6', -80, ''], ['3.7', -40, 'faster start']] },
  on40: { party: 'ostrel', name: 'ON-40', part: 'distributed unit', builds: [['9.0.1', -55, ''], ['9.0.2', -14, 'port templates']] },
  vport: { party: 'vimmery', name: 'V-Port', part: 'terminal', builds: [['22.2.7', -50, ''], ['22.3.0', -10, 'raster corrected'], ['22.3.1', -4, 'reads the site file']] },
  vtag: { party: 'vimmery', name: 'V-Tag', part: 'terminal', builds: [['10.4', -90, ''], ['11.0', -30, '']] },
  pw5near: { party: 'pellfold', name: 'PW-5 near', part: 'access point', builds: [['5.0', -70, ''], ['5.1', -23, 'channel list'], ['5.2', -5, 'follows the announced guard interval']] },
  pw5far: { party: 'pellfold', name: 'PW-5 far', part: 'access point', builds: [['5.0', -70, ''], ['5.1', -19, 'channel list']] },
};

export const LINKS: Record<LinkKey, { name: string; interface: LinkInterface; a: UnitKey; b: UnitKey; centreHz: number | null }> = {
  crane: { name: 'Crane air', interface: 'air', a: 'tr8', b: 'vport', centreHz: CRANE_HZ },
  mast: { name: 'Mast fronthaul', interface: 'fronthaul', a: 'on40', b: 'tr8', centreHz: null },
  yard: { name: 'Yard meters', interface: 'air', a: 'tr3', b: 'vtag', centreHz: YARD_HZ },
  quay: { name: 'Quay backhaul', interface: 'wifi', a: 'pw5near', b: 'pw5far', centreHz: QUAY_HZ },
};
