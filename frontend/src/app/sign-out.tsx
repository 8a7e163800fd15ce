import { useState } from 'react';
import { z } from 'zod';
import { send } from '../lib/call.js';

const answer = z.object({ redirectTo: z.string() });

/** Ends the session here and then, by going where the server says, at the identity provider. */
export function SignOut() {
  const [busy, setBusy] = useState(false);
  const leave = async (): Promise<void> => {
    setBusy(true);
    try {
      const read = answer.safeParse(await send('POST', '/api/auth/sign-out'));
      window.location.assign(read.success ? read.data.redirectTo : '/');
    } catch { setBusy(false); }
  };
  return <button type="button" className="text-button" disabled={busy} onClick={() => void leave()}>Sign out</button>;
}
