import { useLayoutEffect, useRef, useState, type RefObject } from 'react';

/** The width that a plot has, in CSS pixels, so that its text keeps its size at every width. */
export function useWidth(initial: number): [RefObject<HTMLDivElement | null>, number] {
  const frame = useRef<HTMLDivElement>(null);
  const [width, setWidth] = useState(initial);
  useLayoutEffect(() => {
    const element = frame.current;
    if (!element) return;
    const measure = (): void => { if (element.clientWidth > 0) setWidth(element.clientWidth); };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return [frame, width];
}
