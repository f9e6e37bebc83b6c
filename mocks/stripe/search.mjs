import { invalid } from './errors.mjs';

/**
 * The search language, as far as PaymentIntents and charges need it: clauses joined by AND or by OR, not by both.
 * @typedef {{ field: string, key?: string, operator: ':' | '~' | '>' | '<' | '>=' | '<=', value: string | null, not: boolean }} Clause
 */

const clause =
  /^\s*(-?)([a-z_]+)(?:\[(?:'([^']*)'|"([^"]*)")\])?\s*(:|~|>=|<=|>|<)\s*(?:'((?:[^'\\]|\\.)*)'|"((?:[^"\\]|\\.)*)"|(null|-?\d+))/i;

/**
 * @param {string} query such as `metadata['payment']:'42' AND status:'succeeded'`
 * @returns {(object: object) => boolean}
 */
export function parseSearch(query) {
  /** @type {Clause[]} */
  const clauses = [];
  /** @type {string | undefined} */
  let joint;
  let rest = query;
  for (;;) {
    const m = clause.exec(rest);
    if (!m) throw unreadable(query);
    const [whole, not, field, key1, key2, operator, value1, value2, bare] = m;
    const key = key1 ?? key2;
    const value = bare?.toLowerCase() === 'null' ? null : (value1 ?? value2 ?? bare ?? '').replace(/\\(.)/g, '$1');
    clauses.push({
      field: /** @type {string} */ (field).toLowerCase(),
      ...(key === undefined ? {} : { key }),
      operator: /** @type {Clause['operator']} */ (operator),
      value,
      not: not === '-',
    });
    rest = rest.slice(whole.length);
    if (rest.trim() === '') break;
    const link = /^\s+(AND|OR)\s+/i.exec(rest) ?? /^(\s+)(?=\S)/.exec(rest);
    if (!link) throw unreadable(query);
    const word = (link[1] ?? '').trim().toUpperCase() || 'AND';
    if (joint !== undefined && joint !== word)
      throw invalid('AND and OR cannot be mixed in one query.', { param: 'query' });
    joint = word;
    rest = rest.slice(link[0].length);
  }
  return (object) => (joint === 'OR' ? clauses.some((c) => holds(c, object)) : clauses.every((c) => holds(c, object)));
}

/**
 * @param {Clause} asked
 * @param {object} object
 */
function holds(asked, object) {
  const fields = /** @type {Record<string, unknown>} */ (object);
  const whole = fields[asked.field];
  const found =
    asked.key === undefined ? whole : /** @type {Record<string, unknown> | null | undefined} */ (whole)?.[asked.key];
  return compare(asked, found) !== asked.not;
}

/**
 * @param {Clause} asked
 * @param {unknown} found
 */
function compare({ operator, value }, found) {
  if (value === null) return found === undefined || found === null;
  if (found === undefined || found === null) return false;
  switch (operator) {
    case ':':
      return String(found).toLowerCase() === value.toLowerCase();
    case '~':
      return String(found).toLowerCase().includes(value.toLowerCase());
    case '>':
      return Number(found) > Number(value);
    case '<':
      return Number(found) < Number(value);
    case '>=':
      return Number(found) >= Number(value);
    case '<=':
      return Number(found) <= Number(value);
  }
}

/** @param {string} query */
const unreadable = (query) => invalid(`We were unable to parse your search query: ${query}`, { param: 'query' });
