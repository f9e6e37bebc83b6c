/** What the application knows of Stripe's objects: ours alone, so that nothing beyond the client depends on their shape. Sums in cents. */

export interface AccountFacts {
  id: string;
  chargesEnabled: boolean;
  payoutsEnabled: boolean;
  detailsSubmitted: boolean;
}

export interface SessionRequest {
  account: string;
  /** The attempt's own random idempotency key, stored before the call. */
  key: string;
  amountCents: number;
  title: string;
  email: string;
  successUrl: string;
  cancelUrl: string;
  expiresAt: Date;
  /** Our ids in Stripe's metadata, by which an object is found again after an unclear answer. */
  ids: { payment_id: string; attempt_id: string; job_id: string; draw_id: string };
}

export interface SessionFacts {
  id: string;
  status: 'open' | 'complete' | 'expired';
  url: string | null;
  expiresAt: Date;
  intentId: string | null;
  paymentId: string | null;
}

export interface RefundFacts {
  id: string;
  amountCents: number;
  failed: boolean;
}

export interface DisputeFacts {
  id: string;
  amountCents: number;
  outcome: 'open' | 'won' | 'lost';
  /** Whether the money left the account's balance. */
  withdrawn: boolean;
  feesCents: number[];
  reason: string;
}

export interface PaymentFacts {
  intentId: string;
  paymentId: string | null;
  /** `unpaid`: Stripe waits for the payer, whether nothing was tried yet or a try failed. */
  status: 'unpaid' | 'processing' | 'succeeded' | 'canceled';
  attempted: boolean;
  receivedCents: number;
  /** Null while Stripe has not charged it yet. */
  feeCents: number | null;
  failure: string | null;
  failureCode: string | null;
  refunds: RefundFacts[];
  disputes: DisputeFacts[];
}

/** An event, reduced to what it is about: what happened is read from the object itself. */
export interface StripeNews {
  id: string;
  account: string;
  type: string;
  objectId: string;
  paymentIntent: string | null;
  createdAt: Date;
}
