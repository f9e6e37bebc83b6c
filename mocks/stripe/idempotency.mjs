import { createHash } from 'node:crypto';
import { StripeFailure } from './errors.mjs';

/**
 * Keys as published: the first answer to a key is kept, whatever it was, and given again to the same request; another
 * request under the key is refused; a key at work is refused too; keys are forgotten after a day.
 * @typedef {import('./types.d.ts').Form} Form
 * @typedef {import('./types.d.ts').SavedAnswer} SavedAnswer
 */

const dayMs = 86_400_000;
const longest = 255;

/**
 * @param {string} account
 * @param {string} key
 */
export const savedId = (account, key) => `${account} ${key}`;

/**
 * @param {string} method
 * @param {string} path
 * @param {Form} form
 */
export const inputHash = (method, path, form) =>
  createHash('sha256')
    .update(`${method} ${path} ${JSON.stringify(sorted(form))}`)
    .digest('hex');

/**
 * @param {import('./store.mjs').Store} store
 * @param {string} id
 * @param {{ key: string, input: string, path: string, nowMs: number }} asked
 * @returns {SavedAnswer | undefined} the answer to give again
 */
export function savedAnswer(store, id, { key, input, path, nowMs }) {
  if (key.length > longest) {
    throw new StripeFailure(
      400,
      { type: 'invalid_request_error', message: `Idempotency keys can be at most ${longest} characters.` },
      false,
    );
  }
  const saved = store.transaction((tx) => tx.find('key', id));
  if (!saved || nowMs - saved.at >= dayMs) return undefined;
  if (saved.path !== path) {
    throw new StripeFailure(
      400,
      {
        type: 'idempotency_error',
        message: `Keys for idempotent requests can only be used for the same endpoint they were first used for ('${path}' vs '${saved.path}'). Try using a key other than '${key}' if you meant to execute a different request.`,
      },
      false,
    );
  }
  if (saved.input !== input) {
    throw new StripeFailure(
      400,
      {
        type: 'idempotency_error',
        message: `Keys for idempotent requests can only be used with the same parameters they were first used with. Try using a key other than '${key}' if you meant to execute a different request.`,
      },
      false,
    );
  }
  return saved;
}

/** @param {string} key */
export const keyInUse = (key) =>
  new StripeFailure(
    409,
    {
      type: 'idempotency_error',
      code: 'idempotency_key_in_use',
      message: `There is currently another in-progress request using this Idempotent Key (that probably means you submitted twice, and the other request is still going through): ${key}. Please try again later.`,
    },
    false,
  );

/**
 * The same parameters in another order are the same request.
 * @param {import('./types.d.ts').FormValue} value
 * @returns {unknown}
 */
function sorted(value) {
  if (typeof value === 'string') return value;
  if (Array.isArray(value)) return value.map(sorted);
  return Object.keys(value)
    .sort()
    .map((key) => [key, sorted(value[key] ?? '')]);
}
