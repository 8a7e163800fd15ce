import type { ComparisonRow, SettingValue } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import type { DeclaredSettings } from '#engine/analyse';
import type { TddPattern } from '#engine/evidence/tdd-levels';
import type { Comparison } from '../snapshots/types.js';

/** What each side declares of the signal, as the engine takes it: null where a side does not say its spacing. */
export function declaredSettings(comparison: Comparison): Record<Side, DeclaredSettings | null> {
  return { a: settingsOf(comparison.rows, 'a'), b: settingsOf(comparison.rows, 'b') };
}

function settingsOf(rows: readonly ComparisonRow[], side: Side): DeclaredSettings | null {
  const value = (name: string): SettingValue => rows.find((row) => row.parameter === name)?.[side]?.value ?? null;
  const number = (name: string): number | null => (typeof value(name) === 'number' ? (value(name) as number) : null);
  const numerology = number('numerology');
  const implied = number('sampleRate') !== null && number('fftSize') ? number('sampleRate')! / number('fftSize')! : null;
  const spacing = number('subcarrierSpacing') ?? (numerology === null ? null : 15e3 * 2 ** numerology) ?? implied ?? ofTechnology(value('technology'));
  const settings = {
    technology: typeof value('technology') === 'string' ? String(value('technology')) : null,
    subcarrierSpacingHz: spacing,
    cyclicPrefix: typeof value('cyclicPrefix') === 'string' ? String(value('cyclicPrefix')) : null,
    guardIntervalS: number('guardInterval'),
    fftSize: number('fftSize'),
    carrierFrequencyHz: number('carrierFrequency'),
    tddPattern: patternOf(number, spacing),
  };
  return settings.subcarrierSpacingHz === null && settings.tddPattern === null ? null : settings;
}

/** LTE has one spacing (TS 36.211 clause 6.2.3), legacy Wi-Fi data one too (IEEE 802.11 table 17-5). */
function ofTechnology(technology: SettingValue): number | null {
  return technology === 'lte' ? 15e3 : technology === 'wifi' ? 312.5e3 : null;
}

function patternOf(number: (name: string) => number | null, spacing: number | null): TddPattern | null {
  const periodS = number('tddPeriodicity');
  const reference = number('tddReferenceSpacing') ?? spacing;
  if (periodS === null || reference === null || number('tddDownlinkSlots') === null || number('tddUplinkSlots') === null) return null;
  return {
    periodS, referenceSpacingHz: reference,
    downlinkSlots: number('tddDownlinkSlots')!, downlinkSymbols: number('tddDownlinkSymbols') ?? 0,
    uplinkSlots: number('tddUplinkSlots')!, uplinkSymbols: number('tddUplinkSymbols') ?? 0,
  };
}
