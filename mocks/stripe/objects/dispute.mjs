import { newId } from '../ids.mjs';

const daysToAnswer = 21; // from memory

/** @type {import('stripe').Stripe.Dispute.Evidence} */
const noEvidence = {
  access_activity_log: null,
  billing_address: null,
  cancellation_policy: null,
  cancellation_policy_disclosure: null,
  cancellation_rebuttal: null,
  customer_communication: null,
  customer_email_address: null,
  customer_name: null,
  customer_purchase_ip: null,
  customer_signature: null,
  duplicate_charge_documentation: null,
  duplicate_charge_explanation: null,
  duplicate_charge_id: null,
  enhanced_evidence: {},
  product_description: null,
  receipt: null,
  refund_policy: null,
  refund_policy_disclosure: null,
  refund_refusal_explanation: null,
  service_date: null,
  service_documentation: null,
  shipping_address: null,
  shipping_carrier: null,
  shipping_date: null,
  shipping_documentation: null,
  shipping_tracking_number: null,
  uncategorized_file: null,
  uncategorized_text: null,
};

/**
 * @param {import('../types.d.ts').Act} act
 * @param {import('stripe').Stripe.Charge} charge
 * @param {string} reason
 * @returns {import('stripe').Stripe.Dispute}
 */
export function newDispute(act, charge, reason) {
  return {
    id: newId('dp'),
    object: 'dispute',
    amount: charge.amount - charge.amount_refunded,
    balance_transactions: [],
    charge: charge.id,
    created: act.now,
    currency: charge.currency,
    enhanced_eligibility_types: [],
    evidence: { ...noEvidence, customer_email_address: charge.billing_details.email },
    evidence_details: {
      due_by: act.now + daysToAnswer * 86_400,
      enhanced_eligibility: {},
      has_evidence: false,
      past_due: false,
      submission_count: 0,
      submission_method: 'not_submitted',
    },
    intended_submission_method: null,
    is_charge_refundable: false,
    livemode: false,
    metadata: {},
    payment_intent: charge.payment_intent,
    reason,
    status: 'needs_response',
  };
}
