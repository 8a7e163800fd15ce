import type { SettingValue } from '#shared/decode';
import { parameterFacts } from '#shared/parameters';

const STEPS: readonly (readonly [number, string])[] = [[1e9, 'GHz'], [1e6, 'MHz'], [1e3, 'kHz'], [1, 'Hz']];

/** Hertz in the largest unit that leaves at most six decimals and a number of at least one. */
export function hertz(value: number): string {
  const size = Math.abs(value);
  // Carriers read best in MHz, as channel tables write them.
  const [scale, unit] = STEPS.slice(1).find(([step]) => size >= step) ?? [1, 'Hz'];
  return `${trimmed(value / scale, 6)} ${unit}`;
}

function seconds(value: number): string {
  const size = Math.abs(value);
  if (size >= 1) return `${trimmed(value, 4)} s`;
  if (size >= 1e-3) return `${trimmed(value * 1e3, 4)} ms`;
  return size >= 1e-6 ? `${trimmed(value * 1e6, 4)} µs` : `${trimmed(value * 1e9, 2)} ns`;
}

function trimmed(value: number, decimals: number): string {
  return String(Number(value.toFixed(decimals)));
}

/** A setting's value as the trade writes it, with its unit. */
export function shown(parameter: string, value: SettingValue): string {
  const unit = parameterFacts(parameter)?.unit ?? null;
  if (typeof value === 'boolean') return booleanWord(parameter, value);
  if (typeof value !== 'number') return Array.isArray(value) ? value.join(', ') : typeof value === 'object' ? JSON.stringify(value) : String(value);
  if (unit === 'Hz') return hertz(value);
  if (unit === 'sps') return `${trimmed(value / 1e6, 6)} Msps`;
  if (unit === 's') return seconds(value);
  return unit === null ? trimmed(value, 6) : `${trimmed(value, 6)} ${unit === 'blocks' ? (value === 1 ? 'block' : 'blocks') : unit}`;
}

function booleanWord(parameter: string, value: boolean): string {
  if (parameter.endsWith('haseCompensation')) return value ? 'present' : 'absent';
  return value ? 'on' : 'off';
}

/** The parameter's name inside a sentence. */
export function named(parameter: string): string {
  const label = parameterFacts(parameter)?.label ?? parameter;
  return /^[A-Z][a-z]/.test(label) && !/^(Wi-Fi|Point A|Msg)/.test(label) ? label[0]!.toLowerCase() + label.slice(1) : label;
}
