import type { ReactNode } from 'react';

export type Standing = 'a' | 'b' | 'lab';
const SPOKEN: Record<Standing, string> = { a: 'side A', b: 'side B', lab: 'the lab' };

/** A party that stands for a side: one solid bar for A, two thin bars for B, a hair for the lab. */
export function SideMark({ side, children, quiet = false }: { side: Standing; children?: ReactNode; quiet?: boolean }) {
  return (
    <span className={`side-mark side-${side}`}>
      {!quiet && <span className="hidden-text">{SPOKEN[side]}: </span>}
      {children}
    </span>
  );
}
