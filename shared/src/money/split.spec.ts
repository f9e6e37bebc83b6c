import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { split } from './index.ts';

const Exact = Decimal.clone({ precision: 60 });

describe('the cents left over', () => {
  it('go one each to the largest remainders, ties to the earlier part, as an independent decimal library has it', () => {
    const weights = fc.array(fc.integer({ min: 0, max: 1_000_000 }), { minLength: 1, maxLength: 30 }).filter((all) => all.some((weight) => weight > 0));
    fc.assert(
      fc.property(fc.integer({ min: -1_000_000_000_00, max: 1_000_000_000_00 }), weights, (amount, all) => {
        const whole = all.reduce((a, b) => a + b, 0);
        const exact = all.map((weight) => new Exact(Math.abs(amount)).times(weight).div(whole));
        const parts = exact.map((part) => part.floor().toNumber());
        const left = Math.abs(amount) - parts.reduce((a, b) => a + b, 0);
        exact
          // compared as whole numbers: amount × weight, less the part times the whole
          .map((_, i) => ({ i, remainder: (BigInt(Math.abs(amount)) * BigInt(all[i] ?? 0)) % BigInt(whole) }))
          .sort((a, b) => (a.remainder === b.remainder ? a.i - b.i : a.remainder > b.remainder ? -1 : 1))
          .slice(0, left)
          .forEach(({ i }) => (parts[i] = (parts[i] ?? 0) + 1));
        expect(split(amount, all)).toEqual(parts.map((part) => (amount < 0 && part !== 0 ? -part : part)));
        expect(split(amount, all.map((weight) => (weight === 0 ? 0 : -weight)))).toEqual(split(amount, all));
      }),
    );
  });
});
