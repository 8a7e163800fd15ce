import { useEffect, useState } from 'react';

/** The text once typing has paused, so that not every letter asks the server. */
export function useSettled(text: string, pauseMs = 180): string {
  const [settled, settle] = useState(text);
  useEffect(() => {
    const timer = window.setTimeout(() => settle(text), pauseMs);
    return () => window.clearTimeout(timer);
  }, [text, pauseMs]);
  return settled;
}
