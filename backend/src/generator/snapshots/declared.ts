/** What a side's configuration states, by the common names, in SI units. Absent: not stated. */
export interface Declared {
  readonly technology?: 'nr' | 'lte' | 'wifi' | 'ofdm';
  readonly subcarrierSpacing?: number;
  readonly cyclicPrefix?: 'normal' | 'extended' | 'short' | 'double' | 'quadruple';
  readonly guardInterval?: number;
  readonly fftSize?: number;
  readonly sampleRate?: number;
  readonly carrierFrequency?: number;
  readonly nrArfcn?: number;
  readonly earfcn?: number;
  readonly pointAArfcn?: number;
  readonly offsetToCarrier?: number;
  readonly resourceBlocks?: number;
  readonly channelBandwidth?: number;
  readonly band?: number;
  readonly duplexMode?: 'fdd' | 'tdd';
  readonly tddPeriodicity?: number;
  readonly tddDownlinkSlots?: number;
  readonly tddDownlinkSymbols?: number;
  readonly tddUplinkSlots?: number;
  readonly tddUplinkSymbols?: number;
  readonly tddSubframeAssignment?: number;
  readonly tddSpecialSubframe?: number;
  readonly physicalCellId?: number;
  readonly ssbSubcarrierSpacing?: number;
  readonly ssbArfcn?: number;
  readonly gscn?: number;
  readonly kSsb?: number;
  readonly ssbPeriodicity?: number;
  readonly phaseCompensation?: boolean;
  readonly spectrumSense?: 'upright' | 'inverted';
  readonly halfSubcarrierShift?: boolean;
  readonly nTaOffset?: number;
  readonly dmrsTypeAPosition?: 'pos2' | 'pos3';
}

export type DeclaredName = keyof Declared;

/** Whether a value is a frequency, a rate, a time or a plain number or word. */
export const QUANTITY: Partial<Record<DeclaredName, 'frequency' | 'rate' | 'time'>> = {
  subcarrierSpacing: 'frequency',
  ssbSubcarrierSpacing: 'frequency',
  carrierFrequency: 'frequency',
  channelBandwidth: 'frequency',
  sampleRate: 'rate',
  guardInterval: 'time',
  tddPeriodicity: 'time',
  ssbPeriodicity: 'time',
};

/** The group in which the plain vocabulary's files put a parameter. */
export function groupOf(name: DeclaredName): 'radio' | 'carrier' | 'cell' | 'frame' {
  if (/^(tdd|nTa)/.test(name)) return 'frame';
  if (/^(carrier|nrArfcn|earfcn|pointA|offsetTo|resourceBlocks|channelBandwidth|band|duplexMode)/.test(name)) return 'carrier';
  if (/^(physical|ssb|gscn|kSsb|dmrs)/.test(name)) return 'cell';
  return 'radio';
}

/** Decimal value in a unit of 10^exponent, without binary dust. */
export function inUnit(value: number, exponent: number): number {
  return Number((value / 10 ** exponent).toPrecision(15));
}
