import { must } from '../arithmetic/index.ts';

const HASH = /^[0-9a-f]{16}$/;

/** How many of 64 bits differ between two perceptual hashes, given as 16 hex digits. Throws InvalidInput. */
export function hammingDistance(a: string, b: string): number {
  must(HASH.test(a), 'a', a, 'must be 16 hex digits');
  must(HASH.test(b), 'b', b, 'must be 16 hex digits');
  let different = BigInt(`0x${a}`) ^ BigInt(`0x${b}`);
  let count = 0;
  for (; different > 0n; different &= different - 1n) count += 1;
  return count;
}
