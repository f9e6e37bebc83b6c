import { Inject, Injectable } from '@nestjs/common';
import { Stripe } from 'stripe';
import { CONFIGURATION, type Configuration } from '../common/configuration.ts';
import type { AccountFacts, PaymentFacts, SessionFacts, SessionRequest, StripeNews } from './stripe-facts.ts';
import { StripeTrouble, troubleOf } from './stripe-trouble.ts';

const TIMEOUT_MS = 12_000;
const SIGNATURE_TOLERANCE_SECONDS = 300;
/** A little before what we stored, since two clocks differ. */
const CLOCK_SLACK_SECONDS = 300;
/** What the sweep asks for: everything that moves a payment or an account. */
const NEWS: Stripe.EventListParams['types'] = [
  'account.updated', 'checkout.session.completed', 'checkout.session.expired', 'checkout.session.async_payment_succeeded',
  'checkout.session.async_payment_failed', 'payment_intent.succeeded', 'payment_intent.payment_failed', 'payment_intent.processing',
  'charge.refunded', 'refund.updated', 'refund.failed', 'charge.dispute.created', 'charge.dispute.funds_withdrawn',
  'charge.dispute.funds_reinstated', 'charge.dispute.closed',
];

/**
 * The only door to Stripe. Everything is asked on the builder's connected account: payments are direct charges there. The SDK never
 * retries by itself, since an attempt is a row of ours; every failure comes out as a StripeTrouble.
 */
@Injectable()
export class StripeClient {
  private readonly stripe: Stripe;
  private readonly webhookSecret: string;

  constructor(@Inject(CONFIGURATION) { STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET, STRIPE_API_URL }: Configuration) {
    const at = STRIPE_API_URL ? new URL(STRIPE_API_URL) : undefined;
    const address = at && { host: at.hostname, port: at.port || (at.protocol === 'https:' ? 443 : 80), protocol: at.protocol === 'https:' ? 'https' : 'http' } as const;
    this.stripe = new Stripe(STRIPE_SECRET_KEY, { timeout: TIMEOUT_MS, maxNetworkRetries: 0, telemetry: false, ...address });
    this.webhookSecret = STRIPE_WEBHOOK_SECRET;
  }

  /** Checks signature and age of a webhook over its raw bytes. Undefined where either doesn't hold. */
  readNews(raw: Buffer, signature: string): StripeNews | undefined {
    try {
      return newsOf(this.stripe.webhooks.constructEvent(raw, signature, this.webhookSecret, SIGNATURE_TOLERANCE_SECONDS), undefined);
    } catch (error) {
      if (error instanceof Stripe.errors.StripeSignatureVerificationError || error instanceof SyntaxError) return undefined;
      throw error;
    }
  }

  createAccount(firm: { id: string; name: string; email: string }, key: string): Promise<AccountFacts> {
    const controller = { fees: { payer: 'account' }, losses: { payments: 'stripe' }, requirement_collection: 'stripe', stripe_dashboard: { type: 'full' } } as const;
    const capabilities = { us_bank_account_ach_payments: { requested: true }, transfers: { requested: true }, card_payments: { requested: true } };
    return this.ask(async () => {
      const params = { country: 'US', email: firm.email, business_profile: { name: firm.name }, controller, capabilities, metadata: { firm_id: firm.id } };
      return accountFacts(await this.stripe.accounts.create(params, { idempotencyKey: key }));
    });
  }

  /** An account that an unanswered call may have made. */
  findAccount(firmId: string, since: Date): Promise<AccountFacts | undefined> {
    return this.ask(async () => {
      for await (const account of this.stripe.accounts.list({ created: { gte: seconds(since) }, limit: 100 })) {
        if (account.metadata?.['firm_id'] === firmId) return accountFacts(account);
      }
      return undefined;
    });
  }

  account(id: string): Promise<AccountFacts> {
    return this.ask(async () => accountFacts(await this.stripe.accounts.retrieve(id)));
  }

  /** A page of Stripe's where the firm enters its details; works once, for minutes. */
  onboarding(account: string, urls: { refresh: string; return: string }): Promise<{ url: string; expiresAt: Date }> {
    return this.ask(async () => {
      const link = await this.stripe.accountLinks.create({ account, type: 'account_onboarding', refresh_url: urls.refresh, return_url: urls.return });
      return { url: link.url, expiresAt: new Date(link.expires_at * 1000) };
    });
  }

  openSession(request: SessionRequest): Promise<SessionFacts> {
    const { account, key, amountCents, title, email, successUrl, cancelUrl, expiresAt, ids } = request;
    return this.ask(async () => {
      const session = await this.stripe.checkout.sessions.create(
        {
          mode: 'payment',
          allowed_payment_method_types: ['us_bank_account'],
          line_items: [{ quantity: 1, price_data: { currency: 'usd', unit_amount: amountCents, product_data: { name: title } } }],
          client_reference_id: ids.payment_id,
          customer_email: email,
          metadata: ids,
          payment_intent_data: { description: title, metadata: ids },
          success_url: successUrl,
          cancel_url: cancelUrl,
          expires_at: Math.floor(expiresAt.getTime() / 1000),
        },
        { stripeAccount: account, idempotencyKey: key },
      );
      return sessionFacts(session);
    });
  }

  /** A session that an unanswered call may have made, by our id in its metadata (sessions can't be searched, only listed). */
  findSession(account: string, attemptId: string, since: Date): Promise<SessionFacts | undefined> {
    return this.ask(async () => {
      for await (const session of this.stripe.checkout.sessions.list({ created: { gte: seconds(since) }, limit: 100 }, { stripeAccount: account })) {
        if (session.metadata?.['attempt_id'] === attemptId) return sessionFacts(session);
      }
      return undefined;
    });
  }

  session(account: string, id: string): Promise<SessionFacts> {
    return this.ask(async () => sessionFacts(await this.stripe.checkout.sessions.retrieve(id, undefined, { stripeAccount: account })));
  }

  expireSession(account: string, id: string): Promise<SessionFacts> {
    return this.ask(async () => sessionFacts(await this.stripe.checkout.sessions.expire(id, undefined, { stripeAccount: account })));
  }

  /** All that Stripe knows about one payment now, whatever event made us ask. */
  payment(account: string, intentId: string): Promise<PaymentFacts> {
    const on = { stripeAccount: account };
    return this.ask(async () => {
      const intent = await this.stripe.paymentIntents.retrieve(intentId, { expand: ['latest_charge.balance_transaction'] }, on);
      if (intent.status !== 'succeeded') return paymentFacts(intent, [], []);
      const [refunds, disputes] = await Promise.all([
        this.stripe.refunds.list({ payment_intent: intentId, limit: 100 }, on),
        this.stripe.disputes.list({ payment_intent: intentId, limit: 100 }, on),
      ]);
      return paymentFacts(intent, refunds.data, disputes.data);
    });
  }

  /** Events of an account since an instant, oldest first: what a lost webhook would have told. */
  news(account: string, since: Date): Promise<StripeNews[]> {
    return this.ask(async () => {
      const found: StripeNews[] = [];
      const params = { created: { gte: seconds(since) }, limit: 100, ...(NEWS ? { types: NEWS } : {}) };
      for await (const event of this.stripe.events.list(params, { stripeAccount: account })) found.push(newsOf(event, account));
      return found.reverse();
    });
  }

  private async ask<T>(call: () => Promise<T>): Promise<T> {
    try {
      return await call();
    } catch (error) {
      throw error instanceof Stripe.errors.StripeError ? new StripeTrouble(troubleOf(error), error) : error;
    }
  }
}

const seconds = (instant: Date) => Math.floor(instant.getTime() / 1000) - CLOCK_SLACK_SECONDS;
// Stripe's types allow states that it may add later; what isn't known here counts as still open
const ENDED_SESSIONS = ['complete', 'expired'] as const;
const MOVED_INTENTS = ['succeeded', 'processing', 'canceled'] as const;
const idOf = (value: string | { id: string } | null | undefined): string | null => (typeof value === 'string' ? value : (value?.id ?? null));

function newsOf(event: Stripe.Event, account: string | undefined): StripeNews {
  const object = event.data.object as { id?: unknown; payment_intent?: string | { id: string } | null; metadata?: Record<string, string> | null };
  return {
    id: event.id,
    // an event without an account is the platform's own
    account: event.account ?? account ?? '',
    type: event.type,
    objectId: typeof object.id === 'string' ? object.id : '',
    paymentIntent: event.type.startsWith('payment_intent.') ? (typeof object.id === 'string' ? object.id : null) : idOf(object.payment_intent),
    createdAt: new Date(event.created * 1000),
  };
}

const accountFacts = (account: Stripe.Account): AccountFacts => ({
  id: account.id,
  chargesEnabled: account.charges_enabled,
  payoutsEnabled: account.payouts_enabled,
  detailsSubmitted: account.details_submitted,
});

const sessionFacts = (session: Stripe.Checkout.Session): SessionFacts => ({
  id: session.id,
  status: ENDED_SESSIONS.find((known) => known === session.status) ?? 'open',
  url: session.url,
  expiresAt: new Date(session.expires_at * 1000),
  intentId: idOf(session.payment_intent),
  paymentId: session.metadata?.['payment_id'] ?? null,
});

function paymentFacts(intent: Stripe.PaymentIntent, refunds: Stripe.Refund[], disputes: Stripe.Dispute[]): PaymentFacts {
  const charge = typeof intent.latest_charge === 'object' ? intent.latest_charge : null;
  const balance = typeof charge?.balance_transaction === 'object' ? charge.balance_transaction : null;
  return {
    intentId: intent.id,
    paymentId: intent.metadata['payment_id'] ?? null,
    status: MOVED_INTENTS.find((known) => known === intent.status) ?? 'unpaid',
    attempted: intent.last_payment_error !== null,
    receivedCents: intent.amount_received,
    feeCents: balance?.fee ?? null,
    failure: intent.last_payment_error?.message ?? null,
    failureCode: intent.last_payment_error?.code ?? null,
    refunds: refunds.map(({ id, amount, status }) => ({ id, amountCents: amount, failed: status === 'failed' || status === 'canceled' })),
    disputes: disputes.map(({ id, amount, status, balance_transactions, reason }) => ({
      id,
      amountCents: amount,
      outcome: status === 'won' ? 'won' : status === 'lost' ? 'lost' : 'open',
      // an inquiry moves no money; it has no line on the balance
      withdrawn: balance_transactions.length > 0,
      feesCents: balance_transactions.map(({ fee }) => fee),
      reason,
    })),
  };
}
