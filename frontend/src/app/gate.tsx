import { useQuery } from '@tanstack/react-query';
import { Suspense } from 'react';
import { Outlet, useLocation } from 'react-router-dom';
import { Loading } from '../components/ui/loading.js';
import { readMe } from '../features/people/api/read-me.js';
import { setTimeZone } from '../lib/times.js';
import { Invitation } from './invitation.js';
import { LiveUpdates } from './live-updates.js';
import { MeProvider } from './me.js';
import { Shell } from './shell.js';
import { SignIn } from './sign-in.js';

/** Lets a signed-in person through to the pages, and shows everyone else the one way in. */
export function Gate() {
  const { data: me, isPending, error } = useQuery(readMe());
  const { pathname } = useLocation();
  if (pathname.startsWith('/invitations/')) return <Invitation />;
  if (isPending) return <Loading />;
  if (error) throw error;
  if (!me) return <SignIn />;
  setTimeZone(me.timeZone);
  return (
    <MeProvider me={me} key={me.timeZone}>
      <LiveUpdates />
      <Shell><Suspense fallback={<Loading />}><Outlet /></Suspense></Shell>
    </MeProvider>
  );
}
