/**
 * Objects as they are shown: a few fields follow from others and are worked out when somebody looks.
 * @typedef {import('./types.d.ts').PublicKind} PublicKind
 * @typedef {import('./types.d.ts').PublicKinds} PublicKinds
 * @typedef {import('./store.mjs').Tx} Tx
 */

/**
 * @template {PublicKind} K
 * @param {Tx} tx
 * @param {K} kind
 * @param {PublicKinds[K]} value
 * @param {number} now seconds
 * @returns {PublicKinds[K]}
 */
export function present(tx, kind, value, now) {
  if (kind === 'event') {
    const event = /** @type {PublicKinds['event']} */ (value);
    const open = tx
      .all('delivery')
      .filter(({ value: d }) => d.event === event.id && d.state !== 'delivered' && d.state !== 'dropped').length;
    return /** @type {PublicKinds[K]} */ ({ ...event, pending_webhooks: open });
  }
  if (kind === 'balance_transaction') {
    const line = /** @type {PublicKinds['balance_transaction']} */ (value);
    return /** @type {PublicKinds[K]} */ ({ ...line, status: line.available_on <= now ? 'available' : 'pending' });
  }
  return value;
}
