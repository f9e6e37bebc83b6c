import { randomBytes } from 'node:crypto';

const alphabet = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz';

/**
 * A random string of letters and digits.
 * @param {number} length
 */
export function randomText(length) {
  let text = '';
  while (text.length < length) {
    for (const byte of randomBytes(length * 2)) {
      // Bytes past the last whole multiple of the alphabet would favor its first letters.
      if (byte < alphabet.length * 4 && text.length < length) text += alphabet[byte % alphabet.length];
    }
  }
  return text;
}

/**
 * An id in Stripe's manner: a prefix that names the kind and a random tail.
 * @param {string} prefix such as `pi`
 * @param {number} [length] letters after the prefix
 */
export const newId = (prefix, length = 24) => `${prefix}_${randomText(length)}`;

/** @type {Record<string, import('./types.d.ts').Kind>} */
const kindByPrefix = {
  acct: 'account',
  ch: 'charge',
  cs: 'checkout.session',
  dp: 'dispute',
  evt: 'event',
  fee: 'application_fee',
  pi: 'payment_intent',
  pm: 'payment_method',
  po: 'payout',
  py: 'charge',
  re: 'refund',
  txn: 'balance_transaction',
  we: 'webhook_endpoint',
};

/**
 * The kind of object that an id names, or undefined for text that is no id.
 * @param {string} id
 */
export function kindOf(id) {
  const prefix = /^([a-z]+)_[A-Za-z0-9_]+$/.exec(id)?.[1];
  return prefix === undefined ? undefined : kindByPrefix[prefix];
}
