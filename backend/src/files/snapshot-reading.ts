import type { SnapshotReading } from '#shared/api/files';
import { readSnapshot } from '../snapshots/read.js';
import type { Glossary } from '../snapshots/types.js';

/** What responders ask for in round two, by the parameters that would answer it. Common practice. */
const ASKED_FOR: readonly { what: string; by: readonly string[] }[] = [
  { what: 'the radio technology', by: ['technology', 'nrArfcn', 'earfcn', 'pointAArfcn'] },
  { what: 'the subcarrier spacing', by: ['subcarrierSpacing', 'numerology', 'fftSize', 'frameStructure'] },
  { what: 'the cyclic prefix', by: ['cyclicPrefix', 'guardInterval', 'cpLength'] },
  { what: 'the carrier frequency', by: ['carrierFrequency', 'nrArfcn', 'earfcn', 'pointAArfcn'] },
  { what: 'the channel bandwidth or resource blocks', by: ['channelBandwidth', 'resourceBlocks'] },
  { what: 'the cell identity', by: ['physicalCellId'] },
];
const MOST_LINES = 500;

export function snapshotReading(bytes: Uint8Array, glossary: Glossary | null): SnapshotReading {
  const reading = readSnapshot(bytes, { glossary });
  const said = new Set<string>(reading.values.map(({ parameter }) => parameter));
  const isWifi = reading.values.some(({ parameter, value }) => parameter === 'technology' && (value === 'wifi' || value === 'ofdm'));
  return {
    syntax: reading.syntax,
    vocabularies: [...new Set(reading.values.map(({ vocabulary }) => vocabulary))],
    parameters: reading.values.map(({ parameter, value, path, raw, line }) => ({ parameter, value, path, raw: raw ?? '', line })),
    notUnderstood: reading.notUnderstood.slice(0, MOST_LINES).map(({ path, raw, line }) => ({ path, raw, line })),
    problems: reading.problems.map(({ message }) => message),
    missing: ASKED_FOR.filter(({ what, by }) => !(isWifi && what === 'the cell identity') && !by.some((name) => said.has(name))).map(({ what }) => what),
  };
}
