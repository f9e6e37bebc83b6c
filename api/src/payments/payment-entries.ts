import { minus } from '@tallypole/shared/money';
import type { LedgerEntry, LedgerLine, Source } from '../ledger/entry.ts';

const negative = (cents: number): number => minus(0, cents);
/** What pays a debt of the homeowner: their part of the draw first, and what is more than that stays theirs. */
const receivable = (source: Source, cents: number): LedgerLine => ({ account: 'homeowner_receivable', source, amountCents: cents });

interface Paid {
  id: string;
  title: string;
  onDate: string;
}

/** Money that came through Stripe: what arrives there, less its fee, against what was owed. More than was owed becomes a credit. */
export function checkoutSettled(paid: Paid, amountCents: number, owedCents: number, feeCents: number | null): LedgerEntry {
  const fee = feeCents ?? 0;
  const applied = amountCents < owedCents ? amountCents : owedCents;
  const lines: LedgerLine[] = [
    { account: 'stripe_clearing', amountCents: minus(amountCents, fee) },
    { account: 'processing_fees', amountCents: fee },
    receivable('homeowner', negative(applied)),
    { account: 'customer_credit', amountCents: negative(minus(amountCents, applied)) },
  ];
  return { cause: 'payment', causeId: paid.id, memo: `${paid.title}: paid`, onDate: paid.onDate, lines };
}

/** Stripe's fee, where it was not known yet when the payment settled. */
export function feeKnown(paid: Paid, feeCents: number): LedgerEntry {
  const lines: LedgerLine[] = [{ account: 'processing_fees', amountCents: feeCents }, { account: 'stripe_clearing', amountCents: negative(feeCents) }];
  return { cause: 'fee', causeId: paid.id, memo: `${paid.title}: processing fee`, onDate: paid.onDate, lines };
}

/** A check, a wire or the lender's money that the builder has. */
export function bankReceived(paid: Paid, source: Source, amountCents: number): LedgerEntry {
  const lines: LedgerLine[] = [{ account: 'bank', amountCents }, receivable(source, negative(amountCents))];
  return { cause: 'payment', causeId: paid.id, memo: `${paid.title}: received`, onDate: paid.onDate, lines };
}

/** The deposit is the homeowner's until work uses it up. */
export function depositReceived(paid: Paid, amountCents: number): LedgerEntry {
  const lines: LedgerLine[] = [{ account: 'bank', amountCents }, { account: 'deposit_held', amountCents: negative(amountCents) }];
  return { cause: 'deposit', causeId: paid.id, memo: 'Deposit received', onDate: paid.onDate, lines };
}

/** Money given back leaves Stripe; what had been paid too much is a credit used up, the rest is owed again. */
export function refunded(paid: Paid, refundId: string, amountCents: number, creditCents: number): LedgerEntry {
  const fromCredit = creditCents < amountCents ? creditCents : amountCents;
  const lines: LedgerLine[] = [
    receivable('homeowner', minus(amountCents, fromCredit)),
    { account: 'customer_credit', amountCents: fromCredit },
    { account: 'stripe_clearing', amountCents: negative(amountCents) },
  ];
  return { cause: 'refund', causeId: refundId, memo: `${paid.title}: refunded`, onDate: paid.onDate, lines };
}

/** A refund that the payer's bank did not take comes back. */
export function refundFailed(paid: Paid, refundId: string, amountCents: number): LedgerEntry {
  const lines: LedgerLine[] = [{ account: 'stripe_clearing', amountCents }, receivable('homeowner', negative(amountCents))];
  return { cause: 'refund', causeId: failedRefundId(refundId), memo: `${paid.title}: refund came back`, onDate: paid.onDate, lines };
}
export const failedRefundId = (refundId: string) => `${refundId}:failed`;

/** Contested money leaves Stripe at once, with a fee; whose it is stays open. */
export function disputed(paid: Paid, disputeId: string, amountCents: number, feeCents: number): LedgerEntry {
  const lines: LedgerLine[] = [
    { account: 'disputed', amountCents },
    { account: 'processing_fees', amountCents: feeCents },
    { account: 'stripe_clearing', amountCents: negative(amountCents) },
    { account: 'stripe_clearing', amountCents: negative(feeCents) },
  ];
  return { cause: 'dispute', causeId: disputeId, memo: `${paid.title}: disputed`, onDate: paid.onDate, lines };
}

export function disputeWon(paid: Paid, disputeId: string, amountCents: number): LedgerEntry {
  const lines: LedgerLine[] = [{ account: 'stripe_clearing', amountCents }, { account: 'disputed', amountCents: negative(amountCents) }];
  return { cause: 'dispute', causeId: wonDisputeId(disputeId), memo: `${paid.title}: dispute won`, onDate: paid.onDate, lines };
}
export const wonDisputeId = (disputeId: string) => `${disputeId}:won`;

/** The money is gone: a debit that came back after it had settled, or a lost dispute. It is owed again. */
export function returned(paid: Paid, disputeId: string, amountCents: number): LedgerEntry {
  const lines: LedgerLine[] = [receivable('homeowner', amountCents), { account: 'disputed', amountCents: negative(amountCents) }];
  return { cause: 'return', causeId: returnedId(disputeId), memo: `${paid.title}: returned`, onDate: paid.onDate, lines };
}
export const returnedId = (disputeId: string) => `${disputeId}:return`;
