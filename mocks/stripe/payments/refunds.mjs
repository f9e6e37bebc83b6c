import { emit } from '../events.mjs';
import { refused } from '../errors.mjs';
import { postBalance } from '../objects/balance-transaction.mjs';
import { newRefund } from '../objects/refund.mjs';
import { schedule } from '../plans.mjs';

/**
 * @typedef {import('../types.d.ts').Act} Act
 * @typedef {import('stripe').Stripe.Charge} Charge
 * @typedef {import('stripe').Stripe.Refund} Refund
 */

/**
 * Gives back all that is left of a charge, or a part.
 * @param {Act} act
 * @param {Charge} charge
 * @param {{ amount: number | undefined, reason: Refund['reason'], metadata: Record<string, string> }} asked cents
 * @returns {Refund}
 */
export function refund(act, charge, asked) {
  const left = charge.amount - charge.amount_refunded;
  if (charge.status !== 'succeeded')
    throw refused(`Charge ${charge.id} has not succeeded and can't be refunded.`, { code: 'charge_not_refundable' });
  if (charge.disputed)
    throw refused(`Charge ${charge.id} has been charged back; cannot issue a refund.`, { code: 'charge_disputed' });
  if (left === 0) throw refused(`Charge ${charge.id} has already been refunded.`, { code: 'charge_already_refunded' });
  const amount = asked.amount ?? left;
  if (amount > left) {
    throw refused(`Refund amount (${dollars(amount)}) is greater than unrefunded amount on charge (${dollars(left)})`, {
      param: 'amount',
    });
  }
  const fresh = newRefund(act, charge, { amount, reason: asked.reason, metadata: asked.metadata });
  const card = fresh.status === 'succeeded';
  const line = postBalance(act, {
    amount: -amount,
    category: 'refund',
    currency: charge.currency,
    source: fresh.id,
    type: card ? 'refund' : 'payment_refund',
  });
  const made = act.tx.put('refund', act.account, { ...fresh, balance_transaction: line.id });
  const after = act.tx.change('charge', charge.id, {
    amount_refunded: charge.amount_refunded + amount,
    refunded: charge.amount_refunded + amount === charge.amount,
  });
  emit(act, 'refund.created', made);
  emit(act, 'charge.refunded', after, { amount_refunded: charge.amount_refunded, refunded: charge.refunded });
  if (!card) schedule(act, { id: made.id, step: 'refund', after: act.world.settings().settle_after_ms });
  return made;
}

/**
 * The payer's bank took the refund, or couldn't.
 * @param {Act} act
 * @param {string} refundId
 * @param {'succeeded' | 'failed'} status
 * @returns {Refund}
 */
export function finishRefund(act, refundId, status) {
  const before = act.tx.find('refund', refundId, act.account);
  if (before?.status !== 'pending')
    throw refused(`Refund ${refundId} is not pending; its status is ${before?.status ?? 'unknown'}`);
  act.tx.remove('plan', refundId);
  if (status === 'succeeded') {
    const done = act.tx.change('refund', refundId, { status });
    emit(act, 'refund.updated', done, { status: 'pending' });
    return done;
  }
  const line = postBalance(act, {
    amount: before.amount,
    category: 'refund_failure',
    currency: before.currency,
    source: refundId,
    type: 'refund_failure',
  });
  const failed = act.tx.change('refund', refundId, {
    failure_balance_transaction: line.id,
    failure_reason: 'declined',
    status,
  });
  const charge = typeof before.charge === 'string' ? act.tx.find('charge', before.charge) : undefined;
  if (charge)
    act.tx.change('charge', charge.id, { amount_refunded: charge.amount_refunded - before.amount, refunded: false });
  emit(act, 'refund.updated', failed, { status: 'pending' });
  emit(act, 'refund.failed', failed);
  return failed;
}

/** @param {number} cents */
const dollars = (cents) =>
  `$${Math.floor(cents / 100).toLocaleString('en-US')}.${String(cents % 100).padStart(2, '0')}`;
