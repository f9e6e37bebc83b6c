import { newId } from '../ids.mjs';

/** Two days until money is available: common for card and debit payments in tests (from memory). */
const daysUntilAvailable = 2;

/**
 * Writes one line of the account's balance.
 * @param {import('../types.d.ts').Act} act
 * @param {{ amount: number, fees?: Array<{ amount: number, type: string, description: string }>, type: import('stripe').Stripe.BalanceTransaction.Type,
 *   category: string, source: string | null, currency: string, description?: string | null }} line amounts in cents, signed
 * @returns {import('stripe').Stripe.BalanceTransaction}
 */
export function postBalance(act, line) {
  const fees = line.fees ?? [];
  const fee = fees.reduce((sum, f) => sum + f.amount, 0);
  return act.tx.put('balance_transaction', act.account, {
    id: newId('txn'),
    object: 'balance_transaction',
    amount: line.amount,
    available_on: act.now + daysUntilAvailable * 86_400,
    balance_type: 'payments',
    created: act.now,
    currency: line.currency,
    description: line.description ?? null,
    exchange_rate: null,
    fee,
    fee_details: fees.map((f) => ({ ...f, application: null, currency: line.currency })),
    net: line.amount - fee,
    reporting_category: line.category,
    source: line.source,
    status: 'pending',
    type: line.type,
  });
}
