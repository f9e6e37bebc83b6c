import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { cents, divideRounded, extend, extendExact, formatAmount, formatChange, formatFigure, formatMoney, formatRate, minus, parseMoney, parseRate, percentExact, percentOf, split, sum } from './index.ts';

const amount = fc.integer({ min: -1_000_000_000_00, max: 1_000_000_000_00 });

describe('rounding', () => {
  it('rounds half away from zero, both ways', () => {
    expect([divideRounded(25n, 10n), divideRounded(-25n, 10n), divideRounded(24n, 10n), divideRounded(-24n, 10n)]).toEqual([3, -3, 2, -2]);
  });
  it('agrees with an independent decimal library', () => {
    fc.assert(
      fc.property(amount, fc.integer({ min: 0, max: 10_000 }), (a, r) => {
        const exact = new Decimal(a).times(r).div(10_000);
        expect(percentOf(a, r)).toBe(exact.toDecimalPlaces(0, Decimal.ROUND_HALF_UP).toNumber() + 0);
        expect(new Decimal(percentExact(a, r)).times(100).equals(exact)).toBe(true);
      }),
    );
  });
  it('extends quantity by unit cost without a binary float', () => {
    expect(extend('28', '43.1875')).toBe(120_925);
    expect(extend('0.1', '0.2')).toBe(2);
    expect(extendExact('0.15', '0.1')).toBe('0.015');
    expect(extend('1.005', '100')).toBe(10_050);
  });
});

describe('splitting', () => {
  it('adds up exactly, keeps the sign, mirrors a negative amount, and strays by less than a cent', () => {
    const weights = fc.array(fc.integer({ min: 0, max: 1_000_000 }), { minLength: 1, maxLength: 40 }).filter((w) => w.some((x) => x > 0));
    fc.assert(
      fc.property(amount, weights, (a, w) => {
        const parts = split(a, w);
        expect(sum(parts)).toBe(a);
        expect(split(-a, w)).toEqual(parts.map((part) => (part === 0 ? 0 : -part)));
        const whole = w.reduce((x, y) => x + y, 0);
        parts.forEach((part, i) => expect(Math.abs(part - (a * (w[i] ?? 0)) / whole)).toBeLessThan(1.001));
      }),
    );
  });
  it('gives cents left over to the largest remainders, ties to the earlier part', () => {
    expect(split(100, [1, 1, 1])).toEqual([34, 33, 33]);
    expect(split(5, [1, 2])).toEqual([2, 3]);
    expect(split(-100, [-1, -1, -1])).toEqual([-34, -33, -33]);
  });
});

describe('reading and printing', () => {
  it.each([
    ['12,400', 1_240_000], ['12400.5', 1_240_050], ['$1,234.56', 123_456], ['-250', -25_000], ['−250.00', -25_000], ['(250.00)', -25_000],
    ['$ 12 400', 1_240_000], ['-$5', -500], ['$-5', -500], ['.5', 50], ['7.', 700], ['+3', 300], ['0', 0], ['1\u202f000', 100_000],
  ])('reads %s', (typed, expected) => expect(parseMoney(typed)).toBe(expected));
  it.each(['', '$', '-', '.', 'ten', '1.234', '1,23', '12,4000', '1.2.3', '1e5', '--5', '5-', '99999999999999999'])('refuses %j', (typed) => {
    expect(() => parseMoney(typed)).toThrow(InvalidInput);
  });
  it.each([['10', 1000], ['7.25 %', 725], ['0.5', 50], ['100', 10_000]])('reads the rate %s', (typed, expected) => expect(parseRate(typed)).toBe(expected));
  it.each(['', '%', '-1', '1.234', 'x'])('refuses the rate %j', (typed) => expect(() => parseRate(typed)).toThrow(InvalidInput));
  it('prints with a real minus sign and reads back what it printed', () => {
    expect([formatMoney(-25_000), formatChange(391_240), formatChange(0), formatAmount(123_456_789), formatRate(725), formatRate(1000)]).toEqual(['−$250.00', '+$3,912.40', '+$0.00', '1,234,567.89', '7.25 %', '10 %']);
    fc.assert(
      fc.property(amount, (a) => {
        expect(parseMoney(formatMoney(a))).toBe(a);
      }),
    );
  });
});

describe('bad money', () => {
  const fails: [string, () => unknown][] = [
    ['a fraction of a cent', () => cents(1.5)],
    ['not a number', () => cents(Number.NaN)],
    ['infinity', () => cents(Infinity)],
    ['an unsafe integer', () => cents(2 ** 53)],
    ['an overflowing sum', () => sum([Number.MAX_SAFE_INTEGER, 1])],
    ['an overflowing difference', () => minus(-Number.MAX_SAFE_INTEGER, 1)],
    ['a division by zero', () => divideRounded(1n, 0n)],
    ['weights of mixed sign', () => split(1, [1, -1])],
    ['weights of zero', () => split(1, [0, 0])],
    ['no weights', () => split(1, [])],
    ['a fractional weight', () => split(1, [0.5])],
  ];
  it.each(fails)('refuses %s', (_, run) => expect(run).toThrow(InvalidInput));
  it('has no negative zero', () => expect(Object.is(cents(-0), 0)).toBe(true));
});

it('prints figures of every kind', () => {
  const printed = [{ kind: 'money', cents: -123_456 }, { kind: 'rate', basisPoints: 725 }, { kind: 'quantity', value: '28', unit: 'ea' }, { kind: 'date', date: '2027-03-14' }, { kind: 'text', text: 'as drawn' }] as const;
  expect(printed.map((figure) => formatFigure(figure, (date) => date.slice(0, 4)))).toEqual(['−$1,234.56', '7.25 %', '28 ea', '2027', 'as drawn']);
});
