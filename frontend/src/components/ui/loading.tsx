import { useEffect, useState } from 'react';
import { Mark } from '../marks/mark.js';

const QUIET_MS = 250;

/** The mark laying its ties; it stays away for a quarter of a second, so that quick answers do not flicker. */
export function Loading({ what = 'Reading' }: { what?: string }) {
  const [shown, show] = useState(false);
  useEffect(() => {
    const timer = window.setTimeout(() => show(true), QUIET_MS);
    return () => window.clearTimeout(timer);
  }, []);
  return <div className="loading" role="status">{shown && <><Mark size={44} moving /><span>{what} …</span></>}</div>;
}

/** The same where a whole page is being read. */
export const LoadingPage = () => <main id="main" tabIndex={-1}><h1 className="hidden-text">Crosstie</h1><Loading /></main>;
