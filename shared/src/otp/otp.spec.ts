import { createHmac } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { base32, enrolmentUri, hotp, stepOfCode, timeStep } from './index.ts';

const hmac = (message: Uint8Array): Uint8Array => createHmac('sha1', '12345678901234567890').update(message).digest();
const at = (step: number): number => step * 30_000 + 7_000;

describe('codes by counter', () => {
  it('keep their leading zeros', () => {
    const codes = Array.from({ length: 400 }, (_, counter) => hotp(hmac, counter));
    expect(codes.every((code) => /^\d{6}$/.test(code))).toBe(true);
    expect(codes.some((code) => code.startsWith('0'))).toBe(true);
  });

  it.each([-1, 1.5, Number.NaN, 2 ** 53])('refuse %s as a counter', (counter) => expect(() => hotp(hmac, counter)).toThrow(RangeError));
});

describe('codes by time', () => {
  it('are good in their own step and one beside it, and in no other', () => {
    const code = hotp(hmac, 1000);
    expect([997, 998, 999, 1000, 1001, 1002, 1003].map((step) => stepOfCode(hmac, code, at(step), -1))).toEqual([null, null, 1000, 1000, 1000, null, null]);
  });

  it('are not good a second time, nor is one from before', () => {
    const codes = [999, 1000, 1001].map((step) => hotp(hmac, step));
    expect(codes.map((code) => stepOfCode(hmac, code, at(1000), 1000))).toEqual([null, null, 1001]);
  });

  it('change every thirty seconds', () => {
    expect([0, 29_999, 30_000, 59_999, 60_000].map(timeStep)).toEqual([0, 0, 1, 1, 2]);
  });
});

describe('keys as people type them', () => {
  // RFC 4648, section 10 (from memory), without its padding
  it.each([['f', 'MY'], ['fo', 'MZXQ'], ['foo', 'MZXW6'], ['foob', 'MZXW6YQ'], ['fooba', 'MZXW6YTB'], ['foobar', 'MZXW6YTBOI']])('write %s as %s', (text, written) => {
    expect(base32(new TextEncoder().encode(text))).toBe(written);
  });

  it('keep every bit', () => {
    const read = (text: string): string => [...text].map((letter) => 'ABCDEFGHIJKLMNOPQRSTUVWXYZ234567'.indexOf(letter).toString(2).padStart(5, '0')).join('');
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 40 }), (bytes) => {
        const bits = Array.from(bytes, (byte) => byte.toString(2).padStart(8, '0')).join('');
        expect(read(base32(bytes)).slice(0, bits.length)).toBe(bits);
      }),
    );
  });

  it('stand in the address that an authenticator reads, with names escaped', () => {
    const uri = new URL(enrolmentUri('Tallypole', 'a&b+c@x.example', new TextEncoder().encode('12345678901234567890')));
    expect([uri.protocol, uri.host, decodeURIComponent(uri.pathname)]).toEqual(['otpauth:', 'totp', '/Tallypole:a&b+c@x.example']);
    expect(Object.fromEntries(uri.searchParams)).toEqual({ secret: 'GEZDGNBVGY3TQOJQGEZDGNBVGY3TQOJQ', issuer: 'Tallypole', algorithm: 'SHA1', digits: '6', period: '30' });
  });
});
