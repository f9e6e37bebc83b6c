import { useQuery } from '@tanstack/react-query';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { meQuery } from '../lib/me.ts';
import { isProblemWith } from '../lib/problem.ts';
import { FailureState, LoadingState } from '../ui/page.tsx';
import { Shell } from './shell.tsx';

/** Lets through whoever is signed in; others sign in and come back to where they were. */
export function SignedIn() {
  const { data, error, isPending, refetch } = useQuery(meQuery);
  const { pathname, search } = useLocation();
  if (isProblemWith(error, 'not_signed_in')) return <Navigate to={`/sign-in?to=${encodeURIComponent(`${pathname}${search}`)}`} replace />;
  if (isPending) return <div style={{ padding: 24 }}><LoadingState /></div>;
  if (!data) return <main style={{ padding: 24 }}><FailureState error={error} onRetry={() => void refetch()} /></main>;
  return (
    <Shell me={data}>
      <Outlet />
    </Shell>
  );
}
