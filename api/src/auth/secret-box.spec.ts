import { describe, expect, it } from '@jest/globals';
import { randomBytes } from 'node:crypto';
import { SecretBox } from './secret-box.ts';

const key = (id: string) => `${id}:${randomBytes(32).toString('base64url')}`;
const secret = Buffer.from('twenty secret bytes.');

describe('a box for secrets', () => {
  const old = key('k1');
  const box = new SecretBox(old);

  it('gives back what was put in, and never the same text twice', () => {
    const [first, second] = [box.seal(secret, 'ann'), box.seal(secret, 'ann')];
    expect([box.open(first, 'ann'), box.open(second, 'ann')]).toEqual([secret, secret]);
    expect(first.secret.equals(second.secret)).toBe(false);
    expect(first.secret.includes(secret)).toBe(false);
  });

  it('refuses a text of somebody else, and one with a changed bit', () => {
    const sealed = box.seal(secret, 'ann');
    expect(() => box.open(sealed, 'ben')).toThrow();
    for (let at = 0; at < sealed.secret.length; at += 1) {
      const changed = Buffer.from(sealed.secret);
      changed[at] = (changed[at] ?? 0) ^ 1;
      expect(() => box.open({ ...sealed, secret: changed }, 'ann')).toThrow();
    }
    expect(() => box.open({ ...sealed, secret: sealed.secret.subarray(0, 20) }, 'ann')).toThrow();
  });

  it('opens what an older key closed, and closes with the first one', () => {
    const sealed = box.seal(secret, 'ann');
    const rotated = new SecretBox(`${key('k2')},${old}`);
    expect(rotated.open(sealed, 'ann')).toEqual(secret);
    const again = rotated.seal(secret, 'ann');
    expect(again.keyId).toBe('k2');
    expect(() => box.open(again, 'ann')).toThrow('SECOND_FACTOR_KEYS has no key "k2" any more.');
  });
});
