/** Instants travel in UTC and are shown in the reader's zone, day before month, 24 hours. */
let zone = Intl.DateTimeFormat().resolvedOptions().timeZone;

export function setTimeZone(name: string): void {
  try { zone = new Intl.DateTimeFormat('en-GB', { timeZone: name }).resolvedOptions().timeZone; } catch { /* an unknown name keeps the browser's own zone */ }
}
export const timeZone = (): string => zone;

const shown = (options: Intl.DateTimeFormatOptions) => (instant: string | Date): string =>
  new Intl.DateTimeFormat('en-GB', { timeZone: zone, ...options }).format(new Date(instant)).replace(/\bSept\b/, 'Sep');

const clock = { hour: '2-digit', minute: '2-digit', hourCycle: 'h23' } as const;
export const instant = shown({ day: 'numeric', month: 'short', year: 'numeric', ...clock });
const momentWithComma = shown({ day: 'numeric', month: 'short', ...clock });
export const moment = (at: string | Date): string => momentWithComma(at).replace(',', '');
const weekdayWithComma = shown({ weekday: 'short', day: 'numeric', month: 'short' });
export const weekdayOf = (at: string | Date): string => weekdayWithComma(at).replace(',', '');
export const dateOf = shown({ day: 'numeric', month: 'short', year: 'numeric' });

/** A calendar day `2026-12-03` has no zone: it is the same day everywhere. */
export const calendarDay = (day: string): string =>
  new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', weekday: 'short', day: 'numeric', month: 'short' })
    .format(new Date(`${day}T00:00:00Z`)).replace(/,/g, '').replace(/\bSept\b/, 'Sep');
export const calendarDate = (day: string): string =>
  new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', day: 'numeric', month: 'short', year: 'numeric' })
    .format(new Date(`${day}T00:00:00Z`)).replace(/\bSept\b/, 'Sep');

/** Whole days below ten keep one decimal only under one day. */
export function days(count: number): string {
  if (count < 1) return `${Math.max(1, Math.round(count * 24))} h`;
  return `${Math.round(count)} d`;
}
