import { Link, useLocation } from 'react-router-dom';
import { isProblemWith } from '../lib/problem.ts';

/** Beside a refusal that asks for a second step: the way to set it up, and back to here. */
export function SecondStepLink({ error }: { error: unknown }) {
  const { pathname, search } = useLocation();
  if (!isProblemWith(error, 'second_step_needed')) return null;
  return (
    <p>
      <Link to={`/account/second-step?to=${encodeURIComponent(`${pathname}${search}`)}`}>Set up your second step</Link>
    </p>
  );
}
