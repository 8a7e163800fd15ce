import { useLocation } from 'react-router-dom';
import { useTitle } from '../components/ui/title.js';
import { RailsPicture } from './rails-picture.js';

const signInAddress = (returnTo: string): string => `/api/auth/sign-in?returnTo=${encodeURIComponent(returnTo)}`;

/** How the server says that a sign-in ended other than in; a refusal never says whether anyone was invited. */
const OUTCOMES: Record<string, string> = {
  refused: 'This account opens no programme here. Open the link of your invitation and sign in with the address that it was sent to, or ask the programme’s administrator for one.',
  expired: 'That sign-in took too long, or was begun in another browser. Sign in again.',
  unavailable: 'The identity provider did not complete the sign-in. Try again; if it stays so, tell your administrator.',
};

/** Where to sign in from this place; after a refusal the provider asks again who it is. */
function wayIn(pathname: string, search: string): { href: string; outcome: string | undefined } {
  if (pathname !== '/sign-in') return { href: signInAddress(pathname + search), outcome: undefined };
  const outcome = new URLSearchParams(search).get('outcome') ?? '';
  return { href: `${signInAddress('/')}${outcome === 'refused' ? '&again=1' : ''}`, outcome: OUTCOMES[outcome] };
}

/** The page for everyone who is not signed in: what this is, and the one way in. */
export function SignIn() {
  const { pathname, search } = useLocation();
  const { href, outcome } = wayIn(pathname, search);
  useTitle('Sign in');
  return (
    <main id="main" className="landing">
      <RailsPicture />
      <div className="landing-words">
        <p className="landing-name">Crosstie</p>
        <h1>Two vendors, one link, and one setting that does not match</h1>
        <p>Drop a capture and both configuration snapshots. Crosstie finds the setting on which the two sides disagree, shows the evidence to both, and keeps the record until the link carries traffic.</p>
        {outcome && <p className="notice waits" role="alert">{outcome}</p>}
        <a className="button button-main" href={href}>Sign in</a>
        <p className="small">You are sent to your organisation’s sign-in page and come back here. Access is by invitation of a programme’s administrator.</p>
      </div>
    </main>
  );
}
