export type Account =
  | 'homeowner_receivable' | 'retainage_receivable' | 'billed_work' | 'deposit_held' | 'customer_credit' | 'stripe_clearing'
  | 'bank' | 'processing_fees' | 'disputed' | 'late_interest' | 'write_off';
/** Where the money of a receivable is expected from: the homeowner owes all of it, the loan is where a part comes from. */
export type Source = 'homeowner' | 'loan';
type Cause = 'draw' | 'payment' | 'refund' | 'return' | 'dispute' | 'fee' | 'payout' | 'adjustment' | 'deposit';

export interface LedgerLine {
  account: Account;
  source?: Source;
  /** Debit positive, credit negative. */
  amountCents: number;
}

/** One entry; what caused it makes it unique, so that the same event booked again changes nothing. */
export interface LedgerEntry {
  cause: Cause;
  causeId: string;
  memo: string;
  onDate: string;
  lines: readonly LedgerLine[];
}
