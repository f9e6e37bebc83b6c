import type { UnitOfWork } from '../common/unit-of-work.ts';

/** Worker, daily: what is kept of signing in for a time only goes when its time is over (app.sweep_sign_in holds the periods). */
export async function sweepSignIn(work: UnitOfWork): Promise<void> {
  await work.write(undefined, (tx) => tx.rows('select app.sweep_sign_in(now())'));
}
