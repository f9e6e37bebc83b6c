import { emit } from '../events.mjs';
import { refused } from '../errors.mjs';
import { failedDebitFee, processingFee } from '../fees.mjs';
import { newId } from '../ids.mjs';
import { postBalance } from '../objects/balance-transaction.mjs';
import { schedule } from '../plans.mjs';
import { bankReason } from './codes.mjs';

/**
 * @typedef {import('../types.d.ts').Act} Act
 * @typedef {import('stripe').Stripe.Charge} Charge
 * @typedef {import('stripe').Stripe.PaymentIntent} PaymentIntent
 */

/**
 * A bank debit that was under way has arrived.
 * @param {Act} act
 * @param {string} intentId
 */
export function settle(act, intentId) {
  const { intent, charge } = underWay(act, intentId);
  const plan = act.tx.find('plan', intentId);
  act.tx.remove('plan', intentId);
  const settled = collect(act, charge);
  emit(act, 'charge.succeeded', settled);
  emit(act, 'payment_intent.succeeded', paid(act, intent, settled.id));
  const session = sessionOf(act, intentId);
  if (session) {
    emit(
      act,
      'checkout.session.async_payment_succeeded',
      act.tx.change('checkout.session', session.id, { payment_status: 'paid' }),
    );
  }
  if (plan?.then)
    schedule(act, {
      id: intentId,
      step: plan.then.step,
      after: plan.then.after,
      ...(plan.code ? { code: plan.code } : {}),
    });
}

/**
 * A bank debit that was under way came back unpaid.
 * @param {Act} act
 * @param {string} intentId
 * @param {string} [code] see payments/codes.mjs
 */
export function fail(act, intentId, code) {
  const { intent, charge } = underWay(act, intentId);
  const why = bankReason(code);
  if (!why) throw refused(`There is no bank failure called ${String(code)}`, { param: 'code' });
  act.tx.remove('plan', intentId);
  const failed = act.tx.change('charge', charge.id, {
    amount_captured: 0,
    captured: false,
    failure_code: why.code,
    failure_message: why.message,
    status: 'failed',
  });
  postBalance(act, {
    amount: -failedDebitFee,
    category: 'fee',
    currency: intent.currency,
    description: 'Failed bank debit',
    source: null,
    type: 'stripe_fee',
  });
  const unpaid = act.tx.change('payment_intent', intentId, {
    last_payment_error: paymentError(act, charge, why.code, why.message),
    payment_method: null,
    status: 'requires_payment_method',
  });
  emit(act, 'charge.failed', failed);
  emit(act, 'payment_intent.payment_failed', unpaid);
  const session = sessionOf(act, intentId);
  if (session) emit(act, 'checkout.session.async_payment_failed', session);
}

/**
 * Puts a charge's money on the account's balance: less Stripe's fee, and less the platform's if it takes one.
 * @param {Act} act
 * @param {Charge} charge
 * @returns {Charge}
 */
export function collect(act, charge) {
  const method = charge.payment_method_details?.type === 'card' ? 'card' : 'us_bank_account';
  const applicationFee = charge.application_fee_amount ?? 0;
  const line = postBalance(act, {
    amount: charge.amount,
    category: 'charge',
    currency: charge.currency,
    description: charge.description,
    fees: [
      { amount: processingFee(method, charge.amount), description: 'Stripe processing fees', type: 'stripe_fee' },
      ...(applicationFee > 0
        ? [{ amount: applicationFee, description: 'Application fee', type: 'application_fee' }]
        : []),
    ],
    source: charge.id,
    type: method === 'card' ? 'charge' : 'payment',
  });
  return act.tx.change('charge', charge.id, {
    ...(applicationFee > 0
      ? { application: act.world.application, application_fee: takeFee(act, charge, applicationFee) }
      : {}),
    balance_transaction: line.id,
    paid: true,
    receipt_url: `${act.world.url}/receipt/${charge.id}`,
    status: 'succeeded',
  });
}

/**
 * @param {Act} act
 * @param {PaymentIntent} intent
 * @param {string} chargeId
 */
export const paid = (act, intent, chargeId) =>
  act.tx.change('payment_intent', intent.id, {
    amount_received: intent.amount,
    last_payment_error: null,
    latest_charge: chargeId,
    status: 'succeeded',
  });

/**
 * @param {Act} act
 * @param {Charge} charge
 * @param {import('stripe').Stripe.PaymentIntent.LastPaymentError.Code} code
 * @param {string} message
 * @param {string} [declineCode]
 * @returns {NonNullable<PaymentIntent['last_payment_error']>}
 */
export function paymentError(act, charge, code, message, declineCode) {
  const method =
    typeof charge.payment_method === 'string' ? act.tx.find('payment_method', charge.payment_method) : undefined;
  return {
    charge: charge.id,
    code,
    ...(declineCode ? { decline_code: declineCode } : {}),
    doc_url: `https://stripe.com/docs/error-codes/${code.replaceAll('_', '-')}`,
    message,
    ...(method ? { payment_method: method } : {}),
    type: method?.type === 'card' ? 'card_error' : 'invalid_request_error',
  };
}

/**
 * @param {Act} act
 * @param {string} intentId
 */
export const sessionOf = (act, intentId) =>
  act.tx.all('checkout.session', act.account).find(({ value }) => value.payment_intent === intentId)?.value;

/**
 * @param {Act} act
 * @param {string} intentId
 */
function underWay(act, intentId) {
  const intent = act.tx.find('payment_intent', intentId, act.account);
  const charge =
    typeof intent?.latest_charge === 'string' ? act.tx.find('charge', intent.latest_charge, act.account) : undefined;
  if (intent?.status !== 'processing' || charge?.status !== 'pending') {
    throw refused(`Payment ${intentId} is not a bank debit under way; its status is ${intent?.status ?? 'unknown'}`);
  }
  return { intent, charge };
}

/**
 * The platform's part of a direct charge, on the platform's own account.
 * @param {Act} act
 * @param {Charge} charge
 * @param {number} amount cents
 */
function takeFee(act, charge, amount) {
  const own = { ...act, account: act.world.platform };
  const id = newId('fee');
  const line = postBalance(own, {
    amount,
    category: 'platform_earning',
    currency: charge.currency,
    source: id,
    type: 'application_fee',
  });
  const fee = act.tx.put('application_fee', own.account, {
    id,
    object: 'application_fee',
    account: act.account,
    amount,
    amount_refunded: 0,
    application: act.world.application,
    balance_transaction: line.id,
    charge: charge.id,
    created: act.now,
    currency: charge.currency,
    fee_source: null,
    livemode: false,
    originating_transaction: null,
    refunded: false,
    refunds: { object: 'list', data: [], has_more: false, url: `/v1/application_fees/${id}/refunds` },
  });
  emit(own, 'application_fee.created', fee);
  return id;
}
