import { compareSnapshots } from '#backend/snapshots/compare';
import { readGlossary } from '#backend/snapshots/glossary';
import { readSnapshot } from '#backend/snapshots/read';
import { SnapshotError } from '#backend/snapshots/error';
import type { CompareOptions, Comparison, SnapshotReading } from '#backend/snapshots/types';

export const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

export const read = (text: string, glossary?: string): SnapshotReading =>
  readSnapshot(bytes(text), { glossary: glossary === undefined ? null : readGlossary(bytes(glossary)) });

/** Parameter to value. */
export const values = (reading: SnapshotReading): Record<string, unknown> => Object.fromEntries(reading.values.map((v) => [v.parameter, v.value]));

export function compareTexts(a: string | null, b: string | null, options: CompareOptions = { link: 'air' }): Comparison {
  return compareSnapshots(a === null ? null : read(a), b === null ? null : read(b), options);
}

/** The error that reading ends with; fails where there is none, or another kind. */
export function refusal(run: () => unknown): SnapshotError {
  try {
    run();
  } catch (error) {
    if (error instanceof SnapshotError) return error;
    throw error;
  }
  throw new Error('nothing was refused');
}

/** Processor time of a call in seconds: wall time would depend on what else the machine does. */
export function cpuSeconds(run: () => unknown): number {
  const before = process.cpuUsage();
  run();
  const { user, system } = process.cpuUsage(before);
  return (user + system) / 1e6;
}

/** A cell in the words of TS 38.331; fields may be replaced. */
export function servingCell(change: {
  pointA?: number; offset?: number; blocks?: number; spacing?: string; ssb?: number; ssbSpacing?: string; pci?: number; band?: number; prefix?: string; extra?: Record<string, unknown>;
} = {}): string {
  const { pointA = 629468, offset = 0, blocks = 51, spacing = 'kHz30', ssb = 630048, ssbSpacing = 'kHz30', pci = 233, band = 78, prefix, extra } = change;
  return JSON.stringify({
    ServingCellConfigCommon: {
      physCellId: pci,
      downlinkConfigCommon: {
        frequencyInfoDL: {
          absoluteFrequencySSB: ssb, frequencyBandList: [band], absoluteFrequencyPointA: pointA,
          'scs-SpecificCarrierList': [{ offsetToCarrier: offset, subcarrierSpacing: spacing, carrierBandwidth: blocks }],
        },
        initialDownlinkBWP: { genericParameters: { locationAndBandwidth: 275 * (blocks - 1), subcarrierSpacing: spacing, ...(prefix === undefined ? {} : { cyclicPrefix: prefix }) } },
      },
      ssbSubcarrierSpacing: ssbSpacing,
      ...extra,
    },
  }, null, 2);
}
