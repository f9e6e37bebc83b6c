import { must } from '../arithmetic/index.ts';
import { isWellFormed } from './canonical-text.ts';
import { sha256 } from './sha256.ts';

/** What the first entry of a chain follows: 64 zeros. */
export const START_OF_CHAIN = '0'.repeat(64);

const HASH = /^[0-9a-f]{64}$/;
export const isHash = (value: string): boolean => HASH.test(value);

/**
 * The hash of an entry: SHA-256 over the hash before it (hex, 64 zeros for the first), a newline, and the entry's exact canonical text.
 * Throws InvalidInput for a hash that isn't 64 hex digits, and for a text that has no UTF-8 form of its own.
 */
export async function entryHash(previous: string, canonical: string): Promise<string> {
  must(isHash(previous), 'previous', previous, 'must be 64 hex digits in small letters');
  must(isWellFormed(canonical), 'canonical', canonical, 'must not hold half of a surrogate pair');
  return sha256(`${previous}\n${canonical}`);
}
