import { minus, sum } from '@tallypole/shared/money';
import { afterPaymentStep, type PaymentState, type PaymentStep } from '@tallypole/shared/schemas/payments';
import { failedRefundId, returnedId, wonDisputeId } from './payment-entries.ts';
import type { DisputeFacts, PaymentFacts, RefundFacts, SessionFacts } from './stripe-facts.ts';

/** What we hold of a payment: its state, and which of Stripe's objects are booked already. */
export interface Held {
  state: PaymentState;
  amountCents: number;
  keptCents: number;
  feeCents: number | null;
  booked: readonly string[];
}

type Booking =
  | { book: 'nothing' }
  | { book: 'payment'; feeCents: number | null }
  | { book: 'fee'; feeCents: number }
  | { book: 'refund' | 'failed_refund' | 'won' | 'return'; id: string; amountCents: number }
  | { book: 'dispute'; id: string; amountCents: number; feeCents: number };

/** One thing to write: the state and the sum that the builder has after it, what to book, and why, where something went wrong. */
export type Move = Booking & { step: PaymentStep | null; state: PaymentState; keptCents: number; trouble: string | null };

/**
 * What is still to be written so that our payment says what Stripe says. A pure function of both sides, hence right in any order of
 * events, after any number of repeats, and when events were lost.
 */
export function movesFor(held: Held, session: Pick<SessionFacts, 'status'> | null, facts: PaymentFacts | null): Move[] {
  if (facts?.status === 'succeeded') return afterSuccess(held, facts);
  const step = unsettledStep(session, facts);
  const state = step && afterPaymentStep(held.state, step);
  if (!step || !state) return [];
  const trouble = step === 'fail' ? (facts?.failure ?? 'The bank did not take the debit.') : null;
  return [{ book: 'nothing', step, state, keptCents: 0, trouble }];
}

function unsettledStep(session: Pick<SessionFacts, 'status'> | null, facts: PaymentFacts | null): PaymentStep | null {
  if (facts?.status === 'processing') return 'process';
  if (session?.status === 'expired' || facts?.status === 'canceled') return 'cancel';
  // while the payment page is open the payer may try again there
  if (session?.status === 'complete' && facts?.status === 'unpaid' && facts.attempted) return 'fail';
  return null;
}

function afterSuccess(held: Held, facts: PaymentFacts): Move[] {
  if (facts.receivedCents !== held.amountCents) throw new Error(`Stripe received ${facts.receivedCents} for a payment of ${held.amountCents} (${facts.intentId}).`);
  const moves: Move[] = [];
  let { state, keptCents } = held;
  const write = (step: PaymentStep | null, kept: number, booking: Booking, trouble: string | null = null) => {
    state = (step && afterPaymentStep(state, step)) ?? state;
    keptCents = kept;
    moves.push({ ...booking, step, state, keptCents, trouble });
  };
  if (afterPaymentStep(state, 'settle')) write('settle', held.amountCents, { book: 'payment', feeCents: facts.feeCents });
  else if (held.feeCents === null && facts.feeCents !== null) write(null, keptCents, { book: 'fee', feeCents: facts.feeCents });
  for (const refund of facts.refunds) {
    const todo = refundTodo(refund, held.booked);
    if (todo === 'refund') {
      const kept = minus(keptCents, refund.amountCents);
      write(kept === 0 ? 'refund' : null, kept, { book: 'refund', ...refund });
    } else if (todo === 'failed_refund') {
      write('undo_refund', sum([keptCents, refund.amountCents]), { book: 'failed_refund', ...refund });
    }
  }
  for (const dispute of facts.disputes) for (const todo of disputeTodo(dispute, held.booked)) writeDispute(dispute, todo, write, () => keptCents);
  return moves;
}

function refundTodo({ id, failed }: RefundFacts, booked: readonly string[]): 'refund' | 'failed_refund' | null {
  if (!booked.includes(id)) return failed ? null : 'refund';
  return failed && !booked.includes(failedRefundId(id)) ? 'failed_refund' : null;
}

function disputeTodo({ id, outcome, withdrawn }: DisputeFacts, booked: readonly string[]): ('dispute' | 'won' | 'return')[] {
  if (!withdrawn) return [];
  const todo: ('dispute' | 'won' | 'return')[] = booked.includes(id) ? [] : ['dispute'];
  if (outcome === 'won' && !booked.includes(wonDisputeId(id))) todo.push('won');
  if (outcome === 'lost' && !booked.includes(returnedId(id))) todo.push('return');
  return todo;
}

type Write = (step: PaymentStep | null, kept: number, booking: Booking, trouble?: string | null) => void;

function writeDispute(dispute: DisputeFacts, todo: 'dispute' | 'won' | 'return', write: Write, kept: () => number): void {
  const { id, amountCents, feesCents, reason } = dispute;
  const words = `The bank contests the debit (${reason.replaceAll('_', ' ')}).`;
  if (todo === 'dispute') write('dispute', kept(), { book: 'dispute', id, amountCents, feeCents: sum(feesCents) }, words);
  else if (todo === 'won') write('win_dispute', kept(), { book: 'won', id, amountCents });
  else write('return', minus(kept(), amountCents), { book: 'return', id, amountCents }, `The bank took the money back (${reason.replaceAll('_', ' ')}).`);
}
