import type { ParameterName } from '#shared/parameters';
import type { Step } from './names.js';
import type { NamedField } from './rrc.js';

const ENDPOINT = /^(static)?lowlevel[tr]xendpoints?$/;
const CARRIER = /^[tr]xarraycarriers?$/;
const MODEL = /^(userplaneconfiguration|delaymanagement|rudelayprofile|odudelayprofile|bandwidthscsdelaystate)$/;

const at = (parameter: ParameterName, rank = 0, unit?: string): NamedField => ({ parameter, rank, unit });

/** Leaves of an endpoint, in and beside its compression part. */
const ENDPOINT_LEAVES: Readonly<Record<string, NamedField>> = {
  iqbitwidth: at('iqBitWidth'),
  compressionmethod: at('compressionMethod'),
  framestructure: at('frameStructure'),
  cptype: at('cyclicPrefix'),
  cplength: at('cpLength'),
  cplengthother: at('cpLengthOther'),
  offsettoabsolutefrequencycenter: at('centreOffset'),
  eaxcid: at('eaxcIds'),
};

const CARRIER_LEAVES: Readonly<Record<string, NamedField>> = {
  centerofchannelbandwidth: at('carrierFrequency'),
  channelbandwidth: at('channelBandwidth'),
  type: at('technology', 1), rwtype: at('technology'),
  duplexscheme: at('duplexMode', 1), rwduplexscheme: at('duplexMode'),
  ntaoffset: at('nTaOffset'),
};

export const isMplane = (steps: readonly Step[]): boolean =>
  steps.some((s) => MODEL.test(s.compact) || ENDPOINT.test(s.compact) || CARRIER.test(s.compact));

export const isEndpoint = (step: Step): boolean => ENDPOINT.test(step.compact);

/** The leaf of the fronthaul's management models that a key names. `lte` decides whose channel number a centre is. */
export function mplaneField(steps: readonly Step[], lte: boolean): NamedField | null {
  const key = steps.at(-1)?.compact ?? '';
  const parents = steps.slice(0, -1);
  if (parents.some((p) => p.compact === 'numberofprbperscs')) {
    return key === 'scs' ? at('subcarrierSpacing', 1) : key === 'numberofprb' ? at('resourceBlocks', 1) : null;
  }
  if (parents.some(isEndpoint)) return ENDPOINT_LEAVES[key] ?? null;
  if (!parents.some((p) => CARRIER.test(p.compact))) return null;
  if (key === 'absolutefrequencycenter') return at(lte ? 'earfcn' : 'nrArfcn');
  return CARRIER_LEAVES[key] ?? null;
}
