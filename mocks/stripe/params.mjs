import { invalid } from './errors.mjs';

/**
 * What a call may be given, declared once per call and checked before any work begins.
 * @typedef {import('./types.d.ts').Form} Form
 * @typedef {import('./types.d.ts').FormValue} FormValue
 */
/**
 * @template T
 * @typedef {{ read: (value: FormValue, name: string) => T, required?: boolean }} Param
 */
/**
 * @template {Record<string, Param<unknown>>} S
 * @typedef {{ [K in keyof S]: S[K] extends { required: true } ? ReturnType<S[K]['read']> : ReturnType<S[K]['read']> | undefined }} Read
 */

/**
 * @template T
 * @param {Param<T>} param
 * @returns {Param<T> & { required: true }}
 */
export const required = (param) => ({ ...param, required: true });

/**
 * @param {number} [max] letters
 * @returns {Param<string>}
 */
export const text = (max = 5000) => ({
  read(value, name) {
    if (typeof value !== 'string') throw invalid(`Invalid string: ${name}`, { param: name });
    if (value.length > max) {
      throw invalid(`Invalid string: ${value.slice(0, 10)}...; must be at most ${max} characters`, { param: name });
    }
    return value;
  },
});

/**
 * @param {number} [min]
 * @param {number} [max]
 * @returns {Param<number>}
 */
export const integer = (min = Number.MIN_SAFE_INTEGER, max = Number.MAX_SAFE_INTEGER) => ({
  read(value, name) {
    const number = typeof value === 'string' && /^-?\d{1,16}$/.test(value) ? Number(value) : NaN;
    if (!Number.isSafeInteger(number)) {
      throw invalid(`Invalid integer: ${typeof value === 'string' ? value : '{}'}`, {
        code: 'parameter_invalid_integer',
        param: name,
      });
    }
    if (number < min)
      throw invalid(`This value must be greater than or equal to ${min}.`, {
        code: 'parameter_invalid_integer',
        param: name,
      });
    if (number > max)
      throw invalid(`This value must be less than or equal to ${max}.`, {
        code: 'parameter_invalid_integer',
        param: name,
      });
    return number;
  },
});

/** @returns {Param<boolean>} */
export const yesNo = () => ({
  read(value, name) {
    if (value === 'true') return true;
    if (value === 'false') return false;
    throw invalid(`Invalid boolean: ${String(value)}`, { param: name });
  },
});

/**
 * @template {string} T
 * @param {readonly T[]} allowed
 * @returns {Param<T>}
 */
export const oneOf = (...allowed) => ({
  read(value, name) {
    const found = allowed.find((a) => a === value);
    if (found === undefined) throw invalid(`Invalid ${name}: must be one of ${allowed.join(', ')}`, { param: name });
    return found;
  },
});

/** @returns {Param<string>} */
export const address = () => ({
  read(value, name) {
    if (
      typeof value !== 'string' ||
      value.length > 5000 ||
      !URL.canParse(value.replace('{CHECKOUT_SESSION_ID}', 'x')) ||
      !/^https?:/i.test(value)
    ) {
      throw invalid('Not a valid URL', { code: 'url_invalid', param: name });
    }
    return value;
  },
});

/** @returns {Param<string>} */
export const email = () => ({
  read(value, name) {
    if (typeof value !== 'string' || value.length > 800 || !/^[^\s@]+@[^\s@]+\.[^\s@]+$/.test(value)) {
      throw invalid(`Invalid email address: ${String(value)}`, { code: 'email_invalid', param: name });
    }
    return value;
  },
});

/**
 * Key and value pairs within Stripe's published limits; an empty text for the whole removes all of it.
 * @returns {Param<Record<string, string>>}
 */
export const metadata = () => ({
  read(value, name) {
    if (value === '') return {};
    if (typeof value === 'string') throw invalid(`Invalid object`, { param: name });
    const pairs = Object.entries(value);
    if (pairs.length > 50) throw invalid('You can only specify up to 50 metadata keys.', { param: name });
    for (const [key, part] of pairs) {
      const at = `${name}[${key}]`;
      if (typeof part !== 'string') throw invalid('Metadata values must be strings', { param: at });
      if (key.length > 40) throw invalid(`Metadata keys must be at most 40 characters: '${key}'`, { param: name });
      if (part.length > 500)
        throw invalid(
          `Metadata values can have up to 500 characters, but you passed in a value that is ${part.length} characters.`,
          { param: at },
        );
    }
    return /** @type {Record<string, string>} */ (Object.fromEntries(pairs));
  },
});

/**
 * @template T
 * @param {Param<T>} item
 * @param {number} [most]
 * @returns {Param<T[]>}
 */
export const listOf = (item, most = 100) => ({
  read(value, name) {
    if (!Array.isArray(value)) throw invalid('Invalid array', { param: name });
    if (value.length > most) throw invalid(`Array ${name} can have at most ${most} elements`, { param: name });
    return value.map((part, index) => item.read(part, `${name}[${index}]`));
  },
});

/**
 * @template {Record<string, Param<unknown>>} S
 * @param {S} spec
 * @returns {Param<Read<S>>}
 */
export const hash = (spec) => ({
  read(value, name) {
    if (typeof value === 'string' || Array.isArray(value)) throw invalid('Invalid object', { param: name });
    return readParams(spec, value, name);
  },
});

/**
 * A moment in seconds, or a range of them: `created=…` or `created[gte]=…`.
 * @returns {Param<{ gt?: number | undefined, gte?: number | undefined, lt?: number | undefined, lte?: number | undefined }>}
 */
export const range = () => ({
  read(value, name) {
    if (typeof value === 'string') {
      const at = integer().read(value, name);
      return { gte: at, lte: at };
    }
    return hash({ gt: integer(), gte: integer(), lt: integer(), lte: integer() }).read(value, name);
  },
});

/** What every list takes. */
export const paging = { limit: integer(1, 100), starting_after: text(255), ending_before: text(255) };

/**
 * @template {Record<string, Param<unknown>>} S
 * @param {S} spec
 * @param {Form} form
 * @param {string} [within] the hash that these parameters stand in
 * @returns {Read<S>}
 */
export function readParams(spec, form, within) {
  const nameOf = (/** @type {string} */ key) => (within === undefined ? key : `${within}[${key}]`);
  for (const key of Object.keys(form)) {
    if (!Object.hasOwn(spec, key)) {
      throw invalid(`Received unknown parameter: ${nameOf(key)}`, { code: 'parameter_unknown', param: nameOf(key) });
    }
  }
  /** @type {Record<string, unknown>} */
  const read = {};
  for (const [key, param] of Object.entries(spec)) {
    const value = form[key];
    if (value !== undefined) read[key] = param.read(value, nameOf(key));
    else if (param.required)
      throw invalid(`Missing required param: ${nameOf(key)}.`, { code: 'parameter_missing', param: nameOf(key) });
  }
  return /** @type {Read<S>} */ (read);
}
