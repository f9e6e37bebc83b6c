import { newId, randomText } from '../ids.mjs';

/** @typedef {import('stripe').Stripe.PaymentMethod} PaymentMethod */

/**
 * The payer's test account or test card. Numbers are the ones that Stripe publishes for tests.
 * @param {import('../types.d.ts').Act} act
 * @param {'us_bank_account' | 'card'} type
 * @param {{ email: string | null, name: string | null }} payer
 * @param {string} last4
 * @returns {PaymentMethod}
 */
export function newPaymentMethod(act, type, payer, last4) {
  return {
    id: newId('pm'),
    object: 'payment_method',
    allow_redisplay: 'limited',
    billing_details: billing(payer),
    created: act.now,
    customer: null,
    customer_account: null,
    livemode: false,
    metadata: {},
    type,
    ...(type === 'card' ? { card: card(last4) } : { us_bank_account: bankAccount(last4) }),
  };
}

/** @param {{ email: string | null, name: string | null }} payer */
const billing = (payer) => ({
  address: { city: null, country: null, line1: null, line2: null, postal_code: null, state: null },
  email: payer.email,
  name: payer.name,
  phone: null,
  tax_id: null,
});

/**
 * @param {string} last4
 * @returns {NonNullable<PaymentMethod['us_bank_account']>}
 */
const bankAccount = (last4) => ({
  account_holder_type: 'individual',
  account_type: 'checking',
  bank_name: 'STRIPE TEST BANK',
  financial_connections_account: null,
  fingerprint: randomText(16),
  last4,
  networks: { preferred: 'ach', supported: ['ach'] },
  routing_number: '110000000',
  status_details: {},
});

/**
 * @param {string} last4
 * @returns {NonNullable<PaymentMethod['card']>}
 */
const card = (last4) => ({
  brand: 'visa',
  checks: { address_line1_check: null, address_postal_code_check: null, cvc_check: 'pass' },
  country: 'US',
  display_brand: 'visa',
  exp_month: 12,
  exp_year: new Date().getFullYear() + 3,
  fingerprint: randomText(16),
  funding: 'credit',
  generated_from: null,
  last4,
  networks: { available: ['visa'], preferred: null },
  regulated_status: 'unregulated',
  three_d_secure_usage: { supported: true },
  wallet: null,
});
