import { emit } from '../events.mjs';
import { refused } from '../errors.mjs';
import { newId } from '../ids.mjs';
import { postBalance } from '../objects/balance-transaction.mjs';

/**
 * Pays out all that stands on an account's balance, as the daily payout would; its lines are found by `payout` again.
 * @param {import('../types.d.ts').Act} act
 * @returns {import('stripe').Stripe.Payout}
 */
export function payOut(act) {
  const lines = act.tx
    .all('balance_transaction', act.account)
    .map((r) => r.value)
    .filter((l) => l.type !== 'payout' && !act.tx.find('paid_out', l.id));
  const amount = lines.reduce((sum, line) => sum + line.net, 0);
  if (amount <= 0) throw refused('There is nothing on the balance to pay out.');
  const id = newId('po');
  const line = postBalance(act, {
    amount: -amount,
    category: 'payout',
    currency: 'usd',
    description: 'STRIPE PAYOUT',
    source: id,
    type: 'payout',
  });
  for (const paid of lines) act.tx.put('paid_out', act.account, { id: paid.id, payout: id });
  const payout = act.tx.put('payout', act.account, {
    id,
    object: 'payout',
    amount,
    application_fee: null,
    application_fee_amount: null,
    arrival_date: act.now + 86_400,
    automatic: true,
    balance_transaction: line.id,
    created: act.now,
    currency: 'usd',
    description: 'STRIPE PAYOUT',
    destination: null,
    failure_balance_transaction: null,
    failure_code: null,
    failure_message: null,
    livemode: false,
    metadata: {},
    method: 'standard',
    original_payout: null,
    payout_method: null,
    reconciliation_status: 'completed',
    reversed_by: null,
    source_type: 'card',
    statement_descriptor: null,
    status: 'in_transit',
    trace_id: null,
    type: 'bank_account',
  });
  emit(act, 'payout.created', payout);
  const arrived = act.tx.change('payout', id, { status: 'paid' });
  emit(act, 'payout.paid', arrived);
  return arrived;
}
