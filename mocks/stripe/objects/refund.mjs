import { newId } from '../ids.mjs';

/**
 * @param {import('../types.d.ts').Act} act
 * @param {import('stripe').Stripe.Charge} charge
 * @param {{ amount: number, reason: import('stripe').Stripe.Refund.Reason | null, metadata: Record<string, string> }} asked
 * @returns {import('stripe').Stripe.Refund}
 */
export function newRefund(act, charge, { amount, reason, metadata }) {
  const card = charge.payment_method_details?.type === 'card';
  return {
    id: newId('re'),
    object: 'refund',
    amount,
    balance_transaction: null,
    charge: charge.id,
    created: act.now,
    currency: charge.currency,
    customer: null,
    customer_account: null,
    destination_details: card
      ? {
          card: { reference_status: 'pending', reference_type: 'acquirer_reference_number', type: 'refund' },
          type: 'card',
        }
      : { us_bank_transfer: { reference: null, reference_status: null }, type: 'us_bank_transfer' },
    metadata,
    payment_intent: charge.payment_intent,
    payment_method: charge.payment_method,
    reason,
    receipt_number: null,
    source_transfer_reversal: null,
    // A card's refund is taken as done at once; a bank's is under way for days.
    status: card ? 'succeeded' : 'pending',
    transfer_reversal: null,
  };
}
