import { newId, randomText } from '../ids.mjs';

/**
 * A PaymentIntent as Checkout makes it when the payer submits.
 * @param {import('../types.d.ts').Act} act
 * @param {import('stripe').Stripe.Checkout.Session} session
 * @param {import('../types.d.ts').SessionDetail['intent']} data
 * @returns {import('stripe').Stripe.PaymentIntent}
 */
export function newPaymentIntent(act, session, data) {
  const id = newId('pi');
  return {
    id,
    object: 'payment_intent',
    allowed_payment_method_types: null,
    amount: session.amount_total ?? 0,
    amount_capturable: 0,
    amount_details: { tip: {} },
    amount_received: 0,
    application: null,
    application_fee_amount: data.application_fee_amount,
    automatic_payment_methods: null,
    canceled_at: null,
    cancellation_reason: null,
    capture_method: 'automatic_async',
    client_secret: `${id}_secret_${randomText(25)}`,
    confirmation_method: 'automatic',
    created: act.now,
    currency: session.currency ?? 'usd',
    customer: null,
    customer_account: null,
    description: data.description,
    excluded_payment_method_types: null,
    last_payment_error: null,
    latest_charge: null,
    livemode: false,
    managed_payments: null,
    metadata: data.metadata,
    next_action: null,
    on_behalf_of: null,
    payment_method: null,
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_method_types: session.payment_method_types,
    payment_record: null,
    processing: null,
    receipt_email: data.receipt_email,
    review: null,
    setup_future_usage: null,
    shipping: null,
    source: null,
    statement_descriptor: data.statement_descriptor,
    statement_descriptor_suffix: data.statement_descriptor_suffix,
    status: 'requires_payment_method',
    transfer_data: null,
    transfer_group: data.transfer_group,
  };
}
