import { invalid } from '../errors.mjs';
import { listPage, within } from '../lists.mjs';
import { oneOf, paging, range, readParams, text } from '../params.mjs';

/** @typedef {import('../router.mjs').Call} Call */

/**
 * @param {Call} call
 * @returns {import('stripe').Stripe.Balance}
 */
export function retrieveBalance({ act, form }) {
  readParams({}, form);
  let available = 0;
  let pending = 0;
  for (const { value } of act.tx.all('balance_transaction', act.account)) {
    if (value.available_on <= act.now || value.type === 'payout' || act.tx.find('paid_out', value.id))
      available += value.net;
    else pending += value.net;
  }
  return {
    object: 'balance',
    available: [{ amount: available, currency: 'usd', source_types: { card: available } }],
    livemode: false,
    pending: [{ amount: pending, currency: 'usd', source_types: { card: pending } }],
  };
}

/** @param {Call} call */
export function listBalanceTransactions({ act, form, path }) {
  const { created, payout, source, type, currency, ...page } = readParams(
    { ...paging, created: range(), payout: text(255), source: text(255), type: text(255), currency: text(3) },
    form,
  );
  return listPage(act, 'balance_transaction', path, page, (line) => {
    const out = act.tx.find('paid_out', line.id)?.payout ?? (line.type === 'payout' ? line.source : undefined);
    return (
      within(created, line.created) &&
      (payout === undefined || out === payout) &&
      (source === undefined || line.source === source) &&
      (type === undefined || line.type === type) &&
      (currency === undefined || line.currency === currency)
    );
  });
}

/** @param {Call} call */
export function listPayouts({ act, form, path }) {
  const { created, arrival_date, status, ...page } = readParams(
    {
      ...paging,
      created: range(),
      arrival_date: range(),
      status: oneOf('canceled', 'failed', 'in_transit', 'paid', 'pending'),
    },
    form,
  );
  return listPage(
    act,
    'payout',
    path,
    page,
    (p) =>
      within(created, p.created) &&
      within(arrival_date, p.arrival_date) &&
      (status === undefined || p.status === status),
  );
}

/** @param {Call} call */
export function listApplicationFees({ act, form, path }) {
  const { created, charge, ...page } = readParams({ ...paging, created: range(), charge: text(255) }, form);
  if (act.account !== act.world.platform) throw invalid('Application fees belong to the platform.');
  return listPage(
    act,
    'application_fee',
    path,
    page,
    (f) => within(created, f.created) && (charge === undefined || f.charge === charge),
  );
}
