import { Link } from 'react-router-dom';
import { useTitle } from '../components/ui/title.js';

/** One page for what is not there and for what may not be seen: the difference is nobody else's business. */
export function Missing() {
  useTitle('Not found');
  return (
    <main id="main" className="page page-narrow" tabIndex={-1}>
      <p className="fig soft">404</p>
      <h1>Nothing here that you can open</h1>
      <p className="mt-3">Either the address is mistyped, or it names something that was not shared with your party. If a colleague sent it, ask them whether your party is on the issue.</p>
      <p className="mt-4"><Link to="/register">Go to the register</Link></p>
    </main>
  );
}
