import { StripeFailure } from '../errors.mjs';

/**
 * What a test may ask of the control surface, checked field by field: a misspelled control must not pass for a wish.
 * @typedef {Record<string, unknown>} Wish
 */

/** @param {string} message */
export const wrong = (message) => new StripeFailure(400, { type: 'control_error', message }, false);

/** @param {string} text */
export function readWish(text) {
  if (text === '') return {};
  /** @type {unknown} */
  let wish;
  try {
    wish = JSON.parse(text);
  } catch {
    throw wrong('The body is no JSON');
  }
  if (typeof wish !== 'object' || wish === null || Array.isArray(wish)) throw wrong('The body must be an object');
  return /** @type {Wish} */ (wish);
}

/**
 * @param {Wish} wish
 * @param {string[]} allowed
 */
export function onlyKnown(wish, allowed) {
  const strange = Object.keys(wish).find((key) => !allowed.includes(key));
  if (strange !== undefined) throw wrong(`Unknown field ${strange}; known are ${allowed.join(', ') || 'none'}`);
}

/**
 * @param {Wish} wish
 * @param {string} name
 * @returns {string | undefined}
 */
export function textOf(wish, name) {
  const value = wish[name];
  if (value === undefined || typeof value === 'string') return value;
  throw wrong(`${name} must be a text`);
}

/**
 * @param {Wish} wish
 * @param {string} name
 * @returns {number | undefined}
 */
export function wholeOf(wish, name) {
  const value = wish[name];
  if (value === undefined) return undefined;
  if (typeof value === 'number' && Number.isSafeInteger(value)) return value;
  throw wrong(`${name} must be a whole number`);
}

/**
 * @template {string} T
 * @param {Wish} wish
 * @param {string} name
 * @param {readonly T[]} allowed
 * @returns {T | undefined}
 */
export function choiceOf(wish, name, allowed) {
  const value = textOf(wish, name);
  const found = allowed.find((a) => a === value);
  if (value !== undefined && found === undefined) throw wrong(`${name} must be one of ${allowed.join(', ')}`);
  return found;
}

/**
 * How often something applies: for ever when unsaid.
 * @param {Wish} wish
 */
export function timesOf(wish) {
  const times = wholeOf(wish, 'times');
  if (times !== undefined && times < 1) throw wrong('times must be at least 1');
  return times ?? null;
}
