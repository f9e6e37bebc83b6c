import { z } from 'zod';
import { BusinessDate, Id, Instant, Line, PositiveCents } from './common.ts';

export const paymentStates = ['started', 'processing', 'settled', 'failed', 'canceled', 'refunded', 'returned', 'disputed'] as const;
export type PaymentState = (typeof paymentStates)[number];
export const paymentMethods = ['checkout', 'check', 'wire', 'loan_advance'] as const;

/**
 * What can happen to a payment, and from where. What Stripe says may arrive late, twice or in any order: whatever isn't in this table
 * changes nothing. A state that Stripe contradicts later (failed, yet settled) is corrected forward, with an entry of its own.
 */
export const paymentTransitions = {
  process: { from: ['started'], to: 'processing' },
  settle: { from: ['started', 'processing', 'failed', 'canceled'], to: 'settled' },
  fail: { from: ['started', 'processing'], to: 'failed' },
  cancel: { from: ['started'], to: 'canceled' },
  refund: { from: ['settled'], to: 'refunded' },
  undo_refund: { from: ['refunded'], to: 'settled' },
  dispute: { from: ['settled', 'refunded'], to: 'disputed' },
  win_dispute: { from: ['disputed'], to: 'settled' },
  return: { from: ['settled', 'disputed'], to: 'returned' },
} as const satisfies Record<string, { from: readonly PaymentState[]; to: PaymentState }>;
export type PaymentStep = keyof typeof paymentTransitions;

/** The state after a step, or undefined where the step isn't possible. */
export function afterPaymentStep(state: PaymentState, step: PaymentStep): PaymentState | undefined {
  const { from, to } = paymentTransitions[step];
  return (from as readonly PaymentState[]).includes(state) ? to : undefined;
}

/** Starts paying a draw's own part; the sum is the one that the page showed. */
export const StartPayment = z.strictObject({ id: Id, amountCents: PositiveCents });

/** A check or wire that books has in hand; without a draw it is the deposit. */
export const RecordPayment = z.strictObject({
  id: Id,
  drawId: Id.nullable(),
  method: z.enum(['check', 'wire']),
  source: z.enum(['homeowner', 'loan']),
  amountCents: PositiveCents,
  receivedOn: BusinessDate,
  reference: Line(120),
});

/** Books has the money that the lender sent by way of somebody else. */
export const ConfirmReceipt = z.strictObject({ receivedOn: BusinessDate });

export const Payment = z.object({
  id: Id,
  drawId: Id.nullable(),
  drawNumber: z.int().nullable(),
  method: z.enum(paymentMethods),
  source: z.enum(['homeowner', 'loan']),
  state: z.enum(paymentStates),
  amountCents: z.int(),
  /** What the builder has of it now. */
  keptCents: z.int(),
  /** Processing fee; for the firm only. */
  feeCents: z.int().nullable(),
  reference: z.string(),
  startedOn: BusinessDate,
  settledOn: BusinessDate.nullable(),
  /** Why it failed or came back, in a sentence. */
  trouble: z.string().nullable(),
  createdAt: Instant,
}).meta({ id: 'Payment' });
/** One payment of mine while it is made: where to go, or what became of it. */
export const PaymentProgress = z.object({
  payment: Payment,
  /** The payment page, once it is ready; null while it is being opened and when it is over. */
  url: z.string().nullable(),
});

export type StartPayment = z.infer<typeof StartPayment>;
export type RecordPayment = z.infer<typeof RecordPayment>;
export type ConfirmReceipt = z.infer<typeof ConfirmReceipt>;
export type Payment = z.infer<typeof Payment>;
export type PaymentProgress = z.infer<typeof PaymentProgress>;
