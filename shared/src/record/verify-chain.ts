import { must } from '../arithmetic/index.ts';
import { isWellFormed } from './canonical-text.ts';
import { entryHash, isHash, START_OF_CHAIN } from './entry-hash.ts';

/** An entry as it is stored: its place in the chain from 1, its exact canonical text, and its hash. */
export interface ChainEntry {
  seq: number;
  text: string;
  hash: string;
}

/** The head of the chain as a paper printed it when it was made: the last entry then, and its hash. */
export interface PrintedHead {
  seq: number;
  hash: string;
  /** The paper, as people name it. */
  printedIn: string;
}

/**
 * Why an entry doesn't hold. `missing`: another entry stands in its place, or none. `altered`: its text or the hash beside it was
 * changed, or what it follows. `printed`: the chain holds in itself but isn't the one a paper printed: it was written anew.
 */
export type ChainFault = 'missing' | 'altered' | 'printed';

export type ChainVerdict =
  | { holds: true; head: { seq: number; hash: string }; sentence: string }
  | { holds: false; seq: number; fault: ChainFault; printedIn?: string; sentence: string };

/**
 * Recomputes a chain from its first entry, and compares it with the heads that papers printed. Names the first entry that doesn't hold;
 * with `printed`, that entry or one since the last agreeing paper was changed. Entries cut off at the end are found by a printed head
 * alone, so pass the stored head of the record too. Throws InvalidInput for a printed head that is none.
 */
export async function verifyChain(entries: readonly ChainEntry[], printedHeads: readonly PrintedHead[]): Promise<ChainVerdict> {
  printedHeads.forEach((head, i) => {
    must(Number.isSafeInteger(head.seq) && head.seq >= 0, `printedHeads.${i}.seq`, head.seq, 'must be the number of an entry, or 0 before the first');
    must(isHash(head.hash), `printedHeads.${i}.hash`, head.hash, 'must be 64 hex digits in small letters');
  });
  const printed = [...printedHeads].sort((a, b) => a.seq - b.seq);
  const unlike = (seq: number, hash: string) => printed.find((head) => head.seq === seq && head.hash !== hash);
  let hash = START_OF_CHAIN;
  let other = unlike(0, hash);
  if (other) return fault(1, 'printed', other);
  for (const [i, entry] of entries.entries()) {
    const seq = i + 1;
    if (entry.seq !== seq) return fault(seq, 'missing');
    if (!isWellFormed(entry.text) || (await entryHash(hash, entry.text)) !== entry.hash) return fault(seq, 'altered');
    hash = entry.hash;
    other = unlike(seq, hash);
    if (other) return fault(seq, 'printed', other);
  }
  const beyond = printed.find((head) => head.seq > entries.length);
  if (beyond) return fault(entries.length + 1, 'missing', beyond);
  return { holds: true, head: { seq: entries.length, hash }, sentence: entries.length === 0 ? 'The record is empty.' : `All ${entries.length} entries hold; the last hash is ${hash}.` };
}

function fault(seq: number, kind: ChainFault, head?: PrintedHead): ChainVerdict {
  const why = { missing: 'is missing, or another stands in its place', altered: 'does not match its hash', printed: 'is not the one that was printed' }[kind];
  const paper = head ? ` in ${head.printedIn}` : '';
  const named = kind === 'missing' && head ? `is missing: ${head.printedIn} names entry ${head.seq}` : `${why}${paper}`;
  return { holds: false, seq, fault: kind, ...(head ? { printedIn: head.printedIn } : {}), sentence: `Entry ${seq} ${named}.` };
}
