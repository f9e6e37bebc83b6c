import { newId } from '../ids.mjs';

/**
 * @typedef {import('stripe').Stripe.Checkout.Session} Session
 * @typedef {import('stripe').Stripe.LineItem} LineItem
 */

/**
 * @param {import('../types.d.ts').Act} act
 * @param {{ amount: number, currency: string, types: string[], allowed: string[] | null, excluded: string[], success_url: string, cancel_url: string | null,
 *   client_reference_id: string | null, customer_email: string | null, expires_at: number, locale: Session['locale'],
 *   metadata: Record<string, string>, submit_type: Session['submit_type'], options: Session['payment_method_options'],
 *   customer_creation: Session['customer_creation'], billing: Session['billing_address_collection'], submitText: string | null }} asked
 * @returns {Session}
 */
export function newSession(act, asked) {
  const id = newId('cs_test', 58);
  return {
    id,
    object: 'checkout.session',
    adaptive_pricing: { enabled: false },
    after_expiration: null,
    allow_promotion_codes: null,
    allowed_payment_method_types: asked.allowed,
    amount_subtotal: asked.amount,
    amount_total: asked.amount,
    automatic_tax: { enabled: false, liability: null, provider: null, status: null },
    billing_address_collection: asked.billing,
    cancel_url: asked.cancel_url,
    client_reference_id: asked.client_reference_id,
    client_secret: null,
    collected_information: null,
    consent: null,
    consent_collection: null,
    created: act.now,
    currency: asked.currency,
    currency_conversion: null,
    custom_fields: [],
    custom_text: customText(asked.submitText),
    customer: null,
    customer_account: null,
    customer_creation: asked.customer_creation,
    customer_details: asked.customer_email === null ? null : payer(asked.customer_email, null),
    customer_email: asked.customer_email,
    discounts: [],
    excluded_payment_method_types: asked.excluded,
    expires_at: asked.expires_at,
    integration_identifier: null,
    invoice: null,
    invoice_creation: null,
    livemode: false,
    locale: asked.locale,
    managed_payments: null,
    metadata: asked.metadata,
    mode: 'payment',
    origin_context: null,
    payment_intent: null,
    payment_link: null,
    payment_method_collection: 'if_required',
    payment_method_configuration_details: null,
    payment_method_options: asked.options,
    payment_method_types: asked.types,
    payment_status: 'unpaid',
    permissions: null,
    phone_number_collection: { enabled: false },
    recovered_from: null,
    saved_payment_method_options: null,
    setup_intent: null,
    shipping_address_collection: null,
    shipping_cost: null,
    shipping_options: [],
    status: 'open',
    submit_type: asked.submit_type,
    subscription: null,
    success_url: asked.success_url,
    total_details: { amount_discount: 0, amount_shipping: 0, amount_tax: 0 },
    ui_mode: 'hosted_page',
    url: `${act.world.url}/pay/${id}`,
    wallet_options: null,
  };
}

/**
 * @param {string | null} submit
 * @returns {Session['custom_text']}
 */
const customText = (submit) => ({
  after_submit: null,
  shipping_address: null,
  submit: submit === null ? null : { message: submit },
  terms_of_service_acceptance: null,
});

/**
 * @param {string | null} email
 * @param {string | null} name
 * @returns {NonNullable<Session['customer_details']>}
 */
export const payer = (email, name) => ({
  address: null,
  business_name: null,
  email,
  individual_name: null,
  name,
  phone: null,
  tax_exempt: 'none',
  tax_ids: [],
});

/**
 * @param {import('../types.d.ts').Act} act
 * @param {{ name: string, currency: string, unit: number, quantity: number, tax_behavior: import('stripe').Stripe.Price.TaxBehavior | null }} asked cents
 * @returns {LineItem}
 */
export function newLineItem(act, { name, currency, unit, quantity, tax_behavior }) {
  return {
    id: newId('li'),
    object: 'item',
    adjustable_quantity: null,
    amount_discount: 0,
    amount_subtotal: unit * quantity,
    amount_tax: 0,
    amount_total: unit * quantity,
    currency,
    description: name,
    metadata: {},
    price: {
      id: newId('price'),
      object: 'price',
      active: false,
      billing_scheme: 'per_unit',
      created: act.now,
      currency,
      custom_unit_amount: null,
      livemode: false,
      lookup_key: null,
      metadata: {},
      nickname: null,
      product: newId('prod', 14),
      recurring: null,
      tax_behavior,
      tiers_mode: null,
      transform_quantity: null,
      type: 'one_time',
      unit_amount: unit,
      // The SDK turns the text on the wire into its Decimal.
      unit_amount_decimal: /** @type {import('stripe').Stripe.Decimal} */ (/** @type {unknown} */ (String(unit))),
    },
    quantity,
  };
}
