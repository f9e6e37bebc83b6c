import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { canonicalText, type Json } from './index.ts';

const fromBits = (bits: string): number => {
  const view = new DataView(new ArrayBuffer(8));
  view.setBigUint64(0, BigInt(`0x${bits}`));
  return view.getFloat64(0);
};

describe('RFC 8785', () => {
  // Appendix B, samples of numbers: the bits of the double and its text.
  it.each([
    ['0000000000000000', '0'],
    ['8000000000000000', '0'],
    ['0000000000000001', '5e-324'],
    ['8000000000000001', '-5e-324'],
    ['7fefffffffffffff', '1.7976931348623157e+308'],
    ['ffefffffffffffff', '-1.7976931348623157e+308'],
    ['4340000000000000', '9007199254740992'],
    ['c340000000000000', '-9007199254740992'],
    ['4430000000000000', '295147905179352830000'],
    ['44b52d02c7e14af5', '9.999999999999997e+22'],
    ['44b52d02c7e14af6', '1e+23'],
    ['44b52d02c7e14af7', '1.0000000000000001e+23'],
    ['444b1ae4d6e2ef4e', '999999999999999700000'],
    ['444b1ae4d6e2ef4f', '999999999999999900000'],
    ['444b1ae4d6e2ef50', '1e+21'],
    ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
    ['3eb0c6f7a0b5ed8d', '0.000001'],
    ['41b3de4355555553', '333333333.3333332'],
    ['41b3de4355555554', '333333333.33333325'],
    ['41b3de4355555555', '333333333.3333333'],
    ['41b3de4355555556', '333333333.3333334'],
    ['41b3de4355555557', '333333333.33333343'],
    ['becbf647612f3696', '-0.0000033333333333333333'],
    ['43143ff3c1cb0959', '1424953923781206.2'],
  ])('writes the double %s as %s', (bits, text) => expect(canonicalText(fromBits(bits))).toBe(text));

  // Section 3.2.2 and 3.2.4: the sample and its UTF-8 bytes.
  it('writes the sample of the standard to the byte', () => {
    const sample = JSON.parse(String.raw`{"numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001], "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/", "literals": [null, true, false]}`) as Json;
    const text = canonicalText(sample);
    expect(text).toBe(String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`);
    expect(Buffer.from(text, 'utf8').toString('hex')).toBe('7b226c69746572616c73223a5b6e756c6c2c747275652c66616c73655d2c226e756d62657273223a5b3333333333333333332e333333333333332c31652b33302c342e352c302e3030322c31652d32375d2c22737472696e67223a22e282ac245c75303030665c6e4127425c225c5c5c5c5c222f227d');
  });

  // Section 3.2.3: names in the order of their UTF-16 code units, not of their code points.
  it('sorts names as the standard does', () => {
    const names = { '\u20ac': 'Euro Sign', '\r': 'Carriage Return', '\ufb33': 'Hebrew Letter Dalet With Dagesh', '1': 'One', '\u{1f600}': 'Emoji: Grinning Face', '\u0080': 'Control', '\u00f6': 'Latin Small Letter O With Diaeresis' };
    expect(canonicalText(names)).toBe('{"\\r":"Carriage Return","1":"One","\u0080":"Control","\u00f6":"Latin Small Letter O With Diaeresis","\u20ac":"Euro Sign","\u{1f600}":"Emoji: Grinning Face","\ufb33":"Hebrew Letter Dalet With Dagesh"}');
  });

  // The standard's public test data (github cyberphone/json-canonicalization, testdata: structures, weird).
  it('writes its test data', () => {
    expect(canonicalText({ '1': { f: { f: 'hi', F: 5 }, '\n': 56.0 }, '10': {}, '': 'empty', a: {}, '111': [{}], A: {} })).toBe('{"":"empty","1":{"\\n":56,"f":{"F":5,"f":"hi"}},"10":{},"111":[{}],"A":{},"a":{}}');
    expect(canonicalText({ '\u20ac': 'Euro Sign', '1': 'One', '\u0080': 'Control\u007f', '\ud83d\ude02': 'Smiley', '</script>': 'Browser Challenge' })).toBe('{"1":"One","</script>":"Browser Challenge","\u0080":"Control\u007f","\u20ac":"Euro Sign","\ud83d\ude02":"Smiley"}');
  });
});

describe('properties', () => {
  it('reads back as the same value, is its own canonical text, and does not depend on the order of members', () => {
    const shuffled = (value: Json): Json => {
      if (Array.isArray(value)) return (value as readonly Json[]).map(shuffled);
      if (value === null || typeof value !== 'object') return value;
      return Object.fromEntries(Object.entries(value).reverse().map(([name, member]) => [name, member === undefined ? undefined : shuffled(member)]));
    };
    fc.assert(
      fc.property(fc.jsonValue({ stringUnit: 'binary' }) as fc.Arbitrary<Json>, (value) => {
        const text = canonicalText(value);
        expect(JSON.parse(text)).toEqual(JSON.parse(JSON.stringify(value)));
        expect(canonicalText(JSON.parse(text) as Json)).toBe(text);
        expect(canonicalText(shuffled(value))).toBe(text);
      }),
    );
  });
  it('leaves members out that are undefined', () => expect(canonicalText({ b: undefined, a: 1 })).toBe('{"a":1}'));
});

describe('what JSON cannot hold', () => {
  const itself: { inner?: unknown } = {};
  itself.inner = itself;
  const fails: [string, unknown, string][] = [
    ['not a number', { a: Number.NaN }, 'value.a'],
    ['infinity', [1, -Infinity], 'value.1'],
    ['a big integer', { a: 1n }, 'value.a'],
    ['undefined', undefined, 'value'],
    ['undefined in a list', [undefined], 'value.0'],
    ['a hole in a list', Array(1), 'value.0'],
    ['a function', { a: () => 1 }, 'value.a'],
    ['a date', { at: new Date(0) }, 'value.at'],
    ['a map', new Map(), 'value'],
    ['half of a pair', { a: ['\ud83d'] }, 'value.a.0'],
    ['half of a pair in a name', { '\ude00': 1 }, 'value.\ude00'],
    ['halves the wrong way round', '\ude00\ud83d', 'value'],
    ['a value that holds itself', itself, `value${'.inner'.repeat(501)}`],
  ];
  it.each(fails)('refuses %s and names the place', (_, value, field) => {
    expect(() => canonicalText(value as Json)).toThrow(InvalidInput);
    expect(() => canonicalText(value as Json)).toThrow(expect.objectContaining({ field }) as Error);
  });
});
