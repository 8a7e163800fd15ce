import { createContext, useContext, useEffect, useId, useRef, useState, type KeyboardEvent, type ReactNode } from 'react';

const Closing = createContext<() => void>(() => undefined);
/** Closes the popover that the caller stands in, and gives the focus back to its opener. */
export const useClose = (): (() => void) => useContext(Closing);

/** Closes on Escape (the focus returns to the opener), on a press elsewhere and when the focus leaves. */
export function Popover({ opener, openerClass, label, toLeft, children }: {
  opener: ReactNode; openerClass: string; label: string; toLeft?: boolean; children: ReactNode;
}) {
  const [open, setOpen] = useState(false);
  const frame = useRef<HTMLSpanElement>(null);
  const button = useRef<HTMLButtonElement>(null);
  const id = useId();
  useEffect(() => {
    if (!open) return;
    const outside = (e: PointerEvent): void => { if (!frame.current?.contains(e.target as Node)) setOpen(false); };
    document.addEventListener('pointerdown', outside);
    return () => document.removeEventListener('pointerdown', outside);
  }, [open]);
  const close = (): void => { setOpen(false); button.current?.focus(); };
  const onKey = (e: KeyboardEvent): void => { if (e.key === 'Escape' && open) { e.stopPropagation(); close(); } };
  return (
    <span className="popover" ref={frame} onKeyDown={onKey}
      onBlur={(e) => { if (e.relatedTarget && !e.currentTarget.contains(e.relatedTarget)) setOpen(false); }}>
      <button type="button" ref={button} className={openerClass} aria-expanded={open} aria-controls={open ? id : undefined} onClick={() => setOpen(!open)}>{opener}</button>
      {open && <div id={id} role="group" aria-label={label} className={toLeft ? 'popover-panel to-left' : 'popover-panel'}><Closing value={close}>{children}</Closing></div>}
    </span>
  );
}
