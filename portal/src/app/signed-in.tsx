import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { Navigate, Outlet, useLocation, useNavigate } from 'react-router-dom';
import { meQuery } from '../lib/me.ts';
import { isProblemWith } from '../lib/problem.ts';
import { onSessionEnd } from '../lib/session.ts';
import { FailureState, LoadingState } from '../ui/page.tsx';
import { Shell } from './shell.tsx';

const YOUR_NAME = '/your-name';

/** Lets through whoever is signed in; others sign in and come back to where they were. */
export function SignedIn() {
  const { data, error, isPending, refetch } = useQuery(meQuery);
  const { pathname, search } = useLocation();
  const navigate = useNavigate();
  const here = encodeURIComponent(`${pathname}${search}`);
  const signIn = `/sign-in?to=${here}`;
  const wasHere = data !== undefined;
  useEffect(() => {
    if (!wasHere) return undefined;
    // a session can end under an open page, in the middle of a form: what was typed waits for the way back
    return onSessionEnd(() => void navigate(signIn, { replace: true, state: { ended: true } }));
  }, [wasHere, navigate, signIn]);
  if (isProblemWith(error, 'not_signed_in')) return <Navigate to={signIn} replace />;
  if (isPending) return <div style={{ padding: 24 }}><LoadingState /></div>;
  if (!data) return <main style={{ padding: 24 }} id="main"><FailureState error={error} onRetry={() => void refetch()} /></main>;
  if (data.person.name === null && pathname !== YOUR_NAME) return <Navigate to={`${YOUR_NAME}?to=${here}`} replace />;
  return (
    <Shell me={data}>
      <Outlet />
    </Shell>
  );
}
