import { useLocation } from 'react-router-dom';
import { useTitle } from '../components/ui/title.js';
import { RailsPicture } from './rails-picture.js';

/** Where an invitation's link leads: says what will happen, then starts the sign-in that binds it. */
export function Invitation() {
  const { pathname } = useLocation();
  const token = pathname.split('/')[2] ?? '';
  useTitle('Invitation');
  return (
    <main id="main" className="landing">
      <RailsPicture />
      <div className="landing-words">
        <p className="landing-name">Crosstie</p>
        <h1>You are invited to a programme</h1>
        <p>Sign in with the address that the invitation was sent to. The invitation works once; afterwards you sign in as usual.</p>
        <a className="button button-main" href={`/api/auth/sign-in?invitation=${encodeURIComponent(token)}`}>Accept and sign in</a>
        <p className="small">Were you not expecting this? Close the page; nothing happens until you accept.</p>
      </div>
    </main>
  );
}
