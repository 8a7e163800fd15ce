import { useLocation } from 'react-router-dom';
import { useTitle } from '../components/ui/title.js';
import { RailsPicture } from './rails-picture.js';

export const signInAddress = (returnTo: string): string => `/api/auth/sign-in?returnTo=${encodeURIComponent(returnTo)}`;

/** The page for everyone who is not signed in: what this is, and the one way in. */
export function SignIn() {
  const { pathname, search } = useLocation();
  useTitle('Sign in');
  return (
    <main id="main" className="landing">
      <RailsPicture />
      <div className="landing-words">
        <p className="landing-name">Crosstie</p>
        <h1>Two vendors, one link, and one setting that does not match</h1>
        <p>Drop a capture and both configuration snapshots. Crosstie finds the setting on which the two sides disagree, shows the evidence to both, and keeps the record until the link carries traffic.</p>
        <a className="button button-main" href={signInAddress(pathname + search)}>Sign in</a>
        <p className="small">You are sent to your organisation’s sign-in page and come back here. Access is by invitation of a programme’s administrator.</p>
      </div>
    </main>
  );
}
