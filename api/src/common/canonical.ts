import canonicalize from 'canonicalize';
import { createHash } from 'node:crypto';

export type Json = null | boolean | number | string | readonly Json[] | { readonly [name: string]: Json | undefined };

/** The one text of a JSON value (RFC 8785), which is what is hashed and stored. */
export function canonical(value: Json): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('This value has no canonical text.');
  return text;
}

/** SHA-256, hex, of a value's canonical text. */
export const canonicalHash = (value: Json): string => createHash('sha256').update(canonical(value)).digest('hex');
