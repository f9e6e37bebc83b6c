import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { canonicalText, entryHash, sha256, START_OF_CHAIN, verifyChain, type ChainEntry, type Json, type PrintedHead } from './index.ts';

/** A chain made by another implementation of SHA-256. */
function chainOf(texts: readonly string[]): ChainEntry[] {
  let hash = '0'.repeat(64);
  return texts.map((text, i) => ({ seq: i + 1, text, hash: (hash = createHash('sha256').update(`${hash}\n${text}`, 'utf8').digest('hex')) }));
}
const headOf = (entries: readonly ChainEntry[], printedIn = 'the last paper'): PrintedHead => ({ seq: entries.length, hash: entries.at(-1)?.hash ?? START_OF_CHAIN, printedIn });
const at = (entries: readonly ChainEntry[], i: number): ChainEntry => entries[i] ?? { seq: 0, text: '', hash: '' };

describe('hashes', () => {
  // NIST FIPS 180-4 example values (from memory in the list of references, recomputed there).
  it.each([
    ['', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
    ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
    ['abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq', '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1'],
    ['a'.repeat(1_000_000), 'cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0'],
  ])('gives the published SHA-256', async (text, hash) => expect(await sha256(text)).toBe(hash));

  it('agrees with Node on any text, and chains by the previous hash, a newline and the text', async () => {
    await fc.assert(
      fc.asyncProperty(fc.string({ unit: 'binary' }), fc.string({ unit: 'grapheme' }), async (before, text) => {
        const previous = createHash('sha256').update(before).digest('hex');
        expect(await entryHash(previous, text)).toBe(createHash('sha256').update(previous).update('\n').update(text, 'utf8').digest('hex'));
      }),
    );
  });

  it.each([
    ['a short hash', 'abc', '{}', 'previous'],
    ['capital letters', 'A'.repeat(64), '{}', 'previous'],
    ['half of a pair', START_OF_CHAIN, '"\ud83d"', 'canonical'],
  ])('refuses %s', async (_, previous, text, field) => {
    await expect(entryHash(previous, text)).rejects.toThrow(InvalidInput);
    await expect(entryHash(previous, text)).rejects.toMatchObject({ field });
  });

  describe('without Web Crypto', () => {
    afterEach(() => vi.unstubAllGlobals());
    it('says so', async () => {
      vi.stubGlobal('crypto', undefined);
      await expect(sha256('abc')).rejects.toThrow(/https or localhost/);
    });
  });
});

describe('a chain', () => {
  const texts = ['{"act":"job.opened"}', '{"act":"change.signed","note":"Übergröße 😀"}', '{"act":"draw.approved"}', '{"act":"draw.paid"}'];
  const chain = chainOf(texts);

  it('holds, empty or not', async () => {
    expect(await verifyChain(chain, [headOf(chain), headOf(chain.slice(0, 2), 'the change paper')])).toMatchObject({ holds: true, head: { seq: 4, hash: at(chain, 3).hash } });
    expect(await verifyChain([], [])).toEqual({ holds: true, head: { seq: 0, hash: START_OF_CHAIN }, sentence: 'The record is empty.' });
  });

  it('names the entry that was cut out, moved, or cut off at the end', async () => {
    expect(await verifyChain([at(chain, 0), at(chain, 2), at(chain, 3)], [])).toMatchObject({ holds: false, seq: 2, fault: 'missing' });
    expect(await verifyChain([at(chain, 0), { ...at(chain, 2), seq: 2 }, { ...at(chain, 3), seq: 3 }], [])).toMatchObject({ seq: 2, fault: 'altered' });
    expect(await verifyChain(chain.slice(0, 3), [headOf(chain, 'Draw 3')])).toEqual({ holds: false, seq: 4, fault: 'missing', printedIn: 'Draw 3', sentence: 'Entry 4 is missing: Draw 3 names entry 4.' });
    expect(await verifyChain([], [headOf(chain)])).toMatchObject({ seq: 1, fault: 'missing' });
  });

  it('finds a chain that was written anew by a paper alone', async () => {
    const anew = chainOf(texts.map((text, i) => (i === 1 ? '{"act":"change.signed","note":"less"}' : text)));
    expect(await verifyChain(anew, [])).toMatchObject({ holds: true });
    expect(await verifyChain(anew, [headOf(chain.slice(0, 1), 'Change 1'), headOf(chain.slice(0, 3), 'Draw 2')])).toEqual({ holds: false, seq: 3, fault: 'printed', printedIn: 'Draw 2', sentence: 'Entry 3 is not the one that was printed in Draw 2.' });
  });

  it('names the earlier of two faults', async () => {
    const broken = chain.map((entry, i) => (i === 1 || i === 3 ? { ...entry, text: `${entry.text} ` } : entry));
    expect(await verifyChain(broken, [{ ...headOf(chain), hash: 'f'.repeat(64) }])).toMatchObject({ seq: 2, fault: 'altered', sentence: 'Entry 2 does not match its hash.' });
  });

  it('is not deceived by half of a surrogate pair, which would be hashed as the replacement character', async () => {
    const [entry] = chainOf(['{"a":"\ufffd"}']);
    if (!entry) throw new Error('no entry');
    expect(await verifyChain([{ ...entry, text: '{"a":"\ud800"}' }], [])).toMatchObject({ seq: 1, fault: 'altered' });
  });

  it.each([
    ['a head before the first', { seq: -1, hash: START_OF_CHAIN, printedIn: 'x' }, 'printedHeads.0.seq'],
    ['half an entry', { seq: 1.5, hash: START_OF_CHAIN, printedIn: 'x' }, 'printedHeads.0.seq'],
    ['a hash cut short', { seq: 1, hash: 'ab12', printedIn: 'x' }, 'printedHeads.0.hash'],
  ])('refuses %s', async (_, head, field) => {
    await expect(verifyChain([], [head])).rejects.toMatchObject({ name: 'InvalidInput', field });
  });
});

describe('any tampering is found', () => {
  const anyChain = fc.array(fc.jsonValue() as fc.Arbitrary<Json>, { minLength: 1, maxLength: 12 }).map((values) => chainOf(values.map((value) => canonicalText(value))));

  it('a single byte of a text or a hash, at its entry', async () => {
    await fc.assert(
      fc.asyncProperty(anyChain, fc.nat(), fc.nat(), fc.integer({ min: 1, max: 127 }), fc.boolean(), async (chain, which, where, flip, inHash) => {
        const i = which % chain.length;
        const name = inHash ? 'hash' : 'text';
        const bytes = Buffer.from(at(chain, i)[name], 'utf8');
        const place = where % bytes.length;
        bytes[place] = (bytes[place] ?? 0) ^ flip;
        const altered = chain.map((entry, n) => (n === i ? { ...entry, [name]: bytes.toString('utf8') } : entry));
        fc.pre(at(altered, i)[name] !== at(chain, i)[name]);
        expect(await verifyChain(altered, [])).toMatchObject({ holds: false, seq: i + 1, fault: 'altered' });
      }),
      { numRuns: 300 },
    );
  });

  it('an entry that is left out, at its place', async () => {
    await fc.assert(
      fc.asyncProperty(anyChain, fc.nat(), fc.boolean(), async (chain, which, renumber) => {
        const i = which % chain.length;
        const rest = chain.filter((_, n) => n !== i).map((entry, n) => (renumber ? { ...entry, seq: n + 1 } : entry));
        expect(await verifyChain(rest, [headOf(chain)])).toMatchObject({ holds: false, seq: i + 1 });
      }),
    );
  });

  it('two entries that change places, renumbered or not, and one that stands twice', async () => {
    await fc.assert(
      fc.asyncProperty(anyChain.filter((chain) => chain.length > 1), fc.nat(), fc.nat(), fc.boolean(), async (chain, a, b, renumber) => {
        const i = a % chain.length;
        const j = b % chain.length;
        fc.pre(i !== j);
        const moved = [...chain];
        [moved[i], moved[j]] = [at(chain, j), at(chain, i)];
        expect(await verifyChain(renumber ? moved.map((entry, n) => ({ ...entry, seq: n + 1 })) : moved, [])).toMatchObject({ holds: false, seq: Math.min(i, j) + 1 });
        const twice = [...chain.slice(0, i + 1), ...chain.slice(i)].map((entry, n) => ({ ...entry, seq: n + 1 }));
        expect(await verifyChain(twice, [])).toMatchObject({ holds: false, seq: i + 2 });
      }),
    );
  });

  it('a chain written anew from any entry on, by the head that was printed after it', async () => {
    await fc.assert(
      fc.asyncProperty(anyChain, fc.nat(), async (chain, which) => {
        const i = which % chain.length;
        const anew = chainOf(chain.map((entry, n) => (n === i ? `${entry.text} ` : entry.text)));
        expect(await verifyChain(anew, [headOf(chain)])).toMatchObject({ holds: false, seq: chain.length, fault: 'printed' });
      }),
    );
  });
});
