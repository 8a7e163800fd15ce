import { useState } from 'react';
import { NavLink } from 'react-router-dom';
import { ProgrammeChoice } from './programme-choice.js';
import { SignOut } from './sign-out.js';
import { useMe } from './me.js';

const PAGES = [['/', 'Day sheet'], ['/register', 'Register'], ['/links', 'Links'], ['/overview', 'Overview'], ['/programme', 'Programme']] as const;

/** The pages in one line; on a narrow screen behind one button, in the same order. */
export function Navigation() {
  const { me } = useMe();
  const [open, setOpen] = useState(false);
  const close = (): void => setOpen(false);
  return (
    <>
      <button type="button" className="menu-button" aria-expanded={open} aria-controls="pages" onClick={() => setOpen(!open)}>{open ? 'Close' : 'Menu'}</button>
      <div id="pages" className={open ? 'pages open' : 'pages'}>
        <nav aria-label="Pages">
          {PAGES.map(([to, label]) => <NavLink key={to} to={to} end={to === '/'} onClick={close}>{label}</NavLink>)}
        </nav>
        <div className="who">
          <ProgrammeChoice />
          <NavLink to="/account" onClick={close}>{me.name}</NavLink>
          <SignOut />
        </div>
      </div>
    </>
  );
}
