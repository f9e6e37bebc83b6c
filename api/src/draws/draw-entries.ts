import type { DrawInput } from '@tallypole/shared/draw';
import { minus, sum } from '@tallypole/shared/money';
import type { LedgerEntry } from '../ledger/entry.ts';
import type { DrawFigures } from './draw-figures.ts';

const negative = (cents: number): number => minus(0, cents);

/**
 * An approved draw: what is billed is earned; of it the homeowner owes what is due, by where the money is expected from; the retainage is
 * owed later, and the deposit was paid before.
 */
export function drawApproved(draw: { id: string; number: number }, input: DrawInput, figures: DrawFigures, onDate: string): LedgerEntry {
  const { summary, lines } = figures.computed;
  const billed = sum(lines.map(({ thisDrawCents }) => thisDrawCents));
  const credit = minus(summary.creditCarriedCents, summary.creditBeforeCents);
  return {
    cause: 'draw',
    causeId: draw.id,
    memo: `Draw ${draw.number} approved`,
    onDate,
    lines: [
      { account: 'homeowner_receivable', source: 'homeowner', amountCents: figures.homeownerCents },
      { account: 'homeowner_receivable', source: 'loan', amountCents: figures.loanCents },
      { account: 'retainage_receivable', amountCents: minus(summary.retainageHeldCents, input.before.retainageHeldCents) },
      { account: 'deposit_held', amountCents: summary.depositUsedNowCents },
      { account: 'customer_credit', amountCents: negative(credit) },
      { account: 'billed_work', amountCents: negative(billed) },
    ],
  };
}

/** The lender takes less or more than was presumed: what is owed stays, where it is expected from moves. */
export function splitMoved(draw: { id: string; number: number }, reviewId: string, toHomeownerCents: number, onDate: string): LedgerEntry {
  return {
    cause: 'adjustment',
    causeId: reviewId,
    memo: `Draw ${draw.number}: who pays`,
    onDate,
    lines: [
      { account: 'homeowner_receivable', source: 'homeowner', amountCents: toHomeownerCents },
      { account: 'homeowner_receivable', source: 'loan', amountCents: negative(toHomeownerCents) },
    ],
  };
}
