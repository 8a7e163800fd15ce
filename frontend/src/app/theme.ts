import { useSyncExternalStore } from 'react';

export type ThemeChoice = 'system' | 'light' | 'dark';
const KEPT = 'crosstie.theme';
const CHANGED = 'crosstie:theme';

function kept(): ThemeChoice {
  try {
    const value = localStorage.getItem(KEPT);
    return value === 'light' || value === 'dark' ? value : 'system';
  } catch { return 'system'; }
}

/** Keeps the choice in this browser; the script of the page's head applies it, now and before the next paint. */
export function chooseTheme(choice: ThemeChoice): void {
  try {
    if (choice === 'system') localStorage.removeItem(KEPT);
    else localStorage.setItem(KEPT, choice);
  } catch { /* a private window keeps nothing; the choice holds until it closes */ }
  window.dispatchEvent(new Event(CHANGED));
}

const subscribe = (hear: () => void): (() => void) => {
  window.addEventListener(CHANGED, hear);
  return () => window.removeEventListener(CHANGED, hear);
};
export const useTheme = (): ThemeChoice => useSyncExternalStore(subscribe, kept);
