import { emit } from '../events.mjs';
import { refused } from '../errors.mjs';
import { newCharge } from '../objects/charge.mjs';
import { newPaymentIntent } from '../objects/payment-intent.mjs';
import { newPaymentMethod } from '../objects/payment-method.mjs';
import { payer } from '../objects/session.mjs';
import { schedule } from '../plans.mjs';
import { collect, paid, paymentError } from './settlement.mjs';

/**
 * @typedef {import('../types.d.ts').Act} Act
 * @typedef {import('../types.d.ts').Outcome} Outcome
 * @typedef {import('stripe').Stripe.Checkout.Session} Session
 * @typedef {import('stripe').Stripe.PaymentIntent} PaymentIntent
 * @typedef {{ outcome: Outcome, email?: string | null, name?: string | null, code?: string | undefined, after?: number | null | undefined }} Choice
 *   `after`: milliseconds until the debit settles, null only when told to; the setting when unsaid
 */

/** @type {Outcome[]} */
export const outcomes = ['settles', 'fails', 'returned', 'disputed', 'card_paid', 'card_declined', 'card_disputed'];

/** The last digits of the test numbers that Stripe publishes for these results (from memory). */
const last4 = {
  settles: '6789',
  fails: '2227',
  returned: '6789',
  disputed: '5559',
  card_paid: '4242',
  card_declined: '0002',
  card_disputed: '0259',
};

/** @param {Outcome} outcome */
export const methodOf = (outcome) => (outcome.startsWith('card') ? 'card' : 'us_bank_account');

/**
 * The payer submits the hosted page.
 * @param {Act} act
 * @param {string} sessionId
 * @param {Choice} choice
 * @returns {Session} still open when the card was declined
 */
export function pay(act, sessionId, choice) {
  const session = openSession(act, sessionId);
  const type = methodOf(choice.outcome);
  if (!session.payment_method_types.includes(type))
    throw refused(`This Checkout Session doesn't take ${type === 'card' ? 'cards' : 'bank debits'}.`);
  const who = { email: choice.email || session.customer_email, name: choice.name || null };
  const method = act.tx.put('payment_method', act.account, newPaymentMethod(act, type, who, last4[choice.outcome]));
  const intent = intentOf(act, session);
  if (choice.outcome === 'card_declined') return decline(act, session, intent, method);
  const charge = act.tx.put(
    'charge',
    act.account,
    newCharge(act, intent, method, { status: type === 'card' ? 'succeeded' : 'pending' }),
  );
  const complete = {
    customer_details: payer(who.email, who.name),
    payment_intent: intent.id,
    status: /** @type {const} */ ('complete'),
    url: null,
  };
  act.tx.remove('plan', session.id);
  if (type === 'card')
    return payByCard(
      act,
      session,
      act.tx.change('payment_intent', intent.id, { payment_method: method.id }),
      charge,
      complete,
      choice,
    );
  const processing = act.tx.change('payment_intent', intent.id, {
    last_payment_error: null,
    latest_charge: charge.id,
    payment_method: method.id,
    status: 'processing',
  });
  emit(act, 'charge.pending', charge);
  emit(act, 'payment_intent.processing', processing);
  const done = act.tx.change('checkout.session', session.id, complete);
  emit(act, 'checkout.session.completed', done);
  planDebit(act, intent.id, choice);
  return done;
}

/**
 * @param {Act} act
 * @param {string} intentId
 * @param {Choice} choice
 */
function planDebit(act, intentId, { outcome, after, code }) {
  const { settle_after_ms: usual, return_after_ms: later } = act.world.settings();
  const step = outcome === 'returned' ? 'return' : outcome === 'disputed' ? 'dispute' : undefined;
  schedule(act, {
    id: intentId,
    step: outcome === 'fails' ? 'fail' : 'settle',
    after: after === undefined ? usual : after,
    ...(code ? { code } : {}),
    ...(step ? { then: { step, after: later } } : {}),
  });
}

/**
 * @param {Act} act
 * @param {Session} session
 * @param {PaymentIntent} intent
 * @param {import('stripe').Stripe.Charge} charge
 * @param {Partial<Session>} complete
 * @param {Choice} choice
 */
function payByCard(act, session, intent, charge, complete, choice) {
  const collected = collect(act, charge);
  emit(act, 'charge.succeeded', collected);
  emit(act, 'payment_intent.succeeded', paid(act, intent, charge.id));
  const done = act.tx.change('checkout.session', session.id, { ...complete, payment_status: 'paid' });
  emit(act, 'checkout.session.completed', done);
  if (choice.outcome === 'card_disputed')
    schedule(act, { id: intent.id, step: 'dispute', after: act.world.settings().return_after_ms });
  return done;
}

/**
 * @param {Act} act
 * @param {Session} session
 * @param {PaymentIntent} intent
 * @param {import('stripe').Stripe.PaymentMethod} method
 */
function decline(act, session, intent, method) {
  const message = 'Your card was declined.';
  const charge = act.tx.put('charge', act.account, {
    ...newCharge(act, intent, method, { status: 'failed' }),
    failure_code: 'card_declined',
    failure_message: message,
  });
  const unpaid = act.tx.change('payment_intent', intent.id, {
    last_payment_error: paymentError(act, charge, 'card_declined', message, 'generic_decline'),
    latest_charge: charge.id,
  });
  emit(act, 'charge.failed', charge);
  emit(act, 'payment_intent.payment_failed', unpaid);
  return act.tx.change('checkout.session', session.id, { payment_intent: intent.id });
}

/**
 * The session's PaymentIntent: made on the first try, the same on the next.
 * @param {Act} act
 * @param {Session} session
 */
function intentOf(act, session) {
  const before =
    typeof session.payment_intent === 'string' ? act.tx.find('payment_intent', session.payment_intent) : undefined;
  if (before) return before;
  const detail = act.tx.find('session_detail', session.id);
  if (!detail) throw new Error(`Session ${session.id} has lost its details`);
  const intent = act.tx.put('payment_intent', act.account, newPaymentIntent(act, session, detail.intent));
  emit(act, 'payment_intent.created', intent);
  return intent;
}

/**
 * @param {Act} act
 * @param {string} sessionId
 */
function openSession(act, sessionId) {
  const session = act.tx.find('checkout.session', sessionId, act.account);
  if (session?.status !== 'open' || session.expires_at <= act.now) {
    throw refused(
      `This Checkout Session can't be paid: it is ${session === undefined ? 'unknown' : session.status === 'open' ? 'expired' : session.status}.`,
    );
  }
  return session;
}

/**
 * The session can no longer be paid.
 * @param {Act} act
 * @param {string} sessionId
 */
export function expire(act, sessionId) {
  const session = act.tx.find('checkout.session', sessionId, act.account);
  if (session?.status !== 'open') {
    throw refused(
      `Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of \`${session?.status ?? 'unknown'}\`.`,
    );
  }
  act.tx.remove('plan', sessionId);
  const expired = act.tx.change('checkout.session', sessionId, { status: 'expired', url: null });
  const intent =
    typeof session.payment_intent === 'string' ? act.tx.find('payment_intent', session.payment_intent) : undefined;
  if (intent) {
    emit(
      act,
      'payment_intent.canceled',
      act.tx.change('payment_intent', intent.id, {
        canceled_at: act.now,
        cancellation_reason: 'expired',
        status: 'canceled',
      }),
    );
  }
  emit(act, 'checkout.session.expired', expired);
  return expired;
}
