import { emit } from '../events.mjs';
import { missing, refused } from '../errors.mjs';
import { listPage, within } from '../lists.mjs';
import { integer, metadata, oneOf, paging, range, readParams, required, text } from '../params.mjs';
import { sessionOf } from '../payments/settlement.mjs';
import { parseSearch } from '../search.mjs';
import { merged } from './merge.mjs';

/** @typedef {import('../router.mjs').Call} Call */

const cancelable = ['requires_payment_method', 'requires_capture', 'requires_confirmation', 'requires_action'];

/** @param {Call} call */
export function retrieveIntent({ act, params, form }) {
  readParams({}, form);
  return known(act, params['id'] ?? '');
}

/** @param {Call} call */
export function listIntents({ act, form, path }) {
  const { created, ...page } = readParams({ ...paging, created: range() }, form);
  return listPage(act, 'payment_intent', path, page, (p) => within(created, p.created));
}

/** @param {Call} call */
export function updateIntent({ act, params, form }) {
  const asked = readParams({ description: text(1000), metadata: metadata() }, form);
  const intent = known(act, params['id'] ?? '');
  return act.tx.change('payment_intent', intent.id, {
    ...(asked.description === undefined ? {} : { description: asked.description || null }),
    ...(asked.metadata ? { metadata: merged(intent.metadata, asked.metadata) } : {}),
  });
}

/** @param {Call} call */
export function cancelIntent({ act, params, form }) {
  const asked = readParams(
    { cancellation_reason: oneOf('abandoned', 'duplicate', 'fraudulent', 'requested_by_customer') },
    form,
  );
  const intent = known(act, params['id'] ?? '');
  if (!cancelable.includes(intent.status)) {
    throw refused(
      `You cannot cancel this PaymentIntent because it has a status of ${intent.status}. Only a PaymentIntent with one of the following statuses may be canceled: ${cancelable.join(', ')}.`,
      { code: 'payment_intent_unexpected_state', payment_intent: intent },
    );
  }
  if (sessionOf(act, intent.id)?.status === 'open') {
    throw refused("You can't cancel the PaymentIntent for a Checkout Session. Expire the Checkout Session instead.", {
      param: 'intent',
    });
  }
  const canceled = act.tx.change('payment_intent', intent.id, {
    canceled_at: act.now,
    cancellation_reason: asked.cancellation_reason ?? null,
    status: 'canceled',
  });
  emit(act, 'payment_intent.canceled', canceled);
  return canceled;
}

/** @param {'payment_intent' | 'charge'} kind */
const searchOf =
  (kind) =>
  /** @param {Call} call */ ({ act, form, path }) => {
    const asked = readParams({ query: required(text(5000)), limit: integer(1, 100), page: text(255) }, form);
    const wanted = parseSearch(asked.query);
    // Search follows the data with a lag: reading back what was just written is not what it is for.
    const visible = act.world.nowMs() - act.world.settings().search_lag_ms;
    const rows = /** @type {Array<import('stripe').Stripe.PaymentIntent | import('stripe').Stripe.Charge>} */ (
      act.tx.all(kind, act.account).map((r) => r.value)
    );
    const found = rows.filter((v) => v.created * 1000 <= visible && wanted(v)).reverse();
    const limit = asked.limit ?? 10;
    const from = asked.page === undefined ? 0 : Number(asked.page) || 0;
    const more = found.length > from + limit;
    return {
      object: 'search_result',
      data: found.slice(from, from + limit),
      has_more: more,
      next_page: more ? String(from + limit) : null,
      url: path,
    };
  };

export const searchIntents = searchOf('payment_intent');
export const searchCharges = searchOf('charge');

/**
 * @param {import('../types.d.ts').Act} act
 * @param {string} id
 */
function known(act, id) {
  const intent = act.tx.find('payment_intent', id, act.account);
  if (!intent) throw missing('payment_intent', id, 'intent');
  return intent;
}
