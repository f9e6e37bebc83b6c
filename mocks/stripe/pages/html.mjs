/** A piece of HTML, told apart from text that still has to be escaped. */
export class Html {
  /** @param {string} text */
  constructor(text) {
    this.text = text;
  }
}

/** @typedef {Html | string | number | null | undefined | false | Array<Html | string>} Part */

/**
 * A template that escapes whatever isn't HTML already.
 * @param {TemplateStringsArray} strings
 * @param {Part[]} parts
 */
export function html(strings, ...parts) {
  return new Html(strings.map((s, i) => s + (i < parts.length ? shown(parts[i]) : '')).join(''));
}

/**
 * @param {Part} part
 * @returns {string}
 */
function shown(part) {
  if (part === null || part === undefined || part === false) return '';
  if (part instanceof Html) return part.text;
  if (Array.isArray(part)) return part.map(shown).join('');
  return String(part).replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}

/**
 * Cents as people write them.
 * @param {number | null} cents
 */
export const dollars = (cents) =>
  new Intl.NumberFormat('en-US', { style: 'currency', currency: 'USD' }).format((cents ?? 0) / 100);

/** @param {number} seconds */
export const moment = (seconds) =>
  new Intl.DateTimeFormat('en-US', { dateStyle: 'long', timeStyle: 'short', timeZone: 'UTC' }).format(seconds * 1000) +
  ' UTC';

/**
 * The address to go back to, with the session's id where Stripe puts it.
 * @param {string} url
 * @param {string} id
 */
export const filled = (url, id) => url.replaceAll('{CHECKOUT_SESSION_ID}', id);
