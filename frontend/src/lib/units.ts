/** Numbers for people: a unit always, a true minus, thin groups, no more digits than the value has. */
const minus = (text: string): string => text.replace(/-/g, '−');
const trimmed = (value: number, digits: number): string => minus(String(Number(value.toFixed(digits))));
const NARROW_SPACE = '\u202f';

export const grouped = (value: number): string => minus(Math.trunc(value).toString()).replace(/\B(?=(\d{3})+$)/g, NARROW_SPACE);

/** 3489420000 → `3489.42 MHz`; carriers are read in MHz whatever their size. */
export function frequency(hz: number): string {
  const size = Math.abs(hz);
  if (size >= 1e6) return `${trimmed(hz / 1e6, 6)} MHz`;
  if (size >= 1e3) return `${trimmed(hz / 1e3, 4)} kHz`;
  return `${trimmed(hz, 1)} Hz`;
}
export const sampleRate = (hz: number): string => (hz >= 1e6 ? `${trimmed(hz / 1e6, 4)} Msps` : `${trimmed(hz / 1e3, 3)} ksps`);

export function duration(seconds: number): string {
  const size = Math.abs(seconds);
  if (size >= 1) return `${trimmed(seconds, 2)} s`;
  if (size >= 1e-3) return `${trimmed(seconds * 1e3, 3)} ms`;
  if (size >= 1e-6) return `${trimmed(seconds * 1e6, 3)} µs`;
  return `${trimmed(seconds * 1e9, 2)} ns`;
}

export function fileSize(bytes: number): string {
  if (bytes >= 1e9) return `${trimmed(bytes / 1e9, 2)} GB`;
  if (bytes >= 1e6) return `${trimmed(bytes / 1e6, 1)} MB`;
  if (bytes >= 1e3) return `${trimmed(bytes / 1e3, 0)} kB`;
  return `${bytes} B`;
}

export const decibels = (db: number, unit = 'dB'): string => `${trimmed(db, 1)} ${unit}`;
export const percent = (value: number, digits = 1): string => `${trimmed(value, digits)} %`;
/** A probability is never rounded to certainty. */
export const probability = (p: number): string => String(Math.min(99, Math.max(1, Math.round(p * 100))));
export const counted = (count: number, one: string, many = `${one}s`): string => `${count} ${count === 1 ? one : many}`;
export const number = (value: number, digits = 4): string => trimmed(value, digits);
