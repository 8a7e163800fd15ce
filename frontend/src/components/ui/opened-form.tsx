import { useEffect, useRef, type FormHTMLAttributes, type RefObject } from 'react';

const CONTROLS = 'input:not([hidden]), select, textarea, button';

/** The control to begin with; of a group of radios the chosen one. */
function firstControl(form: HTMLElement): HTMLElement | null {
  const first = form.querySelector<HTMLElement>(CONTROLS);
  if (!(first instanceof HTMLInputElement) || first.type !== 'radio') return first;
  return form.querySelector<HTMLElement>(`input[name="${CSS.escape(first.name)}"]:checked`) ?? first;
}

/**
 * The keyboard follows what a button opens: to the first control when it opens, and back to where it
 * was opened from when it closes. The button itself may be gone meanwhile, so its place is kept.
 */
export function useOpened<T extends HTMLElement>(): RefObject<T | null> {
  const opened = useRef<T>(null);
  useEffect(() => {
    const element = opened.current;
    if (!element) return;
    const home = element.parentElement?.closest<HTMLElement>('section, article, .stage-moves, main');
    firstControl(element)?.focus();
    return () => {
      window.setTimeout(() => {
        if (home?.isConnected && (document.activeElement === null || document.activeElement === document.body)) home.querySelector<HTMLElement>('button')?.focus();
      });
    };
  }, []);
  return opened;
}

/** A form that a button opens. */
export function OpenedForm(props: FormHTMLAttributes<HTMLFormElement>) {
  const form = useOpened<HTMLFormElement>();
  return <form ref={form} {...props} />;
}
