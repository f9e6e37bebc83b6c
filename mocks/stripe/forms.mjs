import { invalid } from './errors.mjs';

/**
 * @typedef {import('./types.d.ts').Form} Form
 * @typedef {import('./types.d.ts').FormValue} FormValue
 */

const deepest = 12;

/**
 * Reads `a[b][0][c]=d` into `{ a: { b: [{ c: 'd' }] } }`, from a body or a query.
 * @param {string} text
 * @returns {Form}
 */
export function parseForm(text) {
  const root = bare();
  for (const [name, value] of new URLSearchParams(text)) place(root, pathOf(name), value, name);
  return /** @type {Form} */ (listsOf(root));
}

/**
 * The fields of a plain form, for hosted pages.
 * @param {string} text
 */
export const parseFields = (text) => Object.fromEntries(new URLSearchParams(text));

/** No prototype: a field called `constructor` is a field like any other. */
const bare = () => /** @type {Form} */ (Object.create(null));

/** @param {string} name */
function pathOf(name) {
  const first = name.indexOf('[');
  if (first < 0) return [name];
  const parts = [name.slice(0, first), ...[...name.slice(first).matchAll(/\[([^\]]*)\]/g)].map((m) => m[1] ?? '')];
  if (parts[0] === '' || parts.length > deepest || name.slice(first).replace(/\[[^\]]*\]/g, '') !== '') {
    throw invalid(`Invalid parameter name: ${name}`);
  }
  return parts;
}

/**
 * @param {Form} root
 * @param {string[]} path
 * @param {string} value
 * @param {string} name
 */
function place(root, path, value, name) {
  let at = root;
  path.forEach((part, index) => {
    const key = part === '' ? String(Object.keys(at).length) : part;
    if (index === path.length - 1) {
      if (typeof at[key] === 'object') throw invalid(`Invalid mix of a value and a hash: ${name}`);
      at[key] = value;
      return;
    }
    const next = (at[key] ??= bare());
    if (typeof next === 'string') throw invalid(`Invalid mix of a value and a hash: ${name}`);
    at = /** @type {Form} */ (next);
  });
}

/**
 * Hashes whose keys are 0, 1, 2 … are lists. A metadata hash is told apart later, where it is read.
 * @param {FormValue} value
 * @returns {FormValue}
 */
function listsOf(value) {
  if (typeof value === 'string' || Array.isArray(value)) return value;
  const keys = Object.keys(value);
  for (const key of keys) value[key] = listsOf(value[key] ?? '');
  if (keys.length > 0 && keys.every((key) => /^\d+$/.test(key))) {
    return keys
      .map(Number)
      .sort((a, b) => a - b)
      .map((key) => value[String(key)] ?? '');
  }
  return value;
}
