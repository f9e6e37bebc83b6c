import { newId } from '../ids.mjs';

/**
 * @typedef {import('stripe').Stripe.Charge} Charge
 * @typedef {import('stripe').Stripe.PaymentMethod} PaymentMethod
 */

/**
 * @param {import('../types.d.ts').Act} act
 * @param {import('stripe').Stripe.PaymentIntent} intent
 * @param {PaymentMethod} method
 * @param {{ status: 'pending' | 'succeeded' | 'failed' }} state
 * @returns {Charge}
 */
export function newCharge(act, intent, method, { status }) {
  const id = newId(method.type === 'card' ? 'ch' : 'py');
  return {
    id,
    object: 'charge',
    amount: intent.amount,
    amount_captured: status === 'failed' ? 0 : intent.amount,
    amount_refunded: 0,
    application: null,
    application_fee: null,
    application_fee_amount: intent.application_fee_amount,
    balance_transaction: null,
    billing_details: method.billing_details,
    calculated_statement_descriptor: intent.statement_descriptor,
    captured: status !== 'failed',
    created: act.now,
    currency: intent.currency,
    customer: null,
    description: intent.description,
    disputed: false,
    failure_balance_transaction: null,
    failure_code: null,
    failure_message: null,
    fraud_details: {},
    livemode: false,
    metadata: intent.metadata,
    on_behalf_of: null,
    outcome: status === 'failed' ? declined : authorized,
    paid: status === 'succeeded',
    payment_intent: intent.id,
    payment_method: method.id,
    payment_method_details: details(method, intent),
    radar_options: {},
    receipt_email: intent.receipt_email,
    receipt_number: null,
    receipt_url: status === 'succeeded' ? `${act.world.url}/receipt/${id}` : null,
    refunded: false,
    review: null,
    shipping: null,
    source: null,
    source_transfer: null,
    statement_descriptor: intent.statement_descriptor,
    statement_descriptor_suffix: intent.statement_descriptor_suffix,
    status,
    transfer_data: null,
    transfer_group: intent.transfer_group,
  };
}

/** @type {NonNullable<Charge['outcome']>} */
const authorized = {
  advice_code: null,
  network_advice_code: null,
  network_decline_code: null,
  network_status: 'approved_by_network',
  reason: null,
  risk_level: 'normal',
  seller_message: 'Payment complete.',
  type: 'authorized',
};

/** @type {NonNullable<Charge['outcome']>} */
const declined = {
  advice_code: 'try_again_later',
  network_advice_code: null,
  network_decline_code: null,
  network_status: 'declined_by_network',
  reason: 'generic_decline',
  risk_level: 'normal',
  seller_message: 'The bank did not return any further details with this decline.',
  type: 'issuer_declined',
};

/**
 * @param {PaymentMethod} method
 * @param {import('stripe').Stripe.PaymentIntent} intent
 * @returns {NonNullable<Charge['payment_method_details']>}
 */
function details(method, intent) {
  if (method.us_bank_account) {
    const { account_holder_type, account_type, bank_name, fingerprint, last4, routing_number } = method.us_bank_account;
    return {
      type: 'us_bank_account',
      us_bank_account: {
        account_holder_type,
        account_type,
        bank_name,
        fingerprint,
        last4,
        payment_reference: null,
        routing_number,
      },
    };
  }
  const card = method.card;
  if (!card) throw new Error(`Payment method ${method.id} is neither a bank account nor a card`);
  return {
    type: 'card',
    card: {
      amount_authorized: intent.amount,
      authorization_code: null,
      brand: card.brand,
      checks: card.checks,
      country: card.country,
      electronic_commerce_indicator: null,
      exp_month: card.exp_month,
      exp_year: card.exp_year,
      fingerprint: card.fingerprint ?? null,
      funding: card.funding,
      installments: null,
      last4: card.last4,
      mandate: null,
      network: 'visa',
      network_transaction_id: null,
      regulated_status: 'unregulated',
      three_d_secure: null,
      transaction_link_id: null,
      wallet: null,
    },
  };
}
