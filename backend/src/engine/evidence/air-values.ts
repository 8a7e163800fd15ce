import type { AirValue } from '#shared/decode';

/** Every name of the air side of the contract, in its order, with the reason where nothing was found. */
const REASONS: Readonly<Record<string, string>> = {
  technology: 'nothing that repeats as an OFDM symbol does',
  subcarrierSpacingHz: 'no OFDM symbols found',
  usefulSymbolS: 'no OFDM symbols found',
  cyclicPrefix: 'the prefix fits none of the standards\' tables',
  cyclicPrefixS: 'no OFDM symbols found',
  carrierOffsetHz: 'no subcarriers to measure it from',
  occupiedBandwidthHz: 'nothing stands out of a flat floor',
  resourceBlocks: 'the carrier\'s edges were not seen',
  snrDb: 'signal and noise cannot be told apart',
  evmPercent: 'no known symbols to measure against',
  physicalCellId: 'no synchronisation signal found',
  ssbSubcarrierSpacingHz: 'no synchronisation block found',
  ssbFrequencyHz: 'no synchronisation block found, or the recording\'s centre is not stated',
  kSsb: 'no broadcast decoded',
  systemFrameNumber: 'no broadcast decoded',
  mib: 'no broadcast decoded',
  spectrumInverted: 'nothing found that tells the two senses apart',
  phaseCompensation: 'no reference signals over enough symbols, or the carrier is not known',
  halfSubcarrierShift: 'not an uplink of known carrier',
  sampleClockOffsetPpm: 'too short, or nothing to time against',
  tddPattern: 'no pause that repeats with a period of the standard',
  dcOffsetDb: 'no constant offset beyond chance',
  iqImbalanceDb: 'no image beyond chance',
};

/** Fills in what nobody found, so that every name stands with a value or a reason. */
export function complete(found: Readonly<Record<string, AirValue>>): Record<string, AirValue> {
  const air: Record<string, AirValue> = {};
  for (const [name, reason] of Object.entries(REASONS)) air[name] = found[name] ?? { value: null, reason };
  return { ...found, ...air };
}
