import { useQueryErrorResetBoundary } from '@tanstack/react-query';
import { useEffect } from 'react';
import { useRouteError } from 'react-router-dom';
import { messageOf, statusOf } from '../lib/refusal.js';
import { Missing } from './missing.js';

/** What stands where a page failed: what happened, and the way on. */
export function ErrorPage() {
  const error = useRouteError();
  const { reset } = useQueryErrorResetBoundary();
  useEffect(() => reset, [reset]);
  const status = statusOf(error);
  if (status === 404) return <Missing />;
  return (
    <main id="main" className="page page-narrow" tabIndex={-1}>
      <h1>{status === 403 ? 'This is not yours to open' : 'This page could not be shown'}</h1>
      <p className="mt-3" role="alert">{messageOf(error)}</p>
      <p className="mt-4"><button type="button" className="button" onClick={() => window.location.reload()}>Try again</button></p>
    </main>
  );
}
