import { invalid, missing, refused } from '../errors.mjs';
import { listPage, within } from '../lists.mjs';
import { newLineItem, newSession } from '../objects/session.mjs';
import { email, hash, metadata, oneOf, paging, range, readParams, required, text } from '../params.mjs';
import { expire } from '../payments/checkout.mjs';
import { schedule } from '../plans.mjs';
import { merged } from './merge.mjs';
import { largest, sessionParams } from './session-params.mjs';

/**
 * @typedef {import('../router.mjs').Call} Call
 * @typedef {import('stripe').Stripe.Checkout.Session} Session
 */

const smallest = 50; // cents: Stripe's minimum charge in US dollars (from memory)
const soonest = 30 * 60;
const latest = 24 * 60 * 60;

/** @param {Call} call */
export function createSession({ act, form }) {
  const asked = readParams(sessionParams, form);
  const currency = (asked.line_items[0]?.price_data.currency ?? 'usd').toLowerCase();
  const types = offered(act, asked.allowed_payment_method_types, asked.excluded_payment_method_types ?? []);
  const items = asked.line_items.map(({ price_data: p, quantity }) =>
    newLineItem(act, {
      name: p.product_data.name,
      currency: p.currency.toLowerCase(),
      unit: p.unit_amount,
      quantity,
      tax_behavior: p.tax_behavior ?? null,
    }),
  );
  const amount = items.reduce((sum, i) => sum + i.amount_total, 0);
  const fee = asked.payment_intent_data?.application_fee_amount ?? null;
  check(act, { items, currency, types, amount, fee, expires: asked.expires_at });
  const session = act.tx.put(
    'checkout.session',
    act.account,
    newSession(act, {
      amount,
      currency,
      types,
      allowed: asked.allowed_payment_method_types ?? null,
      excluded: asked.excluded_payment_method_types ?? [],
      success_url: asked.success_url,
      cancel_url: asked.cancel_url ?? null,
      client_reference_id: asked.client_reference_id ?? null,
      customer_email: asked.customer_email ?? null,
      expires_at: asked.expires_at ?? act.now + latest,
      locale: asked.locale ?? null,
      metadata: asked.metadata ?? {},
      submit_type: asked.submit_type ?? null,
      options: shownOptions(types, asked.payment_method_options),
      customer_creation: asked.customer_creation ?? 'if_required',
      billing: asked.billing_address_collection ?? null,
      submitText: asked.custom_text?.submit?.message ?? null,
    }),
  );
  const data = asked.payment_intent_data;
  act.tx.put('session_detail', act.account, {
    id: session.id,
    line_items: items,
    intent: {
      application_fee_amount: fee,
      description: data?.description ?? null,
      metadata: data?.metadata ?? {},
      receipt_email: data?.receipt_email ?? null,
      statement_descriptor: data?.statement_descriptor ?? null,
      statement_descriptor_suffix: data?.statement_descriptor_suffix ?? null,
      transfer_group: data?.transfer_group ?? null,
    },
  });
  schedule(act, { id: session.id, step: 'expire', after: session.expires_at * 1000 - act.world.nowMs() });
  return session;
}

/**
 * What can only be judged from the whole.
 * @param {import('../types.d.ts').Act} act
 * @param {{ items: import('stripe').Stripe.LineItem[], currency: string, types: string[], amount: number, fee: number | null, expires: number | undefined }} asked
 */
function check(act, { items, currency, types, amount, fee, expires }) {
  if (items.length === 0)
    throw invalid('Missing required param: line_items.', { code: 'parameter_missing', param: 'line_items' });
  if (items.some((i) => i.currency !== currency))
    throw invalid('All line items must have the same currency.', { param: 'line_items' });
  if (currency !== 'usd')
    throw invalid(`Invalid currency: ${currency}. This account takes US dollars only.`, {
      param: 'line_items[0][price_data][currency]',
    });
  if (amount < smallest) {
    throw invalid("The Checkout Session's total amount due must add up to at least $0.50 usd", {
      code: 'amount_too_small',
      param: 'line_items',
    });
  }
  if (amount > largest) {
    throw invalid("The Checkout Session's total amount due must be no more than $999,999.99 usd", {
      code: 'amount_too_large',
      param: 'line_items',
    });
  }
  if (fee !== null && fee > amount) {
    throw invalid('Your application fee cannot exceed the amount of the payment.', {
      param: 'payment_intent_data[application_fee_amount]',
    });
  }
  if (fee !== null && act.account === act.world.platform) {
    throw invalid(
      'Can only apply an application_fee_amount when the PaymentIntent is attempting a direct payment or a destination payment.',
      {
        param: 'payment_intent_data[application_fee_amount]',
      },
    );
  }
  if (expires !== undefined && expires < act.now + soonest) {
    throw invalid('The `expires_at` timestamp must be at least 30 minutes from Checkout Session creation.', {
      param: 'expires_at',
    });
  }
  if (expires !== undefined && expires > act.now + latest + 60) {
    throw invalid('The `expires_at` timestamp must be less than 24 hours from Checkout Session creation.', {
      param: 'expires_at',
    });
  }
  const account = act.tx.find('account', act.account);
  if (account && !account.charges_enabled)
    throw refused('Your account cannot currently make charges.', { code: 'account_invalid' });
  if (types.length === 0) {
    throw refused(
      'No valid payment method types for this Checkout Session. Please ensure that the account has an active capability for each.',
    );
  }
}

/**
 * Since API version 2026-10-28 a session takes what the account can take, narrowed by lists of allowed and excluded
 * types; the explicit `payment_method_types` is gone.
 * @param {import('../types.d.ts').Act} act
 * @param {string[] | undefined} allowed
 * @param {string[]} excluded
 */
function offered(act, allowed, excluded) {
  const account = act.tx.find('account', act.account);
  const can = (/** @type {'card_payments' | 'us_bank_account_ach_payments'} */ name) =>
    !account || account.capabilities?.[name] === 'active';
  const eligible = [
    ...(can('card_payments') ? ['card'] : []),
    ...(can('us_bank_account_ach_payments') ? ['us_bank_account'] : []),
  ];
  return eligible.filter((type) => (allowed === undefined || allowed.includes(type)) && !excluded.includes(type));
}

/**
 * @param {string[]} types
 * @param {{ us_bank_account?: { verification_method?: string | undefined } | undefined } | undefined} asked
 * @returns {Session['payment_method_options']}
 */
const shownOptions = (types, asked) => ({
  ...(types.includes('card') ? { card: { request_three_d_secure: /** @type {const} */ ('automatic') } } : {}),
  ...(types.includes('us_bank_account')
    ? {
        us_bank_account: {
          verification_method: asked?.us_bank_account?.verification_method === 'instant' ? 'instant' : 'automatic',
        },
      }
    : {}),
});

/** @param {Call} call */
export function retrieveSession({ act, params, form }) {
  readParams({}, form);
  return known(act, params['id'] ?? '');
}

/** @param {Call} call */
export function listSessions({ act, form, path }) {
  const { payment_intent, status, created, customer_details, ...page } = readParams(
    {
      ...paging,
      created: range(),
      payment_intent: text(255),
      status: oneOf('complete', 'expired', 'open'),
      customer_details: hash({ email: required(email()) }),
    },
    form,
  );
  return listPage(act, 'checkout.session', path, page, (s) => {
    const mail =
      customer_details === undefined ||
      s.customer_details?.email?.toLowerCase() === customer_details.email.toLowerCase();
    return (
      mail &&
      within(created, s.created) &&
      (payment_intent === undefined || s.payment_intent === payment_intent) &&
      (status === undefined || s.status === status)
    );
  });
}

/** @param {Call} call */
export function updateSession({ act, params, form }) {
  const asked = readParams({ metadata: metadata() }, form);
  const session = known(act, params['id'] ?? '');
  return asked.metadata
    ? act.tx.change('checkout.session', session.id, { metadata: merged(session.metadata, asked.metadata) })
    : session;
}

/** @param {Call} call */
export function expireSession({ act, params, form }) {
  readParams({}, form);
  return expire(act, known(act, params['id'] ?? '').id);
}

/** @param {Call} call */
export function listLineItems({ act, params, form, path }) {
  readParams(paging, form);
  const session = known(act, params['id'] ?? '');
  return {
    object: 'list',
    data: act.tx.find('session_detail', session.id)?.line_items ?? [],
    has_more: false,
    url: path,
  };
}

/**
 * @param {import('../types.d.ts').Act} act
 * @param {string} id
 */
function known(act, id) {
  const session = act.tx.find('checkout.session', id, act.account);
  if (!session) throw missing('checkout.session', id, 'session');
  return session;
}
