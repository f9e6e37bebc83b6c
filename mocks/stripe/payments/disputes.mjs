import { emit } from '../events.mjs';
import { refused } from '../errors.mjs';
import { disputeFee, failedDebitFee } from '../fees.mjs';
import { postBalance } from '../objects/balance-transaction.mjs';
import { newDispute } from '../objects/dispute.mjs';
import { bankReason } from './codes.mjs';

/**
 * @typedef {import('../types.d.ts').Act} Act
 * @typedef {import('stripe').Stripe.Charge} Charge
 * @typedef {import('stripe').Stripe.Dispute} Dispute
 */

/**
 * The payer, or the payer's bank, contests a settled payment: the money leaves the balance at once.
 * @param {Act} act
 * @param {string} intentId
 * @param {string} [reason]
 * @returns {Dispute}
 */
export function dispute(act, intentId, reason) {
  const charge = settledCharge(act, intentId);
  const usual = charge.payment_method_details?.type === 'card' ? 'fraudulent' : 'debit_not_authorized';
  return open(act, charge, reason ?? usual, disputeFee);
}

/**
 * The bank gives a debit back after it had settled. Stripe shows that as a dispute that is lost from the start.
 * @param {Act} act
 * @param {string} intentId
 * @param {string} [code] see payments/codes.mjs
 * @returns {Dispute}
 */
export function returnLate(act, intentId, code) {
  const charge = settledCharge(act, intentId);
  const why = bankReason(code);
  if (!why) throw refused(`There is no bank return called ${String(code)}`, { param: 'code' });
  if (charge.payment_method_details?.type === 'card') throw refused('Only a bank debit can be returned.');
  return close(act, open(act, charge, why.reason, failedDebitFee).id, 'lost');
}

/**
 * @param {Act} act
 * @param {string} disputeId
 * @param {'won' | 'lost'} status a won dispute puts the money back, its fee stays
 * @returns {Dispute}
 */
export function close(act, disputeId, status) {
  const before = act.tx.find('dispute', disputeId, act.account);
  if (!before || before.status === 'won' || before.status === 'lost') {
    throw refused(`Dispute ${disputeId} is not open; its status is ${before?.status ?? 'unknown'}`);
  }
  act.tx.change('dispute', disputeId, { status });
  if (status === 'won') {
    const back = postBalance(act, {
      amount: before.amount,
      category: 'dispute_reversal',
      currency: before.currency,
      source: disputeId,
      type: 'adjustment',
    });
    const reinstated = act.tx.change('dispute', disputeId, {
      balance_transactions: [...before.balance_transactions, back],
    });
    emit(act, 'charge.dispute.funds_reinstated', reinstated);
  }
  const closed = act.tx.change('dispute', disputeId, {});
  emit(act, 'charge.dispute.closed', closed);
  return closed;
}

/**
 * @param {Act} act
 * @param {Charge} charge
 * @param {string} reason
 * @param {number} fee cents
 */
function open(act, charge, reason, fee) {
  const fresh = newDispute(act, charge, reason);
  const line = postBalance(act, {
    amount: -fresh.amount,
    category: 'dispute',
    currency: charge.currency,
    description: `Chargeback withdrawal for ${charge.id}`,
    fees: [{ amount: fee, description: 'Dispute fee', type: 'stripe_fee' }],
    source: fresh.id,
    type: 'adjustment',
  });
  const made = act.tx.put('dispute', act.account, { ...fresh, balance_transactions: [line] });
  act.tx.change('charge', charge.id, { disputed: true });
  emit(act, 'charge.dispute.created', made);
  emit(act, 'charge.dispute.funds_withdrawn', made);
  return made;
}

/**
 * @param {Act} act
 * @param {string} intentId
 */
function settledCharge(act, intentId) {
  const intent = act.tx.find('payment_intent', intentId, act.account);
  const charge =
    typeof intent?.latest_charge === 'string' ? act.tx.find('charge', intent.latest_charge, act.account) : undefined;
  if (charge?.status !== 'succeeded' || charge.disputed)
    throw refused(`Payment ${intentId} has no settled charge that can be contested.`);
  const plan = act.tx.find('plan', intentId);
  if (plan) act.tx.remove('plan', intentId);
  return charge;
}
