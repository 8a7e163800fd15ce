/** Words of the enumerated parameters: the common word, and what else is seen for it (compared without case and separators). */
export const TOKENS: Readonly<Record<string, Readonly<Record<string, readonly string[]>>>> = {
  technology: {
    nr: ['nr', '5g', '5gnr', 'newradio', 'nr5g', 'ngran'],
    lte: ['lte', '4g', 'eutra', 'eutran', 'lteadvanced', 'ltea'],
    wifi: ['wifi', 'wlan', '80211', 'ieee80211', '80211a', '80211g', '80211n', '80211ac', '80211ax', '80211be', 'ieee80211n', 'ieee80211ac', 'ieee80211ax', 'ieee80211be'],
    ofdm: ['ofdm', 'otherofdm', 'privateofdm', 'proprietary', 'private', 'own', 'custom'],
  },
  cyclicPrefix: {
    normal: ['normal', 'ncp', 'normalcp', 'cpnormal'],
    extended: ['extended', 'ecp', 'ext', 'extendedcp', 'cpextended'],
    short: ['short', 'sgi'], double: ['double'], quadruple: ['quadruple'],
  },
  duplexMode: { fdd: ['fdd', 'paired'], tdd: ['tdd', 'unpaired'] },
  subCarrierSpacingCommon: { scs15or60: ['scs15or60'], scs30or120: ['scs30or120'] },
  spectrumSense: {
    upright: ['upright', 'noninverted', 'notinverted', 'normal', 'straight', 'positive'],
    inverted: ['inverted', 'inverse', 'mirrored', 'conjugated', 'reversed', 'negative'],
  },
  dmrsTypeAPosition: { pos2: ['pos2', '2', '0'], pos3: ['pos3', '3', '1'] },
  compressionMethod: {
    none: ['none', 'nocompression', 'uncompressed', 'fixedpoint', '0'],
    bfp: ['bfp', 'blockfloatingpoint', 'bfpselectiveresending', 'blockfloatingpointselectiveresending', '1', '5'],
    'block-scaling': ['blockscaling', '2'],
    'mu-law': ['mulaw', 'ulaw', '3'],
    modulation: ['modulation', 'modulationcompression', 'modulationcompressionselectiveresending', '4', '6'],
  },
};

/** LTE's two uplink prefixes, TS 36.331. */
const PREFIX_LENGTHS: Readonly<Record<string, string>> = { len1: 'normal', len2: 'extended' };

const bare = (text: string): string => text.toLowerCase().replace(/[µμ]/g, 'u').replace(/[^a-z0-9]/g, '');

/** The common word for a text, or null. */
export function tokenFor(parameter: string, text: string): string | null {
  const wanted = bare(text);
  if (parameter === 'cyclicPrefix' && wanted in PREFIX_LENGTHS) return PREFIX_LENGTHS[wanted];
  for (const [word, seen] of Object.entries(TOKENS[parameter] ?? {})) if (seen.includes(wanted)) return word;
  return null;
}

const TRUE = ['true', 'yes', 'on', '1', 'enabled', 'enable', 'present', 'applied', 'active'];
const FALSE = ['false', 'no', 'off', '0', 'disabled', 'disable', 'absent', 'none', 'notapplied', 'inactive'];

export function boolean(text: string): boolean | null {
  const wanted = bare(text);
  return TRUE.includes(wanted) ? true : FALSE.includes(wanted) ? false : null;
}
