import { useQuery } from '@tanstack/react-query';
import { Suspense } from 'react';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { LoadingPage } from '../components/ui/loading.js';
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
  if (isPending) return <LoadingPage />;
  if (error) throw error;
  if (!me) return <SignIn />;
  if (pathname === '/sign-in') return <Navigate to="/" replace />;
  setTimeZone(me.timeZone);
  return (
    <MeProvider me={me} key={me.timeZone}>
      <LiveUpdates />
      <Shell><Suspense fallback={<LoadingPage />}><Outlet /></Suspense></Shell>
    </MeProvider>
  );
}
