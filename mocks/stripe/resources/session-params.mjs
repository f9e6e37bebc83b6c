import { address, email, hash, integer, listOf, metadata, oneOf, required, text } from '../params.mjs';

/** Eight digits of cents: the most that one payment may be (from memory). */
export const largest = 99_999_999;

const item = hash({
  price_data: required(
    hash({
      currency: required(text(3)),
      unit_amount: required(integer(0, largest)),
      tax_behavior: oneOf('exclusive', 'inclusive', 'unspecified'),
      product_data: required(hash({ name: required(text(5000)), description: text(), metadata: metadata() })),
    }),
  ),
  quantity: required(integer(1, 999_999)),
});

const intentData = hash({
  application_fee_amount: integer(0, largest),
  capture_method: oneOf('automatic', 'automatic_async'),
  description: text(1000),
  metadata: metadata(),
  receipt_email: email(),
  statement_descriptor: text(22),
  statement_descriptor_suffix: text(22),
  transfer_group: text(),
});

const options = hash({
  us_bank_account: hash({
    financial_connections: hash({
      permissions: listOf(oneOf('balances', 'ownership', 'payment_method', 'transactions')),
      prefetch: listOf(oneOf('balances', 'ownership', 'transactions')),
    }),
    verification_method: oneOf('automatic', 'instant'),
  }),
  card: hash({ request_three_d_secure: oneOf('any', 'automatic', 'challenge') }),
});

/** What a session may be made from. */
export const sessionParams = {
  mode: required(oneOf('payment')),
  line_items: required(listOf(item)),
  allowed_payment_method_types: listOf(oneOf('card', 'us_bank_account')),
  excluded_payment_method_types: listOf(oneOf('card', 'us_bank_account')),
  payment_method_options: options,
  payment_intent_data: intentData,
  success_url: required(address()),
  cancel_url: address(),
  client_reference_id: text(200),
  customer_email: email(),
  customer_creation: oneOf('always', 'if_required'),
  billing_address_collection: oneOf('auto', 'required'),
  custom_text: hash({ submit: hash({ message: required(text(1200)) }) }),
  expires_at: integer(0),
  locale: text(10),
  metadata: metadata(),
  submit_type: oneOf('auto', 'book', 'donate', 'pay'),
  ui_mode: oneOf('hosted_page'),
};
