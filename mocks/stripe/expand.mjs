import { invalid } from './errors.mjs';
import { kindOf } from './ids.mjs';
import { present } from './present.mjs';

/** @typedef {import('./types.d.ts').Act} Act */

const deepest = 4;

/**
 * Replaces ids by the objects they name, along paths such as `payment_intent.latest_charge` or `data.charge`.
 * @param {Act} act
 * @param {object} body
 * @param {string[]} paths
 * @returns {object}
 */
export function expand(act, body, paths) {
  let result = body;
  for (const path of paths) {
    const parts = path.split('.');
    if (parts.length > deepest + (parts[0] === 'data' ? 1 : 0)) {
      throw invalid(`You cannot expand more than ${deepest} levels of a property. Property: ${path}`, {
        param: 'expand',
      });
    }
    result = /** @type {object} */ (follow(act, result, parts, path));
  }
  return result;
}

/**
 * @param {Act} act
 * @param {unknown} value
 * @param {string[]} parts
 * @param {string} path
 * @returns {unknown}
 */
function follow(act, value, parts, path) {
  const [part, ...rest] = parts;
  if (Array.isArray(value)) return value.map((v) => follow(act, v, parts, path));
  const object = typeof value === 'string' ? load(act, value) : value;
  if (part === undefined) return object ?? value;
  if (object === null || object === undefined) return value;
  if (typeof object !== 'object') throw cannot(path);
  const fields = /** @type {Record<string, unknown>} */ (object);
  const inside = Object.hasOwn(fields, part) ? fields[part] : included(act, fields, part);
  if (inside === undefined) throw cannot(path);
  const named = typeof inside === 'string' && kindOf(inside) !== undefined;
  if (!named && typeof inside !== 'object') throw cannot(path);
  return { ...fields, [part]: follow(act, inside, rest, path) };
}

/**
 * Parts that are shown only when asked for.
 * @param {Act} act
 * @param {Record<string, unknown>} fields
 * @param {string} part
 */
function included(act, fields, part) {
  const id = String(fields['id']);
  if (fields['object'] === 'checkout.session' && part === 'line_items') {
    return {
      object: 'list',
      data: act.tx.find('session_detail', id)?.line_items ?? [],
      has_more: false,
      url: `/v1/checkout/sessions/${id}/line_items`,
    };
  }
  if (fields['object'] === 'charge' && part === 'refunds') {
    const data = act.tx
      .all('refund', act.account)
      .map((r) => r.value)
      .filter((r) => r.charge === id)
      .reverse();
    return { object: 'list', data, has_more: false, url: `/v1/charges/${id}/refunds` };
  }
  return undefined;
}

/**
 * @param {Act} act
 * @param {string} id
 * @returns {object | undefined}
 */
function load(act, id) {
  const kind = kindOf(id);
  if (!kind) return undefined;
  const own = kind === 'account' ? act.tx.find('account', id) : act.tx.find(kind, id, act.account);
  // An application fee belongs to the platform, though the charge that names it doesn't.
  const found = own ?? (kind === 'application_fee' ? act.tx.find(kind, id) : undefined);
  return found === undefined
    ? undefined
    : present(act.tx, /** @type {'charge'} */ (kind), /** @type {import('stripe').Stripe.Charge} */ (found), act.now);
}

/** @param {string} path */
const cannot = (path) => invalid(`This property cannot be expanded (${path}).`, { param: 'expand' });
