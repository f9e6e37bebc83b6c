import type { FundingBlocker, LendingRow } from '@tallypole/shared/schemas/lending';

type Facts = Pick<LendingRow, 'state' | 'reviewState' | 'conditions' | 'provenCents' | 'billedCents'> & { approved: boolean };

/** The one thing that keeps a draw from being funded today: the first in the order in which a lender would deal with it. */
export function blockerOf({ state, reviewState, conditions, provenCents, billedCents, approved }: Facts): FundingBlocker | null {
  if (state === 'returned') return 'returned';
  if (reviewState === 'ordered') return billedCents > provenCents ? 'unproven' : 'not_inspected';
  if (reviewState === 'inspected') return 'not_allowed';
  if (!approved) return 'not_approved';
  return conditions === '' ? null : 'conditions';
}
