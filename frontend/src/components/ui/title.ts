import { useEffect } from 'react';

/** The tab's title; the product's name stands last, so that tabs can be told apart. */
export function useTitle(title: string): void {
  useEffect(() => { document.title = `${title} · Crosstie`; }, [title]);
}
