import { emit } from '../events.mjs';
import { invalid, missing, refused } from '../errors.mjs';
import { listPage, within } from '../lists.mjs';
import { integer, metadata, oneOf, paging, range, readParams, text } from '../params.mjs';
import { close } from '../payments/disputes.mjs';
import { refund } from '../payments/refunds.mjs';
import { merged } from './merge.mjs';

/** @typedef {import('../router.mjs').Call} Call */

/** @param {Call} call */
export function listCharges({ act, form, path }) {
  const { created, payment_intent, ...page } = readParams(
    { ...paging, created: range(), payment_intent: text(255) },
    form,
  );
  return listPage(
    act,
    'charge',
    path,
    page,
    (c) => within(created, c.created) && (payment_intent === undefined || c.payment_intent === payment_intent),
  );
}

/** @param {Call} call */
export function createRefund({ act, form }) {
  const asked = readParams(
    {
      amount: integer(1),
      charge: text(255),
      payment_intent: text(255),
      reason: oneOf('duplicate', 'fraudulent', 'requested_by_customer'),
      metadata: metadata(),
    },
    form,
  );
  if ((asked.charge === undefined) === (asked.payment_intent === undefined)) {
    throw invalid('One of the following params should be provided for this request: payment_intent or charge.');
  }
  return refund(act, refundable(act, asked), {
    amount: asked.amount,
    reason: asked.reason ?? null,
    metadata: asked.metadata ?? {},
  });
}

/**
 * @param {import('../types.d.ts').Act} act
 * @param {{ charge?: string | undefined, payment_intent?: string | undefined }} asked
 */
function refundable(act, asked) {
  const intent =
    asked.payment_intent === undefined ? undefined : act.tx.find('payment_intent', asked.payment_intent, act.account);
  if (asked.payment_intent !== undefined && !intent)
    throw missing('payment_intent', asked.payment_intent, 'payment_intent');
  if (intent && intent.status !== 'succeeded') {
    throw refused(`This PaymentIntent (${intent.id}) does not have a successful charge to refund.`);
  }
  const id = intent ? String(intent.latest_charge) : (asked.charge ?? '');
  const charge = act.tx.find('charge', id, act.account);
  if (!charge) throw missing('charge', id, 'charge');
  return charge;
}

/** @param {Call} call */
export function listRefunds({ act, form, path }) {
  const { created, charge, payment_intent, ...page } = readParams(
    { ...paging, created: range(), charge: text(255), payment_intent: text(255) },
    form,
  );
  return listPage(
    act,
    'refund',
    path,
    page,
    (r) =>
      within(created, r.created) &&
      (charge === undefined || r.charge === charge) &&
      (payment_intent === undefined || r.payment_intent === payment_intent),
  );
}

/** @param {Call} call */
export function updateRefund({ act, params, form }) {
  const asked = readParams({ metadata: metadata() }, form);
  const found = act.tx.find('refund', params['id'] ?? '', act.account);
  if (!found) throw missing('refund', params['id'] ?? '', 'refund');
  return asked.metadata
    ? act.tx.change('refund', found.id, { metadata: merged(found.metadata, asked.metadata) })
    : found;
}

/** @param {Call} call */
export function listDisputes({ act, form, path }) {
  const { created, charge, payment_intent, ...page } = readParams(
    { ...paging, created: range(), charge: text(255), payment_intent: text(255) },
    form,
  );
  return listPage(
    act,
    'dispute',
    path,
    page,
    (d) =>
      within(created, d.created) &&
      (charge === undefined || d.charge === charge) &&
      (payment_intent === undefined || d.payment_intent === payment_intent),
  );
}

/** @param {Call} call */
export function updateDispute({ act, params, form }) {
  const asked = readParams({ metadata: metadata() }, form);
  const found = act.tx.find('dispute', params['id'] ?? '', act.account);
  if (!found) throw missing('dispute', params['id'] ?? '', 'dispute');
  const after = act.tx.change(
    'dispute',
    found.id,
    asked.metadata ? { metadata: merged(found.metadata, asked.metadata) } : {},
  );
  emit(act, 'charge.dispute.updated', after);
  return after;
}

/**
 * Closing a dispute by the API accepts it.
 * @param {Call} call
 */
export function closeDispute({ act, params, form }) {
  readParams({}, form);
  const id = params['id'] ?? '';
  if (!act.tx.find('dispute', id, act.account)) throw missing('dispute', id, 'dispute');
  return close(act, id, 'lost');
}
