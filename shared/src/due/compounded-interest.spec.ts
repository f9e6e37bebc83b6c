import { Decimal } from 'decimal.js';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInput } from '../arithmetic/index.ts';
import { compoundedLateInterest, lateInterest, type CompoundedLate } from './index.ts';

const late: CompoundedLate = { amountCents: 150_000, rate: 600, months: 2, days: 15 };

describe('interest that compounds by month', () => {
  // 5 CFR 1315.17(c) and the Fiscal Service's monthly-interest page (2023-06-30): $1,500 at 6 % for 2 months and 15 days is $18.83
  // (18.82509375). The page counts June 1 to June 15 as 15 days, so months and days are given, not dates.
  it('gives the federal formula\'s printed figure', () => {
    const { interestCents, steps } = compoundedLateInterest(late);
    expect(interestCents).toBe(1_883);
    expect(steps).toMatchObject({ result: { kind: 'money', cents: 1_883 }, exact: '18.82509375' });
  });

  // 5 CFR 1315.17(b): without a whole month it is the simple formula: $1,500 at 6.5 % for 10 days is $2.71.
  it('is simple interest below a month', () => {
    expect(compoundedLateInterest({ ...late, rate: 650, months: 0, days: 10 }).interestCents).toBe(271);
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1_000_000_000 }), fc.integer({ min: 0, max: 2_500 }), fc.integer({ min: 0, max: 30 }), (amountCents, rate, days) => {
        const simple = lateInterest({ rate, per: 'year', basis: 360, graceDays: 0, grace: 'forgives' }, { amountCents, dueOn: '2026-01-01', paidOn: `2026-01-${String(days + 1).padStart(2, '0')}` });
        expect(compoundedLateInterest({ amountCents, rate, months: 0, days }).interestCents).toBe(simple.interestCents);
      }),
    );
  });

  it('agrees with an independent decimal library, and never falls with time', () => {
    const Exact = Decimal.clone({ precision: 120 });
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 10_000_000_000 }), fc.integer({ min: 0, max: 10_000 }), fc.integer({ min: 0, max: 12 }), fc.integer({ min: 0, max: 29 }), (amountCents, rate, months, days) => {
        const r = new Exact(rate).div(10_000);
        const grown = new Exact(amountCents).times(r.plus(12).pow(months)).times(r.times(days).plus(360)).div(new Exact(12).pow(months).times(360));
        const { interestCents } = compoundedLateInterest({ amountCents, rate, months, days });
        expect(interestCents).toBe(grown.minus(amountCents).toDecimalPlaces(0, Decimal.ROUND_HALF_UP).toNumber());
        expect(compoundedLateInterest({ amountCents, rate, months, days: days + 1 }).interestCents).toBeGreaterThanOrEqual(interestCents);
      }),
    );
  });

  it.each<[string, Partial<CompoundedLate>, string]>([
    ['a negative amount', { amountCents: -1 }, 'amountCents'],
    ['half a cent', { amountCents: 0.5 }, 'amountCents'],
    ['a negative rate', { rate: -1 }, 'rate'],
    ['a rate over 100 %', { rate: 10_001 }, 'rate'],
    ['half a month', { months: 0.5 }, 'months'],
    ['more than a year', { months: 13 }, 'months'],
    ['negative days', { days: -1 }, 'days'],
    ['more days than a month has', { days: 31 }, 'days'],
    ['no number', { days: Number.NaN }, 'days'],
  ])('refuses %s and names the field', (_, more, field) => {
    expect(() => compoundedLateInterest({ ...late, ...more })).toThrow(InvalidInput);
    expect(() => compoundedLateInterest({ ...late, ...more })).toThrow(expect.objectContaining({ field }) as Error);
  });
});
