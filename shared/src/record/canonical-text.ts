import { InvalidInput, must } from '../arithmetic/index.ts';

/** A JSON value; a member that is undefined is left out of its object. */
export type Json = null | boolean | number | string | readonly Json[] | { readonly [name: string]: Json | undefined };

/** Deeper than anything that people enter; it also ends a value that holds itself. */
const MOST_LEVELS = 500;

/**
 * The one text of a JSON value by RFC 8785 (JSON Canonicalization Scheme): members sorted by UTF-16 code units, no white space, numbers
 * and strings as ECMAScript writes them. Throws InvalidInput, naming the place by its path, for what JSON can't hold: not a number,
 * infinity, a big integer, half of a surrogate pair, an object of a class (a date), undefined outside an object, or a value that is
 * nested more than 500 levels deep.
 */
export function canonicalText(value: Json, field = 'value'): string {
  return write(value, field, 0);
}

function write(value: unknown, field: string, level: number): string {
  must(level <= MOST_LEVELS, field, value, `must not be nested more than ${MOST_LEVELS} levels deep`);
  if (value === null || typeof value === 'boolean') return String(value);
  if (typeof value === 'number') {
    must(Number.isFinite(value), field, value, 'must be a finite number');
    return JSON.stringify(value);
  }
  if (typeof value === 'string') return writeString(value, field);
  if (Array.isArray(value)) return `[${Array.from(value, (item: unknown, i) => write(item, `${field}.${i}`, level + 1)).join(',')}]`;
  if (isPlain(value)) {
    const members = Object.keys(value)
      .sort() // by UTF-16 code units, as the standard asks
      .filter((name) => value[name] !== undefined)
      .map((name) => `${writeString(name, `${field}.${name}`)}:${write(value[name], `${field}.${name}`, level + 1)}`);
    return `{${members.join(',')}}`;
  }
  throw new InvalidInput(field, value, 'must be a JSON value');
}

function writeString(value: string, field: string): string {
  must(isWellFormed(value), field, value, 'must not hold half of a surrogate pair');
  return JSON.stringify(value);
}

/** Whether a text has a UTF-8 form of its own; half of a surrogate pair would be written as the replacement character. */
export const isWellFormed = (value: string): boolean => !/\p{Surrogate}/u.test(value);

function isPlain(value: unknown): value is Record<string, unknown> {
  if (typeof value !== 'object' || value === null) return false;
  const prototype: unknown = Object.getPrototypeOf(value);
  return prototype === Object.prototype || prototype === null;
}
