import { useEffect, useRef, type ReactNode } from 'react';
import { Link, ScrollRestoration, useLocation } from 'react-router-dom';
import { Mark } from '../components/marks/mark.js';
import { FindBox } from '../features/search/find-box.js';
import { Navigation } from './navigation.js';

/** After a change of page, the keyboard and the screen reader start at the new page's content. */
function useFocusOnNewPage(): void {
  const { pathname } = useLocation();
  const shown = useRef(pathname);
  useEffect(() => {
    if (shown.current === pathname) return;
    shown.current = pathname;
    document.getElementById('main')?.focus({ preventScroll: true });
  }, [pathname]);
}

/** What stands around every signed-in page: the header and the page's own `main`. */
export function Shell({ children }: { children: ReactNode }) {
  useFocusOnNewPage();
  return (
    <>
      <a className="skip" href="#main">Skip to the page</a>
      <header className="top">
        <Link to="/" className="brand"><Mark />Crosstie</Link>
        <Navigation />
        <FindBox />
      </header>
      {children}
      <ScrollRestoration />
    </>
  );
}
